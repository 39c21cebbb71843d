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
    this.each(left, top, width, height, (list) => list.push(index));
  }

  free(left: number, top: number, width: number, height: number): boolean {
    let free = true;
    this.each(left, top, width, height, (list) => {
      for (const i of list)
        if (
          left < this.boxes[i + 2]! &&
          left + width > this.boxes[i]! &&
          top < this.boxes[i + 3]! &&
          top + height > this.boxes[i + 1]!
        )
          free = false;
    });
    return free;
  }

  private each(
    left: number,
    top: number,
    width: number,
    height: number,
    act: (list: number[]) => void,
  ): void {
    const SIDE = 64;
    for (let x = Math.floor(left / SIDE); x <= Math.floor((left + width) / SIDE); x += 1)
      for (let y = Math.floor(top / SIDE); y <= Math.floor((top + height) / SIDE); y += 1) {
        const key = x * 100_003 + y;
        let list = this.cells.get(key);
        if (!list) {
          list = [];
          this.cells.set(key, list);
        }
        act(list);
      }
  }
}
