import type { Chamber, Point } from '../chip/chip.ts';

/** The largest circle inside an outline. */
export interface Span {
  /** nm */
  readonly diameter: number;
  readonly at: readonly [number, number];
}

interface Square {
  readonly x: number;
  readonly y: number;
  readonly half: number;
  /** Distance of its middle from the outline, negative outside. */
  readonly inside: number;
  /** The most that any place in it may have. */
  readonly most: number;
}

const known = new WeakMap<Chamber, Span>();

/** The largest circle that fits a chamber, to a thousandth of its size: what a roof must span. */
export function span(chamber: Chamber): Span {
  let found = known.get(chamber);
  if (!found) {
    found = largestCircle(chamber.outline);
    known.set(chamber, found);
  }
  return found;
}

/** Squares halved where they may still hold a larger circle than the best so far. */
function largestCircle(outline: readonly Point[]): Span {
  const xs = outline.map(([x]) => x);
  const ys = outline.map(([, y]) => y);
  const [minX, maxX] = [Math.min(...xs), Math.max(...xs)];
  const [minY, maxY] = [Math.min(...ys), Math.max(...ys)];
  const size = Math.min(maxX - minX, maxY - minY);
  const square = (x: number, y: number, half: number): Square => {
    const inside = distance(outline, x, y);
    return { x, y, half, inside, most: inside + half * Math.SQRT2 };
  };
  const columns = Math.min(64, Math.ceil((maxX - minX) / size));
  const rows = Math.min(64, Math.ceil((maxY - minY) / size));
  const half = Math.max((maxX - minX) / columns, (maxY - minY) / rows) / 2;
  let open: Square[] = [];
  for (let i = 0; i < columns; i += 1) {
    for (let j = 0; j < rows; j += 1)
      open.push(square(minX + half * (2 * i + 1), minY + half * (2 * j + 1), half));
  }
  let best = open[0]!;
  while (open.length > 0) {
    for (const one of open) if (one.inside > best.inside) best = one;
    const next: Square[] = [];
    for (const { x, y, half: h, most } of open) {
      if (most <= best.inside + size * 1e-3) continue;
      const q = h / 2;
      next.push(square(x - q, y - q, q), square(x + q, y - q, q));
      next.push(square(x - q, y + q, q), square(x + q, y + q, q));
    }
    open = next;
  }
  return { diameter: 2 * Math.max(0, best.inside), at: [best.x, best.y] };
}

/** Distance of a place from an outline, negative outside of it. */
function distance(outline: readonly Point[], x: number, y: number): number {
  let least = Number.POSITIVE_INFINITY;
  let inside = false;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i, i += 1) {
    const [ax, ay] = outline[i]!;
    const [bx, by] = outline[j]!;
    if (ay > y !== by > y && x < ((bx - ax) * (y - ay)) / (by - ay) + ax) inside = !inside;
    const [dx, dy] = [bx - ax, by - ay];
    const t = Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy)));
    least = Math.min(least, Math.hypot(x - ax - t * dx, y - ay - t * dy));
  }
  return inside ? least : -least;
}
