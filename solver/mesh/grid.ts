/** Boxes in a uniform grid of buckets, for finding those near a place. */
export class Grid {
  readonly x0: number;
  readonly y0: number;
  readonly cell: number;
  readonly columns: number;
  readonly rows: number;
  /** Bucket b holds items[start[b] .. start[b + 1]). */
  readonly start: Int32Array;
  readonly items: Int32Array;
  private readonly seen: Int32Array;
  private stamp = 0;

  /** `boxes`: 4 numbers per item (x low, y low, x high, y high). */
  constructor(boxes: Float64Array) {
    const count = boxes.length / 4;
    let [x0, y0, x1, y1, extent] = [Infinity, Infinity, -Infinity, -Infinity, 0];
    for (let i = 0; i < count; i += 1) {
      x0 = Math.min(x0, boxes[4 * i]);
      y0 = Math.min(y0, boxes[4 * i + 1]);
      x1 = Math.max(x1, boxes[4 * i + 2]);
      y1 = Math.max(y1, boxes[4 * i + 3]);
      extent += Math.max(boxes[4 * i + 2] - boxes[4 * i], boxes[4 * i + 3] - boxes[4 * i + 1]);
    }
    // About one bucket per item, never smaller than the mean item.
    const span = Math.max(x1 - x0, y1 - y0) || 1;
    this.cell = Math.max(extent / count, Math.sqrt(((x1 - x0) * (y1 - y0)) / count), span / 1000);
    this.x0 = x0;
    this.y0 = y0;
    this.columns = Math.floor((x1 - x0) / this.cell) + 1;
    this.rows = Math.floor((y1 - y0) / this.cell) + 1;
    this.start = new Int32Array(this.columns * this.rows + 1);
    this.seen = new Int32Array(count);
    for (let i = 0; i < count; i += 1) this.each(boxes, i, (b) => (this.start[b + 1] += 1));
    for (let b = 0; b < this.columns * this.rows; b += 1) this.start[b + 1] += this.start[b];
    this.items = new Int32Array(this.start[this.columns * this.rows]);
    const next = this.start.slice();
    for (let i = 0; i < count; i += 1) {
      this.each(boxes, i, (b) => {
        this.items[next[b]] = i;
        next[b] += 1;
      });
    }
  }

  private each(boxes: Float64Array, i: number, visit: (bucket: number) => void): void {
    const c1 = this.column(boxes[4 * i + 2]);
    const r1 = this.row(boxes[4 * i + 3]);
    for (let r = this.row(boxes[4 * i + 1]); r <= r1; r += 1) {
      for (let c = this.column(boxes[4 * i]); c <= c1; c += 1) visit(r * this.columns + c);
    }
  }

  private column(x: number): number {
    return Math.min(this.columns - 1, Math.max(0, Math.floor((x - this.x0) / this.cell)));
  }

  private row(y: number): number {
    return Math.min(this.rows - 1, Math.max(0, Math.floor((y - this.y0) / this.cell)));
  }

  /** Calls `visit` once for each item whose bucket meets the box. */
  near(x0: number, y0: number, x1: number, y1: number, visit: (item: number) => void): void {
    this.stamp += 1;
    const c1 = this.column(x1);
    const r1 = this.row(y1);
    for (let r = this.row(y0); r <= r1; r += 1) {
      for (let c = this.column(x0); c <= c1; c += 1) {
        const b = r * this.columns + c;
        for (let k = this.start[b]; k < this.start[b + 1]; k += 1) {
          const item = this.items[k];
          if (this.seen[item] === this.stamp) continue;
          this.seen[item] = this.stamp;
          visit(item);
        }
      }
    }
  }
}
