/** Where words already stand, so that no two cover one another: a coarse grid of taken rectangles. */
export class Room {
  private readonly cells = new Map<number, number[]>();
  private readonly boxes: number[] = [];

  /** Takes the place where it is free; false where something stands there already. */
  take(left: number, top: number, width: number, height: number): boolean {
    if (!this.free(left, top, width, height)) return false;
    this.fill(left, top, width, height);
    return true;
  }

  /** Takes the place whatever stands there. */
  fill(left: number, top: number, width: number, height: number): void {
    const index = this.boxes.length;
    this.boxes.push(left, top, left + width, top + height);
    for (let x = Math.floor(left / SIDE); x <= Math.floor((left + width) / SIDE); x += 1)
      for (let y = Math.floor(top / SIDE); y <= Math.floor((top + height) / SIDE); y += 1) {
        const key = keyOf(x, y);
        const list = this.cells.get(key);
        if (list) list.push(index);
        else this.cells.set(key, [index]);
      }
  }

  free(left: number, top: number, width: number, height: number): boolean {
    const { boxes } = this;
    for (let x = Math.floor(left / SIDE); x <= Math.floor((left + width) / SIDE); x += 1)
      for (let y = Math.floor(top / SIDE); y <= Math.floor((top + height) / SIDE); y += 1)
        for (const i of this.cells.get(keyOf(x, y)) ?? NONE)
          if (
            left < boxes[i + 2]! &&
            left + width > boxes[i]! &&
            top < boxes[i + 3]! &&
            top + height > boxes[i + 1]!
          )
            return false;
    return true;
  }
}

/** px */
const SIDE = 64;
const NONE: readonly number[] = [];
const keyOf = (x: number, y: number): number => x * 100_003 + y;
