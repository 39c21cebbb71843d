import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { drawAlong } from '../edits/parts.ts';
import type { Shaping } from '../edits/shape.ts';
import { pathLength } from '../geometry/path.ts';
import { add, direction, sub, times, whole } from '../geometry/vector.ts';
import { serpentine } from '../makers/serpentine.ts';

/** The channel at a wanted length, nm: a serpentine is laid anew in its box, any other is drawn out at its end. */
export function lengthened(chip: Chip, channel: Channel, length: number): Shaping {
  const label = `set the length of ${channel.id}`;
  const wishes = serpentine.read(chip, channel.id);
  if (wishes) {
    const made = serpentine.make(channel.id, { ...wishes, length });
    if ('refusal' in made) return made.refusal;
    return { label, put: [{ kind: 'channel', value: made.made.channels[0]! }] };
  }
  const { path, bendRadius } = channel;
  const end = path.at(-1)!;
  const before = path.at(-2)!;
  const more = length - pathLength(path, bendRadius);
  const last = Math.hypot(end[0] - before[0], end[1] - before[1]) + more;
  if (last <= 0) return 'Its last run would have to be shorter than nothing; move a corner instead.';
  const to = whole(add(before, times(direction(before, end), last)));
  const by = whole(sub(to, end));
  const moved: Channel = { ...channel, path: [...path.slice(0, -1), to] };
  const along = drawAlong(chip, new Set([`channel:${channel.id}`]), new Set([`${end[0]} ${end[1]}`]), by);
  return { label, put: [{ kind: 'channel', value: moved }, ...along] };
}
