import { analyse } from '../../solver/sparse/analyse.ts';
import { factorise } from '../../solver/sparse/factorise.ts';
import { type ElementPattern, patternOfElements } from '../../solver/sparse/pattern.ts';
import { solve } from '../../solver/sparse/solve.ts';
import { Python } from './native/scipy.ts';
import type { BenchRow } from './row.ts';

const RUNS = 41;

/** The plane finite-element matrix of matrices.py: quadratic triangles, two a square, the rim held fixed. */
function planeMatrix(side: number): ElementPattern {
  const across = 2 * side + 1;
  const number = (x: number, y: number) =>
    x > 0 && y > 0 && x < across - 1 && y < across - 1 ? (y - 1) * (across - 2) + x - 1 : -1;
  const corners = [
    [0, 0, 2, 0, 2, 2, 1, 0, 2, 1, 1, 1],
    [0, 0, 2, 2, 0, 2, 1, 1, 1, 2, 0, 1],
  ];
  const unknowns: number[] = [];
  for (let y = 0; y < side; y += 1) {
    for (let x = 0; x < side; x += 1) {
      for (const shape of corners) {
        for (let k = 0; k < 12; k += 2) unknowns.push(number(2 * x + shape[k], 2 * y + shape[k + 1]));
      }
    }
  }
  const elementStart = Int32Array.from({ length: unknowns.length / 6 + 1 }, (_, e) => 6 * e);
  const pattern = patternOfElements((across - 2) ** 2, elementStart, Int32Array.from(unknowns));
  const local: number[] = [];
  for (let i = 0; i < 6; i += 1) for (let j = 0; j <= i; j += 1) local.push(i === j ? 6 : -1);
  pattern.scatter.forEach((at, p) => {
    if (at >= 0) pattern.matrix.value[at] += local[p % local.length];
  });
  return pattern;
}

const median = (times: number[]) => times.sort((a, b) => a - b)[times.length >> 1];

const clock = (work: () => void) => {
  const start = performance.now();
  work();
  return performance.now() - start;
};

/** Orders, factors and solves of the matrices that sections and cells are made of; scipy run in turn with each. */
export default async function bench(): Promise<BenchRow[]> {
  const python = await Python.start('matrices.py');
  const rows: BenchRow[] = [];
  for (const side of [12, 20, 32]) {
    const { matrix } = planeMatrix(side);
    const symbolic = analyse(matrix);
    const factor = factorise(symbolic, matrix);
    const b = new Float64Array(4 * matrix.n);
    const works: [string, string, () => void][] = [
      ['order, analysis and factorisation', 'factor', () => void factorise(analyse(matrix), matrix)],
      ['factorisation again', 'factor', () => void factorise(symbolic, matrix, factor)],
      [
        'four right sides',
        'solve',
        () => {
          b.fill(1);
          solve(factor, b, 4);
        },
      ],
    ];
    for (const [what, request, work] of works) {
      const ours: number[] = [];
      const theirs: number[] = [];
      for (let run = -20; run < RUNS; run += 1) {
        const mine = clock(work);
        const other = python === null ? Number.NaN : await python.ask(`${request} ${side}`);
        if (run < 0) continue;
        ours.push(mine);
        theirs.push(other);
      }
      const base = {
        what: `${matrix.n} unknowns of quadratic triangles, ${what}`,
        median: median(ours),
        unit: 'ms',
        runs: RUNS,
      };
      rows.push(
        python === null
          ? { ...base, note: 'no Python with scipy here: not compared (Debian: python3-scipy)' }
          : {
              ...base,
              against: `SuperLU in its symmetric mode (${median(theirs).toPrecision(3)} ms)`,
              ratio: base.median / median(theirs),
            },
      );
    }
  }
  python?.stop();
  return rows;
}
