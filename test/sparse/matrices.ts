import type { SymmetricMatrix } from '../../solver/sparse/matrix.ts';

/** Numbers in [0, 1) that are the same on every run (a 32-bit multiply-and-shift generator). */
export function randomFrom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** From entries below the diagonal and the diagonal. */
export function fromEntries(
  n: number,
  diagonal: (i: number) => number,
  below: Map<number, number>,
): SymmetricMatrix {
  const keys = [...below.keys()].sort((a, b) => a - b);
  const columnStart = new Int32Array(n + 1);
  const row: number[] = [];
  const value: number[] = [];
  let k = 0;
  for (let j = 0; j < n; j += 1) {
    columnStart[j] = row.length;
    row.push(j);
    value.push(diagonal(j));
    for (; k < keys.length && Math.floor(keys[k] / n) === j; k += 1) {
      row.push(keys[k] % n);
      value.push(below.get(keys[k])!);
    }
  }
  columnStart[n] = row.length;
  return { n, columnStart, row: Int32Array.from(row), value: Float64Array.from(value) };
}

/** Symmetric with the given pairs, random signs, diagonally dominant by a little. */
function dominant(
  n: number,
  pairs: Iterable<readonly [number, number]>,
  random: () => number,
): SymmetricMatrix {
  const below = new Map<number, number>();
  const sum = new Float64Array(n).fill(0.01);
  for (const [a, b] of pairs) {
    if (a === b) continue;
    const key = Math.min(a, b) * n + Math.max(a, b);
    if (below.has(key)) continue;
    const v = random() * 2 - 1;
    below.set(key, v);
    sum[a] += Math.abs(v);
    sum[b] += Math.abs(v);
  }
  return fromEntries(n, (i) => sum[i] * (1 + 0.1 * random()), below);
}

function* randomPairs(n: number, count: number, random: () => number): Iterable<[number, number]> {
  for (let k = 0; k < count; k += 1) yield [Math.floor(random() * n), Math.floor(random() * n)];
}

function* band(n: number, width: number): Iterable<[number, number]> {
  for (let i = 0; i < n; i += 1) for (let k = 1; k <= width && i + k < n; k += 1) yield [i, i + k];
}

function* grid(n: number): Iterable<[number, number]> {
  const across = Math.max(1, Math.round(Math.sqrt(n)));
  for (let i = 0; i < n; i += 1) {
    if ((i + 1) % across !== 0 && i + 1 < n) yield [i, i + 1];
    if (i + across < n) yield [i, i + across];
  }
}

function* arrow(n: number): Iterable<[number, number]> {
  for (let i = 1; i < n; i += 1) yield [0, i];
  for (let i = 1; i + 1 < n; i += 2) yield [i, i + 1];
}

function* pieces(n: number, random: () => number): Iterable<[number, number]> {
  // Every third unknown stands alone; the rest form islands of up to ten.
  for (let i = 0; i < n; i += 10) {
    for (let k = 0; k < 12; k += 1) {
      const a = i + Math.floor(random() * 10);
      const b = i + Math.floor(random() * 10);
      if (a % 3 !== 0 && b % 3 !== 0 && a < n && b < n) yield [a, b];
    }
  }
}

function* tree(n: number, random: () => number): Iterable<[number, number]> {
  for (let i = 1; i < n; i += 1) yield [i, Math.floor(random() * i)];
}

/** Every symmetric positive definite kind, by name. */
export const DEFINITE: Readonly<Record<string, (n: number, random: () => number) => SymmetricMatrix>> = {
  diagonal: (n, random) => dominant(n, [], random),
  random: (n, random) => dominant(n, randomPairs(n, 2 * n, random), random),
  banded: (n, random) => dominant(n, band(n, 5), random),
  grid: (n, random) => dominant(n, grid(n), random),
  arrow: (n, random) => dominant(n, arrow(n), random),
  disconnected: (n, random) => dominant(n, pieces(n, random), random),
  tree: (n, random) => dominant(n, tree(n, random), random),
  large: (n, random) => scaled(dominant(n, grid(n), random), () => 1e12),
  small: (n, random) => scaled(dominant(n, grid(n), random), () => 1e-12),
  unequal: (n, random) =>
    scaled(dominant(n, randomPairs(n, 2 * n, random), random), (i) => 10 ** (12 * Math.sin(i))),
};

