/**
 * Dense elimination of one panel pair in place, without exchange of rows: A₁₁ = L₁₁ U₁₁ with unit U₁₁, the rows
 * below L₂₁ = A₂₁ U₁₁⁻¹, the columns beyond U₁₂ = L₁₁⁻¹ A₁₂. U lies transposed, row by row as L does, so that all
 * sums are products of two rows; two columns go at once.
 *
 * @param from start of the panel in both arrays, `height` rows of `width`
 * @param floor least magnitude of a pivot accepted in each column, at `firstColumn` + column
 * @returns −1, or the column within the panel whose pivot (left on the diagonal of L) is not above its floor
 */
export function blockFactorGeneral(
  lower: Float64Array,
  upper: Float64Array,
  from: number,
  width: number,
  height: number,
  floor: Float64Array,
  firstColumn: number,
): number {
  let j = 0;
  for (; j + 1 < width; j += 2) {
    const y0 = from + j * width;
    const y1 = y0 + width;
    let pivot0 = lower[y0 + j];
    let below = lower[y1 + j];
    let right = upper[y1 + j];
    let pivot1 = lower[y1 + j + 1];
    for (let k = 0; k < j; k += 1) {
      pivot0 -= lower[y0 + k] * upper[y0 + k];
      below -= lower[y1 + k] * upper[y0 + k];
      right -= upper[y1 + k] * lower[y0 + k];
      pivot1 -= lower[y1 + k] * upper[y1 + k];
    }
    lower[y0 + j] = pivot0;
    if (!(Math.abs(pivot0) > floor[firstColumn + j])) return j;
    const inverse0 = 1 / pivot0;
    right *= inverse0;
    pivot1 -= below * right;
    lower[y1 + j] = below;
    upper[y1 + j] = right;
    lower[y1 + j + 1] = pivot1;
    if (!(Math.abs(pivot1) > floor[firstColumn + j + 1])) return j + 1;
    const inverse1 = 1 / pivot1;
    for (let i = j + 2; i < height; i += 1) {
      const x = from + i * width;
      let l0 = lower[x + j];
      let l1 = lower[x + j + 1];
      let u0 = upper[x + j];
      let u1 = upper[x + j + 1];
      for (let k = 0; k < j; k += 1) {
        const a = lower[x + k];
        l0 -= a * upper[y0 + k];
        l1 -= a * upper[y1 + k];
        const b = upper[x + k];
        u0 -= b * lower[y0 + k];
        u1 -= b * lower[y1 + k];
      }
      u0 *= inverse0;
      lower[x + j] = l0;
      lower[x + j + 1] = l1 - l0 * right;
      upper[x + j] = u0;
      upper[x + j + 1] = (u1 - u0 * below) * inverse1;
    }
  }
  if (j === width) return -1;

  const y = from + j * width;
  let pivot = lower[y + j];
  for (let k = 0; k < j; k += 1) pivot -= lower[y + k] * upper[y + k];
  lower[y + j] = pivot;
  if (!(Math.abs(pivot) > floor[firstColumn + j])) return j;
  const inverse = 1 / pivot;
  for (let i = j + 1; i < height; i += 1) {
    const x = from + i * width;
    let l = lower[x + j];
    let u = upper[x + j];
    for (let k = 0; k < j; k += 1) {
      l -= lower[x + k] * upper[y + k];
      u -= upper[x + k] * lower[y + k];
    }
    lower[x + j] = l;
    upper[x + j] = u * inverse;
  }
  return -1;
}
