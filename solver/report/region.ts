import type { Chamber, Channel, Chip, Point } from '../chip/chip.ts';

/** The part of the plan that a channel or chamber covers, nm; null for what has no area of its own. */
export function regionOf(chip: Chip, id: string): ((x: number, y: number) => boolean) | null {
  const channel = chip.channels.find((entry) => entry.id === id);
  if (channel) return (x, y) => inChannel(channel, x, y);
  const chamber = chip.chambers.find((entry) => entry.id === id);
  return chamber ? (x, y) => inChamber(chamber, x, y) : null;
}

/** A point on the wall belongs, rounding or not. */
const TOUCH = 50;

/** Within half the width of the centreline, ends cut square; a rounded bend counts by its two legs. */
function inChannel({ path, width }: Channel, x: number, y: number): boolean {
  let length = 0;
  for (let i = 1; i < path.length; i += 1) length += apart(path[i - 1], path[i]);
  let along = 0;
  for (let i = 1; i < path.length; i += 1) {
    const [ax, ay] = path[i - 1];
    const [bx, by] = path[i];
    const leg = apart(path[i - 1], path[i]);
    const share = ((x - ax) * (bx - ax) + (y - ay) * (by - ay)) / (leg * leg);
    const first = i === 1 ? -TOUCH / leg : Number.NEGATIVE_INFINITY;
    const last = i === path.length - 1 ? 1 + TOUCH / leg : Number.POSITIVE_INFINITY;
    if (share >= first && share <= last) {
      const at = Math.min(1, Math.max(0, share));
      const distance = Math.hypot(x - ax - at * (bx - ax), y - ay - at * (by - ay));
      const here = width[0] + ((width[1] - width[0]) * (along + at * leg)) / length;
      if (distance <= here / 2 + TOUCH) return true;
    }
    along += leg;
  }
  return false;
}

const apart = ([ax, ay]: Point, [bx, by]: Point): number => Math.hypot(bx - ax, by - ay);

/** By crossings of a ray; points on the outline may count either way. */
export function inChamber({ outline }: Chamber, x: number, y: number): boolean {
  let inside = false;
  outline.forEach(([ax, ay], i) => {
    const [bx, by] = outline[(i + 1) % outline.length];
    if (ay > y !== by > y && x < ax + ((y - ay) * (bx - ax)) / (by - ay)) inside = !inside;
  });
  return inside;
}
