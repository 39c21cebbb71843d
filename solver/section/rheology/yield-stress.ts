import { edgeValues, shapeValues } from '../basis.ts';
import type { SectionElements } from './elements.ts';

/**
 * Mean wall stress at which a fluid of yield stress 1 starts to flow through a section. It is below 1:
 * the plug that moves first leaves the corners behind. The least gradient is the yield stress times the
 * smallest ratio of boundary to area of any part of the section (Mosolov and Miasnikov 1965, J. Appl.
 * Math. Mech. 29, 545), and that part is what a disc of radius r can sweep, r such that the points
 * farther than r from the wall cover the area pi r^2 (Kawohl and Lachand-Robert 2006, Pacific J. Math.
 * 225, 103, for convex shapes; it holds without necks: Leonardi, Neumayer and Saracco 2017, Calc. Var.
 * 56, 26); the ratio is then 1/r. Round and ring-like sections yield at 1 exactly.
 *
 * @param copies how many mirror images of the mesh make the whole section
 */
export function yieldStressOf(elements: SectionElements, copies: number): number {
  const parts = smallTriangles(elements, wallChords(elements));
  let low = 0;
  let high = 0;
  for (let k = 0; k < parts.length; k += 4) high = Math.max(high, parts[k + 1], parts[k + 2], parts[k + 3]);
  for (let i = 0; i < 60; i += 1) {
    const r = (low + high) / 2;
    if (copies * areaBeyond(parts, r) > Math.PI * r * r) low = r;
    else high = r;
  }
  return elements.area / elements.perimeter / ((low + high) / 2);
}

/** Cuts per triangle side. */
const CUTS = 6;

/** Every triangle cut into small ones: area and the wall distances of their corners, four numbers each. */
function smallTriangles(elements: SectionElements, walls: Float64Array): Float64Array {
  const { x, y, triangles } = elements.mesh;
  const out = new Float64Array((triangles.length / 6) * CUTS * CUTS * 4);
  const px = new Float64Array(((CUTS + 1) * (CUTS + 2)) / 2);
  const py = new Float64Array(px.length);
  const d = new Float64Array(px.length);
  const n = new Float64Array(6);
  let at = 0;
  for (let t = 0; t < triangles.length; t += 6) {
    let k = 0;
    for (let j = 0; j <= CUTS; j += 1) {
      for (let i = 0; i <= CUTS - j; i += 1, k += 1) {
        shapeValues(i / CUTS, j / CUTS, n);
        px[k] = 0;
        py[k] = 0;
        for (let m = 0; m < 6; m += 1) {
          px[k] += n[m] * x[triangles[t + m]];
          py[k] += n[m] * y[triangles[t + m]];
        }
        d[k] = distance(walls, px[k], py[k]);
      }
    }
    const add = (a: number, b: number, c: number): void => {
      const twice = (px[b] - px[a]) * (py[c] - py[a]) - (px[c] - px[a]) * (py[b] - py[a]);
      out.set([twice / 2, d[a], d[b], d[c]], at);
      at += 4;
    };
    for (let j = 0, row = 0; j < CUTS; j += 1) {
      const next = row + CUTS - j + 1;
      for (let i = 0; i < CUTS - j; i += 1) {
        add(row + i, row + i + 1, next + i);
        if (i < CUTS - j - 1) add(row + i + 1, next + i + 1, next + i);
      }
      row = next;
    }
  }
  return out;
}

/** Area where the distance, linear on each small triangle, is above r. */
function areaBeyond(parts: Float64Array, r: number): number {
  let sum = 0;
  for (let k = 0; k < parts.length; k += 4) {
    const area = parts[k];
    const a = parts[k + 1] - r;
    const b = parts[k + 2] - r;
    const c = parts[k + 3] - r;
    const low = Math.min(a, b, c);
    const high = Math.max(a, b, c);
    if (low >= 0) sum += area;
    else if (high > 0) {
      const middle = a + b + c - low - high;
      if (middle <= 0) sum += (area * high * high) / ((high - low) * (high - middle));
      else sum += area * (1 - (low * low) / ((high - low) * (middle - low)));
    }
  }
  return sum;
}

/** x0 y0 x1 y1 of straight pieces along the wall, curved edges in eight. */
function wallChords(elements: SectionElements): Float64Array {
  const { x, y, boundary } = elements.mesh;
  const out: number[] = [];
  const n = new Float64Array(3);
  for (const e of elements.wallEdges) {
    const [a, b, m] = boundary.subarray(3 * e, 3 * e + 3);
    const bend = Math.hypot(x[a] + x[b] - 2 * x[m], y[a] + y[b] - 2 * y[m]);
    const cuts = bend > 1e-12 * Math.hypot(x[b] - x[a], y[b] - y[a]) ? 8 : 1;
    const point = (s: number): [number, number] => {
      edgeValues(s, n);
      return [n[0] * x[a] + n[1] * x[b] + n[2] * x[m], n[0] * y[a] + n[1] * y[b] + n[2] * y[m]];
    };
    for (let k = 0; k < cuts; k += 1) out.push(...point(k / cuts), ...point((k + 1) / cuts));
  }
  return Float64Array.from(out);
}

function distance(walls: Float64Array, px: number, py: number): number {
  let least = Number.POSITIVE_INFINITY;
  for (let k = 0; k < walls.length; k += 4) {
    const dx = walls[k + 2] - walls[k];
    const dy = walls[k + 3] - walls[k + 1];
    const qx = px - walls[k];
    const qy = py - walls[k + 1];
    const t = Math.min(1, Math.max(0, (qx * dx + qy * dy) / (dx * dx + dy * dy)));
    const away = (qx - t * dx) ** 2 + (qy - t * dy) ** 2;
    if (away < least) least = away;
  }
  return Math.sqrt(least);
}
