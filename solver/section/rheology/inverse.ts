/** A rising function with its slope: value and derivative at x > 0 into out[0] and out[1]. */
export type Rising = (x: number, out: Float64Array) => void;

const MOST = 200;

/**
 * The x >= 0 at which a rising function through the origin has the value `wanted`, and dx/d(value), into
 * out[0] and out[1]: Newton on the logarithms of both, held inside a bracket.
 *
 * @param guess where to start, > 0
 */
export function inverse(of: Rising, wanted: number, guess: number, out: Float64Array): void {
  if (!(wanted > 0)) {
    of(0, out);
    out[1] = 1 / out[1];
    out[0] = 0;
    return;
  }
  const goal = Math.log(wanted);
  let low = Number.NEGATIVE_INFINITY;
  let high = Number.POSITIVE_INFINITY;
  let at = Math.log(guess > 0 ? guess : 1);
  for (let i = 0; i < MOST; i += 1) {
    const x = Math.exp(at);
    of(x, out);
    const miss = Math.log(out[0]) - goal;
    if (miss > 0) high = at;
    else low = at;
    const step = -miss / ((x * out[1]) / out[0]);
    let next = at + Math.min(Math.max(step, -20), 20);
    // A step out of the bracket, or none at all, halves it.
    if (!(next > low && next < high)) {
      next = low > Number.NEGATIVE_INFINITY && high < Number.POSITIVE_INFINITY ? (low + high) / 2 : next;
    }
    if (Math.abs(miss) < 4e-15 || Math.abs(next - at) < 1e-15 * Math.max(1, Math.abs(at))) break;
    at = next;
  }
  const x = Math.exp(at);
  of(x, out);
  out[1] = 1 / out[1];
  out[0] = x;
}
