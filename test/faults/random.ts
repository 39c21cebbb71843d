import type { Channel, Chip, Port } from '../../solver/chip/chip.ts';
import type { Change, ChipEdit } from '../../solver/chip/edit.ts';

/** Numbers that follow from a seed (mulberry32), so that what failed once can be done again. */
export function random(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
}

export const whole = (next: () => number, most: number): number => Math.floor(next() * most);

function channel(id: string, next: () => number): Channel {
  const x = 1_000_000 + whole(next, 50_000_000);
  const y = 1_000_000 + whole(next, 20_000_000);
  const width = 10_000 + whole(next, 400_000);
  return {
    id,
    layer: 'flow',
    path: [
      [x, y],
      [x + 1_000_000 + whole(next, 9_000_000), y],
    ],
    width: [width, width],
    bendRadius: 0,
  };
}

function port(id: string, next: () => number): Port {
  return {
    id,
    at: [1_000_000 + whole(next, 60_000_000), 1_000_000 + whole(next, 20_000_000)],
    layer: 'flow',
    diameter: 0,
    drive:
      next() < 0.5 ? { kind: 'pressure', pressure: next() * 1000 } : { kind: 'flow', flow: next() * 1e-9 },
    tubing: [],
  };
}

/** A chip of `channels` channels, invented. */
export function madeUpChip(channels: number, seed = 1): Chip {
  const next = random(seed);
  return {
    name: 'made up',
    note: '',
    lengthUnit: 'um',
    outline: { width: 76_000_000, height: 26_000_000 },
    layers: [{ id: 'flow', depth: 50_000, profile: { kind: 'rectangle' }, fillet: 5_000 }],
    channels: Array.from({ length: channels }, (_, index) => channel(`c${index}`, next)),
    chambers: [],
    vias: [],
    ports: [port('in', next), port('out', next)],
    fluid: { name: 'water', temperature: 298.15 },
    targets: [],
    limits: [{ name: 'cells', shear: 1.5 }],
  };
}

let fresh = 0;

/** An edit that fits the chip: something drawn, moved, renamed, taken away, noted. */
export function randomEdit(chip: Chip, next: () => number): ChipEdit {
  const some = chip.channels[whole(next, chip.channels.length)];
  const kind = whole(next, some ? 6 : 2);
  const changes: Change[] = [];
  fresh += 1;
  const id = `n${fresh}-${whole(next, 1e9).toString(36)}`;
  if (kind === 0) changes.push({ kind: 'set', key: 'note', value: `note ${whole(next, 1e9)} µ` });
  else if (kind === 1)
    changes.push({
      kind: 'insert',
      list: 'channels',
      index: whole(next, chip.channels.length + 1),
      part: channel(id, next),
    });
  else if (kind === 2 && chip.channels.length > 3)
    changes.push({ kind: 'remove', list: 'channels', id: some!.id });
  else if (kind === 3) changes.push({ kind: 'rename', list: 'channels', id: some!.id, to: id });
  else
    for (const one of new Set([some!, chip.channels[whole(next, chip.channels.length)]!]))
      changes.push({ kind: 'put', list: 'channels', id: one.id, part: channel(one.id, next) });
  return { label: `edit ${kind}`, changes };
}
