import type { Channel, Chip, Drive, Point, Port } from '../../solver/chip/chip.ts';
import type { ChipEdit } from '../../solver/chip/edit.ts';
import { channel, chipOf, port } from '../chip/drawings.ts';

/** A comb: a header with branches to outlets, which random edits then make less tidy. Solvable as it stands. */
export function comb(branches: number): Chip {
  const channels: Channel[] = [
    channel(
      'header',
      [
        [1000, 2000],
        [1000 + 1000 * branches, 2000],
      ],
      200,
    ),
  ];
  const ports: Port[] = [{ ...port('in', [1000, 2000], 600), drive: { kind: 'flow', flow: 1e-10 } }];
  for (let i = 1; i <= branches; i += 1) {
    const x = 1000 + 1000 * i;
    channels.push(
      channel(
        `branch${i}`,
        [
          [x, 2000],
          [x, 6000 + 500 * (i % 3)],
        ],
        80 + 10 * (i % 4),
      ),
    );
    ports.push(port(`out${i}`, [x, 6000 + 500 * (i % 3)], i % 2 === 0 ? 500 : 0));
  }
  return chipOf({ channels, ports });
}

/** What a person does all day: widths, vertices, drives, the fluid, targets, channels added and taken away. */
export function workEdit(chip: Chip, next: () => number, serial: number): ChipEdit {
  const whole = (most: number): number => Math.floor(next() * most);
  const one: Channel = chip.channels[whole(chip.channels.length)];
  const hole: Port = chip.ports[whole(chip.ports.length)];
  const put = (part: Channel): ChipEdit => ({
    label: 'change a channel',
    changes: [{ kind: 'put', list: 'channels', id: part.id, part }],
  });
  const kind = next();
  if (kind < 0.35) {
    const width = 1000 * (20 + whole(200));
    return put({ ...one, width: [width, next() < 0.3 ? 1000 * (20 + whole(200)) : width] });
  }
  if (kind < 0.5) {
    const path = [...one.path];
    const at = whole(path.length);
    path[at] = [path[at][0] + 1000 * (whole(400) - 200), path[at][1] + 1000 * (whole(400) - 200)];
    return put({ ...one, path });
  }
  if (kind < 0.6) {
    const [a, b] = [one.path[0], one.path[1]];
    const middle: Point = [Math.round((a[0] + b[0]) / 2), Math.round((a[1] + b[1]) / 2) + 1000 * whole(300)];
    return put({ ...one, path: [a, middle, ...one.path.slice(1)], bendRadius: 1000 * whole(100) });
  }
  if (kind < 0.75) {
    const drive: Drive =
      next() < 0.5
        ? { kind: 'pressure', pressure: whole(2000) }
        : next() < 0.7
          ? { kind: 'head', head: next() * 0.1 }
          : { kind: 'closed' };
    const tubing = next() < 0.3 ? [{ bore: 1e-4 * (1 + next()), length: next() }] : [];
    return {
      label: 'change a port',
      changes: [{ kind: 'put', list: 'ports', id: hole.id, part: { ...hole, drive, tubing } }],
    };
  }
  if (kind < 0.85) {
    const start = one.path[whole(one.path.length)];
    const part: Channel = {
      ...one,
      id: `new${serial}`,
      path: [start, [start[0] + 1000 * (100 + whole(3000)), start[1] + 1000 * (100 + whole(3000))]],
    };
    return {
      label: 'add a channel',
      changes: [{ kind: 'insert', list: 'channels', index: chip.channels.length, part }],
    };
  }
  if (kind < 0.9) return { label: 'delete', changes: [{ kind: 'remove', list: 'channels', id: one.id }] };
  if (kind < 0.95) {
    return {
      label: 'fluid',
      changes: [{ kind: 'set', key: 'fluid', value: { viscosity: 1e-3 * (1 + next()), density: 1000 } }],
    };
  }
  const [layer] = chip.layers;
  return {
    label: 'depth',
    changes: [
      { kind: 'put', list: 'layers', id: layer.id, part: { ...layer, depth: 1000 * (20 + whole(100)) } },
    ],
  };
}
