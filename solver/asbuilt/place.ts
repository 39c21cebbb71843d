import type { Channel, Point } from '../chip/chip.ts';
import { metres } from '../chip/units.ts';
import { formatQuantity } from '../chip/units-format.ts';
import { Problem } from '../problem/problem.ts';

/** Of the straight runs, nm: bends of a radius cut a little off. */
export function lengthAlong({ path }: Pick<Channel, 'path'>): number {
  let length = 0;
  for (let i = 1; i < path.length; i += 1) {
    length += Math.hypot(path[i][0] - path[i - 1][0], path[i][1] - path[i - 1][1]);
  }
  return length;
}

/** The middle of a path, each run by its length, nm. */
export function centroid(path: readonly Point[]): readonly [number, number] {
  let [x, y, length] = [0, 0, 0];
  for (let i = 1; i < path.length; i += 1) {
    const [[ax, ay], [bx, by]] = [path[i - 1], path[i]];
    const run = Math.hypot(bx - ax, by - ay);
    x += ((ax + bx) / 2) * run;
    y += ((ay + by) / 2) * run;
    length += run;
  }
  return length > 0 ? [x / length, y / length] : path[0];
}

/** Distance along a channel of the place on it that is nearest, nm. Throws where it lies off the channel. */
export function nearestAlong(channel: Channel, [x, y]: readonly [number, number], row: number): number {
  const { path } = channel;
  let [best, found, before] = [Number.POSITIVE_INFINITY, 0, 0];
  for (let i = 1; i < path.length; i += 1) {
    const [[ax, ay], [bx, by]] = [path[i - 1], path[i]];
    const run = Math.hypot(bx - ax, by - ay);
    const share = Math.min(1, Math.max(0, ((x - ax) * (bx - ax) + (y - ay) * (by - ay)) / (run * run)));
    const away = Math.hypot(x - ax - share * (bx - ax), y - ay - share * (by - ay));
    if (away < best) {
      best = away;
      found = before + share * run;
    }
    before += run;
  }
  // Twice its width off: a slip of the pointer is forgiven, another channel is not.
  if (best > 2 * Math.max(...channel.width)) {
    throw new Problem(
      'range',
      `The place lies ${formatQuantity(metres(best), 'length', { digits: 2 })} off channel "${channel.id}".`,
      `row ${row}, column x`,
      'Give a place on the channel, or the distance along it.',
    );
  }
  return found;
}
