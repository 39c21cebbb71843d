/**
 * C ← C − X Yᵀ, the update of a block of a factor by one before it.
 *
 * X are the rows `first` … `height`−1 of the earlier panel, Y its rows `first` … `last`−1, the ones that fall
 * on columns of the later block. The product goes straight to its place in the later panel, in tiles of
 * 3 × 2 (what the registers of scalar code hold). A tile that pokes above the diagonal of the later block
 * writes there too: nothing reads that part.
 *
 * @param target the panels that hold C
 * @param x the panels that hold X; may be the same
 * @param y the panels that hold Y; may be the same
 * @param from start of the earlier panel, `width` wide
 * @param rowStart where the earlier block's rows start in `rows`
 * @param place for each row its start in the later panel less the later block's first column
 */
export function blockUpdate(
  target: Float64Array,
  x: Float64Array,
  y: Float64Array,
  from: number,
  width: number,
  rows: Int32Array,
  rowStart: number,
  first: number,
  last: number,
  height: number,
  place: Int32Array,
): void {
  let j = first;
  for (; j + 1 < last; j += 2) {
    const c0 = rows[rowStart + j];
    const c1 = rows[rowStart + j + 1];
    const y0 = from + j * width;
    const y1 = y0 + width;
    let i = j;
    for (; i + 2 < height; i += 3) {
      const x0 = from + i * width;
      const x1 = x0 + width;
      const x2 = x1 + width;
      let s00 = 0;
      let s01 = 0;
      let s10 = 0;
      let s11 = 0;
      let s20 = 0;
      let s21 = 0;
      for (let k = 0; k < width; k += 1) {
        const u = y[y0 + k];
        const v = y[y1 + k];
        const a = x[x0 + k];
        s00 += a * u;
        s01 += a * v;
        const b = x[x1 + k];
        s10 += b * u;
        s11 += b * v;
        const c = x[x2 + k];
        s20 += c * u;
        s21 += c * v;
      }
      const t0 = place[rows[rowStart + i]];
      const t1 = place[rows[rowStart + i + 1]];
      const t2 = place[rows[rowStart + i + 2]];
      target[t0 + c0] -= s00;
      target[t0 + c1] -= s01;
      target[t1 + c0] -= s10;
      target[t1 + c1] -= s11;
      target[t2 + c0] -= s20;
      target[t2 + c1] -= s21;
    }
    for (; i < height; i += 1) {
      const x0 = from + i * width;
      let s0 = 0;
      let s1 = 0;
      for (let k = 0; k < width; k += 1) {
        const a = x[x0 + k];
        s0 += a * y[y0 + k];
        s1 += a * y[y1 + k];
      }
      const t0 = place[rows[rowStart + i]];
      target[t0 + c0] -= s0;
      target[t0 + c1] -= s1;
    }
  }
  if (j === last) return;

  const c0 = rows[rowStart + j];
  const y0 = from + j * width;
  for (let i = j; i < height; i += 1) {
    const x0 = from + i * width;
    let s0 = 0;
    for (let k = 0; k < width; k += 1) s0 += x[x0 + k] * y[y0 + k];
    const t0 = place[rows[rowStart + i]];
    target[t0 + c0] -= s0;
  }
}
