/**
 * Dense Cholesky of one panel in place: the square on top becomes L₁₁ with L₁₁ L₁₁ᵀ = A₁₁, the rows below
 * L₂₁ = A₂₁ L₁₁⁻ᵀ. The panel lies row by row.
 *
 * @param from start of the panel, `height` rows of `width`
 * @param floor least pivot accepted in each column, at `firstColumn` + column
 * @returns −1, or the column within the panel whose pivot is below its floor (or not a number)
 */
export function blockFactor(
  panels: Float64Array,
  from: number,
  width: number,
  height: number,
  floor: Float64Array,
  firstColumn: number,
): number {
  for (let j = 0; j < width; j += 1) {
    const y = from + j * width;
    let pivot = panels[y + j]!;
    for (let k = 0; k < j; k += 1) {
      const v = panels[y + k]!;
      pivot -= v * v;
    }
    if (!(pivot > floor[firstColumn + j]!)) {
      panels[y + j] = pivot;
      return j;
    }
    const root = Math.sqrt(pivot);
    const inverse = 1 / root;
    panels[y + j] = root;
    let i = j + 1;
    for (; i + 3 < height; i += 4) {
      const x0 = from + i * width;
      const x1 = x0 + width;
      const x2 = x1 + width;
      const x3 = x2 + width;
      let s0 = panels[x0 + j]!;
      let s1 = panels[x1 + j]!;
      let s2 = panels[x2 + j]!;
      let s3 = panels[x3 + j]!;
      for (let k = 0; k < j; k += 1) {
        const v = panels[y + k]!;
        s0 -= panels[x0 + k]! * v;
        s1 -= panels[x1 + k]! * v;
        s2 -= panels[x2 + k]! * v;
        s3 -= panels[x3 + k]! * v;
      }
      panels[x0 + j] = s0 * inverse;
      panels[x1 + j] = s1 * inverse;
      panels[x2 + j] = s2 * inverse;
      panels[x3 + j] = s3 * inverse;
    }
    for (; i < height; i += 1) {
      const x = from + i * width;
      let s = panels[x + j]!;
      for (let k = 0; k < j; k += 1) s -= panels[x + k]! * panels[y + k]!;
      panels[x + j] = s * inverse;
    }
  }
  return -1;
}
