import { type DepthModes, standardModes } from '../../solver/cell/depth.ts';
import { faceLoads, type Plane } from '../../solver/cell/plane.ts';
import { factoriseIndefinite, solveIndefinite } from '../../solver/sparse/indefinite.ts';
import type { SymmetricMatrix } from '../../solver/sparse/matrix.ts';

const HALF = 0.5;
const EPSILON = 1e-9;

/** The same discrete equations as the pressure iteration's, factored whole at once: port matrix by rows. */
export function saddlePortMatrix(plane: Plane, modes: number, faces: number): Float64Array {
  const depth: DepthModes = standardModes(modes);
  const { count } = plane;
  const corners = plane.mesh.vertexCount;
  const across = modes - 1;
  const pressureStart = (2 * modes + across) * count;
  const total = pressureStart + modes * corners;
  const entries: [number, number, number][] = [];
  const { columnStart, row } = plane.velocity;
  const block = (start: number, lambda: number): void => {
    for (let j = 0; j < count; j += 1)
      for (let e = columnStart[j]!; e < columnStart[j + 1]!; e += 1)
        entries.push([
          start + row[e]!,
          start + j,
          plane.stiffness[e]! + (lambda / HALF ** 2) * plane.mass[e]!,
        ]);
  };
  for (let k = 0; k < modes; k += 1)
    for (let part = 0; part < 2; part += 1) block((2 * k + part) * count, depth.inPlaneLambda[k]!);
  for (let m = 0; m < across; m += 1) block((2 * modes + m) * count, depth.acrossLambda[m]!);
  for (let q = 0; q < modes; q += 1)
    for (let v = 0; v < corners; v += 1)
      for (let e = plane.rowStart[v]!; e < plane.rowStart[v + 1]!; e += 1) {
        const p = pressureStart + q * corners + v;
        for (let k = 0; k < modes; k += 1) {
          const c = depth.coupling[q * modes + k]!;
          entries.push([p, 2 * k * count + plane.column[e]!, -c * plane.gradX[e]!]);
          entries.push([p, (2 * k + 1) * count + plane.column[e]!, -c * plane.gradY[e]!]);
        }
        for (let m = 0; m < across; m += 1)
          entries.push([
            p,
            (2 * modes + m) * count + plane.column[e]!,
            (-depth.acrossCoupling[q * across + m]! / HALF) * plane.mixed[e]!,
          ]);
      }
  const masses: [number, number, number][] = [];
  for (let q = 0; q < modes; q += 1)
    for (let j = 0; j < corners; j += 1)
      for (let e = plane.pressure.columnStart[j]!; e < plane.pressure.columnStart[j + 1]!; e += 1) {
        const start = pressureStart + q * corners;
        masses.push([start + plane.pressure.row[e]!, start + j, -EPSILON * plane.pressureMass[e]!]);
      }
  const factor = factoriseIndefinite(columns(total, [...entries, ...masses]));

  const loads = faceLoads(plane, faces).map((load) => {
    const out = new Float64Array(total);
    for (let k = 0; k < modes; k += 1)
      for (let i = 0; i < 2 * count; i += 1) out[2 * k * count + i] = depth.coupling[k]! * load[i]!;
    return out;
  });
  const out = new Float64Array(faces * faces);
  loads.forEach((load, j) => {
    const x = load.slice();
    solveIndefinite(factor, x);
    // What the small compressibility did is taken out by refinement.
    for (let round = 0; round < 2; round += 1) {
      const rest = load.slice();
      for (const [r, c, value] of entries) {
        rest[r]! -= value * x[c]!;
        if (r !== c) rest[c]! -= value * x[r]!;
      }
      solveIndefinite(factor, rest);
      for (let i = 0; i < total; i += 1) x[i]! += rest[i]!;
    }
    loads.forEach((other, i) => {
      let sum = 0;
      for (let k = 0; k < pressureStart; k += 1) sum += other[k]! * x[k]!;
      out[i * faces + j] = 2 * HALF * sum;
    });
  });
  return out;
}

/** Lower triangle by compressed columns from entries with row >= column, equal places added. */
function columns(n: number, entries: readonly [number, number, number][]): SymmetricMatrix {
  const sorted = entries
    .map(([r, c, value]) => [Math.max(r, c), Math.min(r, c), value] as const)
    .sort((a, b) => a[1] - b[1] || a[0] - b[0]);
  const columnStart = new Int32Array(n + 1);
  const row: number[] = [];
  const value: number[] = [];
  let last = -1;
  let lastColumn = -1;
  for (const [r, c, v] of sorted) {
    if (c === lastColumn && r === last) value[value.length - 1]! += v;
    else {
      row.push(r);
      value.push(v);
      columnStart[c + 1]! += 1;
    }
    last = r;
    lastColumn = c;
  }
  for (let j = 0; j < n; j += 1) columnStart[j + 1]! += columnStart[j]!;
  return { n, columnStart, row: Int32Array.from(row), value: Float64Array.from(value) };
}
