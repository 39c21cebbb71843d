/**
 * Dense Cholesky of one panel in place: the square on top becomes L₁₁ with L₁₁ L₁₁ᵀ = A₁₁, the rows below
 * L₂₁ = A₂₁ L₁₁⁻ᵀ. The panel lies row by row, so that all sums are products of two rows; two columns go at
 * once, three rows below them at a time.
 *
 * @param from start of the panel in `panels`, `height` rows of `width`
 * @param floor least pivot accepted in each column, at `firstColumn` + column
 * @returns −1, or the column within the panel whose pivot (left on the diagonal) is not above its floor
 */
export function blockFactor(
  panels: Float64Array,
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
    let pivot0 = panels[y0 + j];
    let between = panels[y1 + j];
    let pivot1 = panels[y1 + j + 1];
    for (let k = 0; k < j; k += 1) {
      const u = panels[y0 + k];
      const v = panels[y1 + k];
      pivot0 -= u * u;
      between -= u * v;
      pivot1 -= v * v;
    }
    panels[y0 + j] = pivot0;
    if (!(pivot0 > floor[firstColumn + j])) return j;
    const root0 = Math.sqrt(pivot0);
    const inverse0 = 1 / root0;
    between *= inverse0;
    pivot1 -= between * between;
    panels[y0 + j] = root0;
    panels[y1 + j] = between;
    panels[y1 + j + 1] = pivot1;
    if (!(pivot1 > floor[firstColumn + j + 1])) return j + 1;
    const root1 = Math.sqrt(pivot1);
    const inverse1 = 1 / root1;
    panels[y1 + j + 1] = root1;

    let i = j + 2;
    for (; i + 2 < height; i += 3) {
      const x0 = from + i * width;
      const x1 = x0 + width;
      const x2 = x1 + width;
      let s00 = panels[x0 + j];
      let s01 = panels[x0 + j + 1];
      let s10 = panels[x1 + j];
      let s11 = panels[x1 + j + 1];
      let s20 = panels[x2 + j];
      let s21 = panels[x2 + j + 1];
      for (let k = 0; k < j; k += 1) {
        const u = panels[y0 + k];
        const v = panels[y1 + k];
        const a = panels[x0 + k];
        s00 -= a * u;
        s01 -= a * v;
        const b = panels[x1 + k];
        s10 -= b * u;
        s11 -= b * v;
        const c = panels[x2 + k];
        s20 -= c * u;
        s21 -= c * v;
      }
      s00 *= inverse0;
      s10 *= inverse0;
      s20 *= inverse0;
      panels[x0 + j] = s00;
      panels[x0 + j + 1] = (s01 - s00 * between) * inverse1;
      panels[x1 + j] = s10;
      panels[x1 + j + 1] = (s11 - s10 * between) * inverse1;
      panels[x2 + j] = s20;
      panels[x2 + j + 1] = (s21 - s20 * between) * inverse1;
    }
    for (; i < height; i += 1) {
      const x = from + i * width;
      let s0 = panels[x + j];
      let s1 = panels[x + j + 1];
      for (let k = 0; k < j; k += 1) {
        const a = panels[x + k];
        s0 -= a * panels[y0 + k];
        s1 -= a * panels[y1 + k];
      }
      s0 *= inverse0;
      panels[x + j] = s0;
      panels[x + j + 1] = (s1 - s0 * between) * inverse1;
    }
  }
  if (j === width) return -1;

  const y = from + j * width;
  let pivot = panels[y + j];
  for (let k = 0; k < j; k += 1) {
    const v = panels[y + k];
    pivot -= v * v;
  }
  panels[y + j] = pivot;
  if (!(pivot > floor[firstColumn + j])) return j;
  const root = Math.sqrt(pivot);
  const inverse = 1 / root;
  panels[y + j] = root;
  for (let i = j + 1; i < height; i += 1) {
    const x = from + i * width;
    let s = panels[x + j];
    for (let k = 0; k < j; k += 1) s -= panels[x + k] * panels[y + k];
    panels[x + j] = s * inverse;
  }
  return -1;
}
