import type { Channel, Chip, KeepOut } from '../chip/chip.ts';
import { type Near, nearKeepOuts } from '../chip/plan-clear.ts';
import type { Finding } from '../problem/finding.ts';
import type { Drawn } from './evidence.ts';
import type { Gathered } from './gather.ts';
import { length, METRE, placeOf } from './words.ts';

/** Of its width: a channel that would have to give up more is led another way. */
const MOST_NARROWED = 0.5;

/** Everything drawn, with its width and what an etch adds, against what is to stay clear. */
export function checkKeepOuts({ chip, rules }: Drawn, found: Gathered): void {
  if (!chip.keepOuts) return;
  const eaten = (layer: number): number => (rules?.undercut?.number ?? 0) * chip.layers[layer]!.depth;
  for (const near of nearKeepOuts(chip, eaten)) {
    const { keepOut, kind, id, layer, distance, at } = near;
    const left = Math.max(0, distance - eaten(layer));
    const inside = left === 0;
    if (!inside && left >= keepOut.clearance) continue;
    const lack = keepOut.clearance + eaten(layer) - distance;
    const narrowed = kind === 'channel' && distance > 0 ? narrower(chip, id, lack) : null;
    found.add({
      kind: 'keep-out',
      severity: inside ? 'stop' : 'warn',
      where: kind === 'channel' ? id : `${kind}:${id}`,
      says: inside
        ? `${id} lies in ${named(keepOut)}${distance > 0 ? ', by what the etch adds' : ''}.`
        : `${id} lies ${length(left)} from ${named(keepOut)}; ${length(keepOut.clearance)} are to stay clear.`,
      do: narrowed
        ? `Narrow ${id} to ${length(Math.max(...narrowed.width))}, or lead it round ${keepOut.id}.`
        : `${kind === 'channel' ? `Lead ${id} round` : `Move ${id} off`} ${keepOut.id}${inside ? '' : `, ${length(lack)} further away`}, or give the keep-out another outline.`,
      at: placeOf(...at),
      value: left / METRE,
      threshold: keepOut.clearance / METRE,
      ...(narrowed && { remedy: remedyOf(narrowed) }),
      off: 1 + keepOut.clearance / Math.max(1, left),
    });
  }
}

const named = ({ id, note }: KeepOut): string =>
  `${id.startsWith('keep-out') ? id : `the keep-out ${id}`}${note === undefined ? '' : ` (${note.replace(/\s+/g, ' ').slice(0, 60)})`}`;

/** The channel narrowed alike over its length, so that each of its sides moves in by `lack` nm. */
function narrower(chip: Chip, id: string, lack: Near['distance']): Channel | null {
  const channel = chip.channels.find((one) => one.id === id)!;
  const by = 2 * Math.ceil(lack);
  if (by > MOST_NARROWED * Math.min(...channel.width)) return null;
  return { ...channel, width: [channel.width[0] - by, channel.width[1] - by] };
}

const remedyOf = (part: Channel): NonNullable<Finding['remedy']> => ({
  label: `narrow ${part.id} to ${length(Math.max(...part.width))}`.slice(0, 200),
  changes: [{ kind: 'put', list: 'channels', id: part.id, part }],
});
