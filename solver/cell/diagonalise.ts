/**
 * Solves S v = lambda M v for symmetric S and positive definite M (n x n by rows, small): Cholesky of M,
 * then cyclic Jacobi rotations. Columns of `basis` (n x n by rows) have v M v = 1, lambdas ascend.
 */
export function diagonaliseTogether(
  stiffness: Float64Array,
  mass: Float64Array,
  n: number,
): { lambda: Float64Array; basis: Float64Array } {
  const l = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1)
    for (let j = 0; j <= i; j += 1) {
      let sum = mass[i * n + j];
      for (let k = 0; k < j; k += 1) sum -= l[i * n + k] * l[j * n + k];
      l[i * n + j] = i === j ? Math.sqrt(sum) : sum / l[j * n + j];
    }
  // a = L^-1 S L^-T, by two solves with a transpose after each.
  const a = Float64Array.from(stiffness);
  for (let side = 0; side < 2; side += 1) {
    for (let c = 0; c < n; c += 1)
      for (let i = 0; i < n; i += 1) {
        let sum = a[i * n + c];
        for (let k = 0; k < i; k += 1) sum -= l[i * n + k] * a[k * n + c];
        a[i * n + c] = sum / l[i * n + i];
      }
    for (let i = 0; i < n; i += 1)
      for (let j = 0; j < i; j += 1) {
        const swap = a[i * n + j];
        a[i * n + j] = a[j * n + i];
        a[j * n + i] = swap;
      }
  }
  const v = jacobi(a, n);
  const order = Array.from({ length: n }, (_, i) => i).sort((i, j) => a[i * n + i] - a[j * n + j]);
  const lambda = new Float64Array(n);
  const basis = new Float64Array(n * n);
  for (let k = 0; k < n; k += 1) {
    const from = order[k];
    lambda[k] = a[from * n + from];
    // basis column = L^-T v
    for (let i = n - 1; i >= 0; i -= 1) {
      let sum = v[i * n + from];
      for (let j = i + 1; j < n; j += 1) sum -= l[j * n + i] * basis[j * n + k];
      basis[i * n + k] = sum / l[i * n + i];
    }
  }
  return { lambda, basis };
}

/** Turns symmetric `a` into a diagonal in place; returns the eigenvectors as columns. */
function jacobi(a: Float64Array, n: number): Float64Array {
  const v = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) v[i * n + i] = 1;
  for (let sweep = 0; sweep < 40; sweep += 1) {
    let off = 0;
    let all = 0;
    for (let p = 0; p < n; p += 1)
      for (let q = 0; q <= p; q += 1) {
        const square = a[p * n + q] ** 2;
        all += square;
        if (q < p) off += square;
      }
    if (off <= 1e-36 * all) break;
    for (let p = 0; p < n; p += 1)
      for (let q = p + 1; q < n; q += 1) {
        const apq = a[p * n + q];
        if (apq === 0) continue;
        const theta = (a[q * n + q] - a[p * n + p]) / (2 * apq);
        const t = (theta < 0 ? -1 : 1) / (Math.abs(theta) + Math.sqrt(theta * theta + 1));
        const c = 1 / Math.sqrt(t * t + 1);
        const s = t * c;
        rotate(a, n, p, q, 1, n, c, s);
        rotate(a, n, p, q, n, 1, c, s);
        a[p * n + q] = 0;
        a[q * n + p] = 0;
        rotate(v, n, p, q, 1, n, c, s);
      }
  }
  return v;
}

/** Rotates lines p and q of `m`: neighbours of one line lie `along` apart, the lines' starts `step`. */
function rotate(
  m: Float64Array,
  n: number,
  p: number,
  q: number,
  step: number,
  along: number,
  c: number,
  s: number,
): void {
  for (let k = 0; k < n; k += 1) {
    const x = m[k * along + p * step];
    const y = m[k * along + q * step];
    m[k * along + p * step] = c * x - s * y;
    m[k * along + q * step] = s * x + c * y;
  }
}
