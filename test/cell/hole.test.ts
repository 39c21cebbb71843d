import type { CellShape } from '../../solver/cell/shape.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { verify } from '../verify/row.ts';
import { graded, gridMesh } from './grid-mesh.ts';
import { tetraPortMatrix } from './tetra.ts';

/** A port at the end of a channel of width 2 w and depth 1: its hole, of radius a, in the roof. */
interface Port {
  readonly w: number;
  readonly a: number;
  /** From the hole's middle to the channel's face. */
  readonly leg: number;
}

/** As the program has it: the rim is a face. */
function asCell({ w, a, leg }: Port): CellShape {
  const wall = (x: number, y: number) => ({ x, y, bulge: 0, tag: 0 });
  const outer = [wall(-leg, -w), wall(w, -w), wall(w, w), { x: -leg, y: w, bulge: 0, tag: 1 }];
  // Two half circles, clockwise.
  const rim = [
    { x: a, y: 0, bulge: -1, tag: 2 },
    { x: -a, y: 0, bulge: -1, tag: 2 },
  ];
  return { loops: [outer, rim], depth: 1, faces: 2, profile: { kind: 'rectangle' } };
}

/** Resistance from the face to the top of the bore, and how long the bore is. */
function asTetrahedra({ w, a, leg }: Port, fine: number): { resistance: number; bore: number } {
  const inner = graded(0, a, a / fine, a / fine, 'none');
  const outer = graded(a, w, (w - a) / fine, (w - a) / fine, 'none').slice(1);
  const half = [...inner, ...outer];
  const both = [
    ...half
      .slice(1)
      .map((v) => -v)
      .reverse(),
    ...half,
  ];
  const xs = [...graded(-leg, -w, w / fine, w / fine, 'none').slice(0, -1), ...both];
  // Squares round the hole's middle become circles up to its rim, and squares again at the walls.
  const round = (x: number, y: number): [number, number] => {
    const m = Math.max(Math.abs(x), Math.abs(y));
    if (m === 0 || m >= w || x < -w) return [x, y];
    const part = m <= a ? 1 : (w - m) / (w - a);
    const r = m * (1 - part) + (m / Math.hypot(x, y)) * m * part;
    return [(x * r) / m, (y * r) / m];
  };
  const plan = gridMesh(
    xs,
    both,
    (x) => (x < -leg + 1e-9 ? 1 : 0),
    () => true,
    round,
  );
  const depths = [-1, -0.7, 0, 0.7, 1];
  const top = [1.3, 1.8, 2.8].map((s) => 1 + (s - 1) * 2 * a);
  const matrix = tetraPortMatrix(plan, 2, 0.5, [...depths, ...top], undefined, {
    from: depths.length - 1,
    keeps: (x, y) => Math.hypot(x, y) < a,
  });
  return { resistance: 1 / matrix[0]!, bore: (top.at(-1)! - 1) / 2 };
}

for (const [name, port] of [
  ['hole as wide as deep', { w: 1, a: 0.5, leg: 3 }],
  ['hole three times as wide as deep', { w: 2, a: 1.5, leg: 4 }],
] as const) {
  verify(
    {
      quantity: 'error of the flow through a channel into its hole, over its bound',
      check: 'band',
      at: name,
      source:
        'quadratic tetrahedra of channel and bore, direct solution, less the bore by Hagen and Poiseuille',
      tolerance: 1,
    },
    () => {
      const rim = solveCell(asCell(port), { flow: 0.002, peak: null });
      const { resistance, bore } = asTetrahedra(port, 2);
      const pipe = (8 * bore) / (Math.PI * port.a ** 4);
      return Math.abs((resistance - pipe) * rim.portMatrix[0]! - 1) / rim.flowError;
    },
  );
}
