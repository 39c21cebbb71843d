import type { Channel, Chip, KeepOut, Port } from '../../solver/chip/chip.ts';
import type { ChipEdit } from '../../solver/chip/edit.ts';
import { LISTS, partsOf } from '../../solver/chip/schema-check.ts';

/** Random numbers from a seed, 0 to below 1 (a 32-bit Weyl sequence through a mixing step). */
export function seeded(seed: number): () => number {
  let state = (seed * 0x9e3779b9) >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
  };
}

type Change = ChipEdit['changes'][number];

/**
 * One to four changes of every sort that may or may not fit the chip: a refused edit is part of the
 * test. `serial` keeps new ids apart.
 */
export function randomEdit(chip: Chip, random: () => number, serial: number): ChipEdit {
  const pick = <T>(list: readonly T[]): T | undefined => list[Math.floor(random() * list.length)];
  const whole = (most: number): number => Math.floor(random() * most);
  const changes: Change[] = [];
  const count = 1 + whole(4);
  for (let i = 0; i < count; i += 1) {
    const fresh = `n${serial}.${i}`;
    const channel = pick(chip.channels);
    const port = pick(chip.ports);
    const sort = random();
    if (sort < 0.3 && channel) {
      const part: Channel = {
        ...channel,
        id: random() < 0.1 ? fresh : channel.id,
        width: [1 + whole(1e6), 1 + whole(1e6)],
        bendRadius: whole(1e5),
      };
      changes.push({ kind: 'put', list: 'channels', id: channel.id, part });
    } else if (sort < 0.4 && port) {
      const part: Port = { ...port, at: [whole(1e8), whole(1e8)], drive: { kind: 'head', head: random() } };
      changes.push({ kind: 'put', list: 'ports', id: port.id, part });
    } else if (sort < 0.6 && channel) {
      const part = { ...channel, id: fresh };
      changes.push({ kind: 'insert', list: 'channels', index: whole(chip.channels.length + 1), part });
    } else if (sort < 0.62) {
      const part: KeepOut = {
        id: random() < 0.1 ? (pick(chip.keepOuts ?? [])?.id ?? fresh) : fresh,
        outline: [
          [whole(1e8), whole(1e8)],
          [1e8 + whole(1e8), whole(1e8)],
          [whole(1e8), 2e8 + whole(1e8)],
        ],
        clearance: whole(2) * whole(1e6),
        ...(random() < 0.5 && { layer: pick(chip.layers)?.id ?? 'flow' }),
      };
      const known = chip.keepOuts?.find(({ id }) => id === part.id);
      changes.push(
        known
          ? { kind: 'put', list: 'keepOuts', id: part.id, part }
          : { kind: 'insert', list: 'keepOuts', index: whole((chip.keepOuts?.length ?? 0) + 1), part },
      );
    } else if (sort < 0.66 && port) {
      changes.push({
        kind: 'insert',
        list: 'ports',
        index: whole(chip.ports.length + 1),
        part: { ...port, id: fresh },
      });
    } else if (sort < 0.8) {
      const list = pick(LISTS)!;
      const part = pick(partsOf(chip, list));
      if (part) changes.push({ kind: 'remove', list, id: part.id });
    } else if (sort < 0.9) {
      const list = pick(LISTS)!;
      const part = pick(partsOf(chip, list));
      const to = random() < 0.2 ? (pick(chip.channels)?.id ?? fresh) : fresh;
      if (part) changes.push({ kind: 'rename', list, id: part.id, to });
    } else if (sort < 0.93) changes.push({ kind: 'set', key: 'note', value: `note ${serial}` });
    else if (sort < 0.96 && port) {
      changes.push({ kind: 'set', key: 'targets', value: [{ port: port.id, share: 0.5, within: 0.02 }] });
    } else if (sort < 0.98 && channel) {
      changes.push({
        kind: 'set',
        key: 'limits',
        value: [{ name: 'cells', shear: 1 + random(), where: channel.id }],
      });
    } else if (sort < 0.987) {
      changes.push({ kind: 'set', key: 'process', value: random() < 0.5 ? null : { kind: 'milling' } });
    } else if (sort < 0.991) {
      changes.push({ kind: 'set', key: 'assay', value: random() < 0.5 ? null : { time: 1 + whole(1e5) } });
    } else if (sort < 0.994) {
      changes.push({
        kind: 'set',
        key: 'rating',
        value: random() < 0.5 ? null : { pressure: 1 + whole(1e6) },
      });
    } else
      changes.push({ kind: 'set', key: 'outline', value: { width: 1 + whole(1e9), height: 1 + whole(1e9) } });
  }
  return { label: `edit ${serial}`, changes };
}