/** D A D with D² = `scale`. */
export function scaled(matrix: SymmetricMatrix, scale: (i: number) => number): SymmetricMatrix {
  const value = matrix.value.slice();
  for (let j = 0; j < matrix.n; j += 1) {
    for (let p = matrix.columnStart[j]; p < matrix.columnStart[j + 1]; p += 1) {
      value[p] *= Math.sqrt(scale(matrix.row[p])) * Math.sqrt(scale(j));
    }
  }
  return { ...matrix, value };
}

export function dense(matrix: SymmetricMatrix): Float64Array[] {
  const full = Array.from({ length: matrix.n }, () => new Float64Array(matrix.n));
  for (let j = 0; j < matrix.n; j += 1) {
    for (let p = matrix.columnStart[j]; p < matrix.columnStart[j + 1]; p += 1) {
      const i = matrix.row[p];
      full[i][j] = matrix.value[p];
      full[j][i] = matrix.value[p];
    }
  }
  return full;
}

/** Largest row sum of magnitudes. */
export function norm(matrix: SymmetricMatrix): number {
  const sum = new Float64Array(matrix.n);
  for (let j = 0; j < matrix.n; j += 1) {
    for (let p = matrix.columnStart[j]; p < matrix.columnStart[j + 1]; p += 1) {
      const i = matrix.row[p];
      const v = Math.abs(matrix.value[p]);
      sum[i] += v;
      if (i !== j) sum[j] += v;
    }
  }
  return sum.reduce((a, b) => Math.max(a, b), 0);
}

/** A x from the triplets themselves, independent of the routine under test. */
export function product(matrix: SymmetricMatrix, x: Float64Array): Float64Array {
  const y = new Float64Array(matrix.n);
  for (let j = 0; j < matrix.n; j += 1) {
    for (let p = matrix.columnStart[j]; p < matrix.columnStart[j + 1]; p += 1) {
      const i = matrix.row[p];
      y[i] += matrix.value[p] * x[j];
      if (i !== j) y[j] += matrix.value[p] * x[i];
    }
  }
  return y;
}

export const EPS = 2 ** -52;

/** LAPACK's measure of a solve: ‖b − A x‖ / (ε ‖A‖ ‖x‖); 30 or more is a failure. */
export function solveRatio(matrix: SymmetricMatrix, x: Float64Array, b: Float64Array): number {
  const y = product(matrix, x);
  let residual = 0;
  let size = 0;
  for (let i = 0; i < matrix.n; i += 1) {
    residual = Math.max(residual, Math.abs(b[i] - y[i]));
    size = Math.max(size, Math.abs(x[i]));
  }
  return residual === 0 ? 0 : residual / (EPS * norm(matrix) * size);
}

/** x = A⁻¹ b by elimination with exchange of rows on the full matrix. */
export function denseSolve(full: Float64Array[], b: Float64Array): Float64Array {
  const n = b.length;
  const a = full.map((r) => r.slice());
  const x = b.slice();
  for (let k = 0; k < n; k += 1) {
    let best = k;
    for (let i = k + 1; i < n; i += 1) if (Math.abs(a[i][k]) > Math.abs(a[best][k])) best = i;
    [a[k], a[best]] = [a[best], a[k]];
    [x[k], x[best]] = [x[best], x[k]];
    const pivot = a[k];
    for (let i = k + 1; i < n; i += 1) {
      const r = a[i];
      const l = r[k] / pivot[k];
      if (l === 0) continue;
      for (let j = k; j < n; j += 1) r[j] -= l * pivot[j];
      x[i] -= l * x[k];
    }
  }
  for (let k = n - 1; k >= 0; k -= 1) {
    let s = x[k];
    for (let j = k + 1; j < n; j += 1) s -= a[k][j] * x[j];
    x[k] = s / a[k][k];
  }
  return x;
}
