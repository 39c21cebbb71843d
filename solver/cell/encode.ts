import type { Mesh } from '../mesh/mesh.ts';
import type { CellFields, ShapeSolution } from './cell.ts';

/**
 * A solution as bytes for the project file: a header of 16 doubles, then the arrays one after the other,
 * each starting at a multiple of 8, little-endian as all machines that this runs on.
 */
const MAGIC = 0x43_57_43_31;
const HEADER = 16;
/** Beyond this nothing that was written here goes; a longer count is damage. */
const MOST = 5e7;

export function encodeSolution(solution: ShapeSolution, withFields = true): Uint8Array {
  const { fields } = solution;
  const kept = withFields ? fields : null;
  const mesh = kept?.mesh;
  const head = Float64Array.of(
    MAGIC,
    solution.faces,
    solution.asked.flow,
    solution.asked.peak ?? Number.NaN,
    solution.flowError,
    solution.peakError ?? Number.NaN,
    solution.sharp ? 1 : 0,
    solution.checks.reciprocity,
    solution.checks.conservation,
    solution.checks.dissipation,
    kept ? kept.modes : 0,
    mesh ? mesh.vertexCount : 0,
    mesh ? mesh.nodeCount : 0,
    mesh ? mesh.triangles.length / 6 : 0,
    mesh ? mesh.boundaryTag.length : 0,
    0,
  );
  const parts: (Float64Array | Float32Array | Int32Array)[] = [head, solution.portMatrix];
  if (kept && mesh)
    parts.push(
      mesh.x,
      mesh.y,
      mesh.triangles,
      mesh.boundary,
      mesh.boundaryTag,
      kept.inPlane,
      kept.across,
      kept.pressure,
      kept.wallAlong,
      kept.wallAcross,
    );
  let length = 0;
  for (const part of parts) length += Math.ceil(part.byteLength / 8) * 8;
  const out = new Uint8Array(length);
  let at = 0;
  for (const part of parts) {
    out.set(new Uint8Array(part.buffer, part.byteOffset, part.byteLength), at);
    at += Math.ceil(part.byteLength / 8) * 8;
  }
  return out;
}

/** The solution again, or null where the bytes are not one that `encodeSolution` wrote whole. */
export function decodeSolution(bytes: Uint8Array): ShapeSolution | null {
  if (bytes.byteLength < 8 * HEADER || bytes.byteLength % 8 !== 0) return null;
  // A copy, so that all arrays are aligned whatever they were cut out of.
  const { buffer } = bytes.slice();
  const head = new Float64Array(buffer, 0, HEADER);
  const [magic, faces, , , flowError, , , , , , modes, vertices, nodes, triangles, edges] = head;
  if (magic !== MAGIC) return null;
  for (const count of [faces, modes, vertices, nodes, triangles, edges])
    if (!(Number.isInteger(count) && count >= 0 && count <= MOST)) return null;
  if (faces < 1 || !(flowError >= 0)) return null;

  const n = faces - 1;
  const sizes: [typeof Float64Array | typeof Float32Array | typeof Int32Array, number][] = [
    [Float64Array, faces * faces],
  ];
  if (modes > 0)
    sizes.push(
      [Float64Array, nodes],
      [Float64Array, nodes],
      [Int32Array, 6 * triangles],
      [Int32Array, 3 * edges],
      [Int32Array, edges],
      [Float32Array, n * modes * 2 * nodes],
      [Float32Array, n * (modes - 1) * nodes],
      [Float32Array, n * modes * vertices],
      [Float32Array, n * modes * 3 * edges],
      [Float32Array, n * (modes - 1) * 3 * edges],
    );
  let end = 8 * HEADER;
  const starts = sizes.map(([type, count]) => {
    const start = end;
    end += Math.ceil((count * type.BYTES_PER_ELEMENT) / 8) * 8;
    return start;
  });
  if (end !== bytes.byteLength) return null;
  const arrays = sizes.map(([type, count], i) => new type(buffer, starts[i], count));
  for (const array of arrays)
    if (!(array instanceof Int32Array)) for (const value of array) if (!Number.isFinite(value)) return null;

  let fields: CellFields | null = null;
  if (modes > 0) {
    const mesh: Mesh = {
      vertexCount: vertices,
      nodeCount: nodes,
      x: arrays[1] as Float64Array,
      y: arrays[2] as Float64Array,
      triangles: arrays[3] as Int32Array,
      boundary: arrays[4] as Int32Array,
      boundaryTag: arrays[5] as Int32Array,
    };
    if (vertices > nodes || !sound(mesh, faces)) return null;
    fields = {
      mesh,
      modes,
      inPlane: arrays[6] as Float32Array,
      across: arrays[7] as Float32Array,
      pressure: arrays[8] as Float32Array,
      wallAlong: arrays[9] as Float32Array,
      wallAcross: arrays[10] as Float32Array,
    };
  }
  return {
    faces,
    asked: { flow: head[2], peak: Number.isNaN(head[3]) ? null : head[3] },
    portMatrix: arrays[0] as Float64Array,
    flowError,
    peakError: Number.isNaN(head[5]) ? null : head[5],
    sharp: head[6] === 1,
    checks: { reciprocity: head[7], conservation: head[8], dissipation: head[9] },
    fields,
  };
}

/** All indices in range, corners among the first nodes. */
function sound(mesh: Mesh, faces: number): boolean {
  const { triangles, boundary, boundaryTag, vertexCount, nodeCount } = mesh;
  for (let i = 0; i < triangles.length; i += 1)
    if (!(triangles[i] >= 0 && triangles[i] < (i % 6 < 3 ? vertexCount : nodeCount))) return false;
  for (let i = 0; i < boundary.length; i += 1)
    if (!(boundary[i] >= 0 && boundary[i] < (i % 3 < 2 ? vertexCount : nodeCount))) return false;
  for (const tag of boundaryTag) if (!(tag >= 0 && tag <= faces)) return false;
  return true;
}
