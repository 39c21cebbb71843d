import type { Channel } from '../../solver/chip/chip.ts';
import { tidy } from '../geometry/path.ts';
import type { Xy } from '../geometry/vector.ts';
import { freshId, type Scope, takenIds } from './tool.ts';

/** The width at both ends of a stretch, nm. */
export type Widths = readonly [number, number];

/**
 * A drawn line as channels: one for each run of stretches that keep one width, one for each stretch that
 * tapers; each begins where the one before ends.
 *
 * @param widths of each stretch, one less than there are points
 * @param bendRadius of the corners within each channel, nm
 */
export function channelsOf(
  points: readonly Xy[],
  widths: readonly Widths[],
  bendRadius: number,
  scope: Scope,
): Channel[] {
  const runs: { path: Xy[]; width: Widths }[] = [];
  widths.forEach((width, i) => {
    const last = runs.at(-1);
    const goesOn = last && last.width[0] === last.width[1] && width.every((own) => own === last.width[0]);
    if (goesOn) last.path.push(points[i + 1]!);
    else runs.push({ path: [points[i]!, points[i + 1]!], width });
  });
  const taken = takenIds(scope.chip);
  return runs.flatMap(({ path, width }) => {
    const straight = tidy(path);
    if (straight.length < 2) return [];
    const id = freshId(scope.chip, 'channel', taken);
    taken.add(id);
    const value: Channel = {
      id,
      layer: scope.layer,
      path: straight as Channel['path'],
      width,
      bendRadius: straight.length > 2 ? bendRadius : 0,
    };
    return [value];
  });
}
