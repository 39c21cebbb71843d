import type { Mesh } from '../mesh/mesh.ts';
import type { Place } from './section.ts';

/**
 * Greatest velocity (per unit G/µ) and its place. Around its highest node the nodal values, which are
 * more accurate than what lies between them, are fitted by −r²/4 plus harmonic polynomials to degree 4,
 * which solve −∇²u = 1 exactly; the peak is the fit's, by Newton's method.
 */
export function peakVelocity(mesh: Mesh, u: Float64Array, symmetric: boolean): { value: number; at: Place } {
  let top = 0;
  for (let i = 1; i < u.length; i += 1) if (u[i] > u[top]) top = i;
  // A symmetric section is convex: its peak lies on the mirror line.
  const cx = symmetric ? 0 : mesh.x[top];
  const cy = mesh.y[top];
  const samples = nearest(mesh, u, cx, cy, symmetric);
  const scale = samples[samples.length - 1].distance;

  const normal = new Float64Array(TERMS * TERMS);
  const right = new Float64Array(TERMS);
  const row = new Float64Array(TERMS);
  for (const { x, y, value, distance } of samples) {
    harmonics((x - cx) / scale, (y - cy) / scale, row);
    // Nodes near the peak count more.
    const weight = (1.2 - distance / scale) ** 2;
    const rest = value + distance ** 2 / 4;
    for (let i = 0; i < TERMS; i += 1) {
      right[i] += weight * row[i] * rest;
      for (let j = 0; j <= i; j += 1) normal[i * TERMS + j] += weight * row[i] * row[j];
    }
  }
  solveNormal(normal, right);

  let [x, y] = [0, 0];
  const q = (scale * scale) / 4;
  const value = (): number => {
    harmonics(x, y, row);
    let sum = -q * (x * x + y * y);
    for (let i = 0; i < TERMS; i += 1) sum += right[i] * row[i];
    return sum;
  };
  for (let step = 0; step < 12; step += 1) {
    const [gx, gy, hxx, hxy] = slope(right, x, y);
    const fx = gx - 2 * q * x;
    const fy = gy - 2 * q * y;
    const a = hxx - 2 * q;
    const d = -hxx - 2 * q;
    const det = a * d - hxy * hxy;
    // Near a maximum the second derivatives are negative definite: det > 0.
    if (!(det > 0)) break;
    const dx = -(d * fx - hxy * fy) / det;
    const dy = -(a * fy - hxy * fx) / det;
    x += dx;
    y += dy;
    if (Math.hypot(dx, dy) < 1e-10) break;
  }
  if (Math.hypot(x, y) > 1 || !(value() > 0.5 * u[top])) return { value: u[top], at: [cx, cy] };
  return { value: value(), at: [symmetric ? 0 : cx + scale * x, cy + scale * y] };
}

const TERMS = 9;
const PATCH = 22;

/** Real and imaginary parts of (x + iy)ⁿ, n = 0 … 4. */
function harmonics(x: number, y: number, out: Float64Array): void {
  let [re, im] = [1, 0];
  out[0] = 1;
  for (let n = 1; n <= 4; n += 1) {
    [re, im] = [re * x - im * y, re * y + im * x];
    out[2 * n - 1] = re;
    out[2 * n] = im;
  }
}

/** First derivatives by x and y, then ∂²/∂x² (= −∂²/∂y²) and ∂²/∂x∂y, of the harmonic sum. */
function slope(c: Float64Array, x: number, y: number): [number, number, number, number] {
  let [re, im] = [1, 0];
  let [pre, pim] = [0, 0];
  let [gx, gy, hxx, hxy] = [0, 0, 0, 0];
  for (let n = 1; n <= 4; n += 1) {
    const [a, b] = [c[2 * n - 1], c[2 * n]];
    gx += n * (a * re + b * im);
    gy += n * (-a * im + b * re);
    hxx += n * (n - 1) * (a * pre + b * pim);
    hxy += n * (n - 1) * (-a * pim + b * pre);
    [pre, pim] = [re, im];
    [re, im] = [re * x - im * y, re * y + im * x];
  }
  return [gx, gy, hxx, hxy];
}

interface Sample {
  readonly x: number;
  readonly y: number;
  readonly value: number;
  readonly distance: number;
}

/** The nodes nearest to the top one, with their images behind a mirror line x = 0. */
function nearest(mesh: Mesh, u: Float64Array, cx: number, cy: number, symmetric: boolean): Sample[] {
  const wanted = Math.max(TERMS + 3, PATCH);
  /** Nearest first, never more than wanted. */
  const samples: Sample[] = [];
  const take = (x: number, y: number, value: number): void => {
    const distance = Math.hypot(x - cx, y - cy);
    let place = samples.length;
    while (place > 0 && samples[place - 1].distance > distance) place -= 1;
    if (place === wanted) return;
    samples.splice(place, 0, { x, y, value, distance });
    if (samples.length > wanted) samples.pop();
  };
  for (let i = 0; i < mesh.nodeCount; i += 1) {
    take(mesh.x[i], mesh.y[i], u[i]);
    if (symmetric && mesh.x[i] > 0) take(-mesh.x[i], mesh.y[i], u[i]);
  }
  return samples;
}

/** Cholesky solution of the small normal equations, in place; a trace on the diagonal keeps it definite. */
function solveNormal(a: Float64Array, b: Float64Array): void {
  const n = b.length;
  for (let i = 0; i < n; i += 1) a[i * n + i] *= 1 + 1e-13;
  for (let j = 0; j < n; j += 1) {
    for (let k = 0; k < j; k += 1) {
      for (let i = j; i < n; i += 1) a[i * n + j] -= a[i * n + k] * a[j * n + k];
    }
    const pivot = Math.sqrt(Math.max(a[j * n + j], 1e-300));
    for (let i = j; i < n; i += 1) a[i * n + j] /= pivot;
  }
  for (let i = 0; i < n; i += 1) {
    for (let k = 0; k < i; k += 1) b[i] -= a[i * n + k] * b[k];
    b[i] /= a[i * n + i];
  }
  for (let i = n - 1; i >= 0; i -= 1) {
    for (let k = i + 1; k < n; k += 1) b[i] -= a[k * n + i] * b[k];
    b[i] /= a[i * n + i];
  }
}
