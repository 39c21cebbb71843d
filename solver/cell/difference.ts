import { diagonaliseTogether } from './diagonalise.ts';

/**
 * Largest relative difference of two port matrices: |p (A - B) p| / (p B p) over all face pressures p.
 * One face is tied to zero, which loses nothing, since equal pressures drive nothing.
 */
export function relativeDifference(a: Float64Array, b: Float64Array, faces: number): number {
  const n = faces - 1;
  const difference = new Float64Array(n * n);
  const base = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1)
    for (let j = 0; j < n; j += 1) {
      difference[i * n + j] = a[i * faces + j] - b[i * faces + j];
      base[i * n + j] = b[i * faces + j];
    }
  const { lambda } = diagonaliseTogether(difference, base, n);
  let most = 0;
  for (const value of lambda) most = Math.max(most, Math.abs(value));
  return most;
}
