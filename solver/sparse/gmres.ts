/** y = A x; x is not changed. */
export type Apply = (x: Float64Array, y: Float64Array) => void;

/**
 * A x = b for any regular A by GMRES with right preconditioning: the combination of r, A M⁻¹ r, … that leaves
 * the least ‖b − A x‖ (Saad and Schultz 1986, SIAM J. Sci. Stat. Comput. 7, 856), from x = 0, without restart.
 *
 * @param apply y = A x
 * @param precondition y = M⁻¹ x
 * @param tolerance of ‖b − A x‖ / ‖b‖
 * @param most steps at most; as many vectors of b's length are kept
 * @param x receives the solution
 * @returns ‖b − A x‖ / ‖b‖ reached, as the recurrence has it
 */
export function gmres(
  apply: Apply,
  precondition: Apply,
  b: Float64Array,
  x: Float64Array,
  tolerance: number,
  most: number,
): number {
  const n = b.length;
  x.fill(0);
  const size = norm(b);
  if (size === 0) return 0;
  const basis = [b.map((v) => v / size)];
  const preconditioned = new Float64Array(n);
  /** Columns of the triangle R of the Hessenberg matrix. */
  const triangle: Float64Array[] = [];
  const cosine: number[] = [];
  const sine: number[] = [];
  const right = [size];
  let steps = 0;
  while (steps < most && Math.abs(right[steps]) > tolerance * size) {
    const next = new Float64Array(n);
    precondition(basis[steps], preconditioned);
    apply(preconditioned, next);
    const column = new Float64Array(steps + 1);
    for (let k = 0; k <= steps; k += 1) {
      const v = basis[k];
      let h = 0;
      for (let i = 0; i < n; i += 1) h += v[i] * next[i];
      for (let i = 0; i < n; i += 1) next[i] -= h * v[i];
      column[k] = h;
    }
    const below = norm(next);
    for (let k = 0; k < steps; k += 1) {
      const h = column[k];
      column[k] = cosine[k] * h + sine[k] * column[k + 1];
      column[k + 1] = cosine[k] * column[k + 1] - sine[k] * h;
    }
    const radius = Math.hypot(column[steps], below);
    if (radius === 0) break;
    cosine.push(column[steps] / radius);
    sine.push(below / radius);
    column[steps] = radius;
    triangle.push(column);
    right.push(-sine[steps] * right[steps]);
    right[steps] *= cosine[steps];
    steps += 1;
    if (below === 0) break;
    basis.push(next.map((v) => v / below));
  }

  const weight = new Float64Array(steps);
  for (let k = steps - 1; k >= 0; k -= 1) {
    let sum = right[k];
    for (let j = k + 1; j < steps; j += 1) sum -= triangle[j][k] * weight[j];
    weight[k] = sum / triangle[k][k];
  }
  const combined = new Float64Array(n);
  for (let k = 0; k < steps; k += 1) {
    const v = basis[k];
    for (let i = 0; i < n; i += 1) combined[i] += weight[k] * v[i];
  }
  precondition(combined, x);
  return Math.abs(right[steps]) / size;
}

function norm(v: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < v.length; i += 1) sum += v[i] * v[i];
  return Math.sqrt(sum);
}
