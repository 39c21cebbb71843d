/** A function that rises, or is zero and then rises: value and derivative at x > 0 into out[0] and out[1]. */
export type Rising = (x: number, out: Float64Array) => void;

const MOST = 200;
/** Of the logarithm of x, in one step. */
const LONGEST = 20;

/**
 * The x > 0 at which such a function has the value `wanted` > 0, and dx/d(value), into out[0] and out[1]:
 * Newton on the logarithms of both, held inside a bracket.
 *
 * @param guess where to start, > 0
 */
export function inverse(of: Rising, wanted: number, guess: number, out: Float64Array): void {
  const goal = Math.log(wanted);
  let low = Number.NEGATIVE_INFINITY;
  let high = Number.POSITIVE_INFINITY;
  let at = Math.log(guess > 0 ? guess : 1);
  for (let i = 0; i < MOST; i += 1) {
    const x = Math.exp(at);
    of(x, out);
    const nothing = !(out[0] > 0);
    const miss = nothing ? Number.NEGATIVE_INFINITY : Math.log(out[0]) - goal;
    if (miss > 0) high = at;
    else low = at;
    const step = nothing ? LONGEST : -miss / ((x * out[1]) / out[0]);
    let next = at + Math.min(Math.max(step, -LONGEST), LONGEST);
    // A step out of the bracket halves it.
    if (!(next > low && next < high) && Number.isFinite(low) && Number.isFinite(high))
      next = (low + high) / 2;
    if (Math.abs(miss) < 4e-15 || Math.abs(next - at) < 1e-15 * Math.max(1, Math.abs(at))) break;
    at = next;
  }
  const x = Math.exp(at);
  of(x, out);
  out[1] = 1 / out[1];
  out[0] = x;
}
