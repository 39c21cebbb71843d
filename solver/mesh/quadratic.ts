import { pointAt } from './arc.ts';
import type { Boundary } from './boundary.ts';
import type { Mesh } from './mesh.ts';
import type { Triangulation } from './triangulation.ts';

/**
 * Six-node triangles: a node in the middle of each edge, on the arc where the edge lies on one.
 * Triangles and nodes are numbered breadth first from one end of the shape, so that neighbours lie
 * close in memory. `vertexNode[v]` is the node of vertex v.
 */
export function quadraticMesh(
  mesh: Triangulation,
  boundary: Boundary,
): { mesh: Mesh; vertexNode: Int32Array } {
  const order = breadthFirst(mesh, breadthFirst(mesh, 0)[mesh.triangleCount - 1]);
  const { vertex, twin } = mesh;
  const vertexNode = new Int32Array(mesh.vertexCount).fill(-1);
  const edgeNode = new Int32Array(3 * mesh.triangleCount).fill(-1);
  let vertices = 0;
  let edges = 0;
  for (const t of order) {
    for (let e = 3 * t; e < 3 * t + 3; e += 1) {
      if (vertexNode[vertex[e]] === -1) {
        vertexNode[vertex[e]] = vertices;
        vertices += 1;
      }
      if (edgeNode[e] !== -1) continue;
      edgeNode[e] = edges;
      if (twin[e] >= 0) edgeNode[twin[e]] = edges;
      edges += 1;
    }
  }

  const nodeCount = vertices + edges;
  const x = new Float64Array(nodeCount);
  const y = new Float64Array(nodeCount);
  for (let v = 0; v < mesh.vertexCount; v += 1) {
    x[vertexNode[v]] = mesh.x[v];
    y[vertexNode[v]] = mesh.y[v];
  }
  const triangles = new Int32Array(6 * mesh.triangleCount);
  const pieceEdge = new Int32Array(boundary.count);
  const point = [0, 0];
  let at = 0;
  for (const t of order) {
    for (let i = 0; i < 3; i += 1) {
      const e = 3 * t + i;
      const a = vertex[e];
      const b = vertex[i === 2 ? e - 2 : e + 1];
      const middle = vertices + edgeNode[e];
      triangles[at + i] = vertexNode[a];
      triangles[at + 3 + i] = middle;
      x[middle] = (mesh.x[a] + mesh.x[b]) / 2;
      y[middle] = (mesh.y[a] + mesh.y[b]) / 2;
      if (twin[e] >= 0) continue;
      const piece = -1 - twin[e];
      pieceEdge[piece] = middle;
      const curve = boundary.curves[boundary.edge[piece]];
      if (curve.sweep === 0) continue;
      pointAt(curve, (boundary.from[piece] + boundary.to[piece]) / 2, point);
      x[middle] = point[0];
      y[middle] = point[1];
    }
    at += 6;
  }

  const edgeList = new Int32Array(3 * boundary.count);
  const boundaryTag = new Int32Array(boundary.count);
  for (let i = 0; i < boundary.count; i += 1) {
    edgeList[3 * i] = vertexNode[i];
    edgeList[3 * i + 1] = vertexNode[boundary.next[i]];
    edgeList[3 * i + 2] = pieceEdge[i];
    boundaryTag[i] = boundary.tag[boundary.edge[i]];
  }
  return {
    mesh: { vertexCount: vertices, nodeCount, x, y, triangles, boundary: edgeList, boundaryTag },
    vertexNode,
  };
}

function breadthFirst(mesh: Triangulation, first: number): Int32Array {
  const { twin, triangleCount } = mesh;
  const order = new Int32Array(triangleCount);
  const seen = new Uint8Array(triangleCount);
  let count = 1;
  order[0] = first;
  seen[first] = 1;
  for (let k = 0; k < count; k += 1) {
    const base = 3 * order[k];
    for (let e = base; e < base + 3; e += 1) {
      if (twin[e] < 0) continue;
      const t = Math.floor(twin[e] / 3);
      if (seen[t]) continue;
      seen[t] = 1;
      order[count] = t;
      count += 1;
    }
  }
  return order;
}

/** The mirror image's triangles and boundary turn the other way; set them right, in place. */
export function turnOver(mesh: Mesh): void {
  const { triangles, boundary, boundaryTag } = mesh;
  for (let t = 0; t < triangles.length; t += 6) {
    swap(triangles, t + 1, t + 2);
    swap(triangles, t + 3, t + 5);
  }
  const count = boundaryTag.length;
  for (let i = 0; i < count; i += 1) swap(boundary, 3 * i, 3 * i + 1);
  for (let i = 0, j = count - 1; i < j; i += 1, j -= 1) {
    swap(boundaryTag, i, j);
    for (let k = 0; k < 3; k += 1) swap(boundary, 3 * i + k, 3 * j + k);
  }
}

function swap(array: Int32Array, i: number, j: number): void {
  const kept = array[i];
  array[i] = array[j];
  array[j] = kept;
}
