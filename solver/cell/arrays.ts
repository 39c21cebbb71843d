/**
 * `count` arrays of `size` zeros. Not by `Array.from` and a function: one made at each call is compiled at
 * each call once it is much used, in a browser on the cores that the solve needs.
 */
export function arrays(count: number, size: number): Float64Array[] {
  const out: Float64Array[] = [];
  for (let k = 0; k < count; k += 1) out.push(new Float64Array(size));
  return out;
}
