import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { channel, chipOf, layer } from '../chip/drawings.ts';

/**
 * A lattice of about `count` channels: one cavity with thousands of islands. With `bends` those that go up
 * have two rounded bends each.
 */
export function lattice(count: number, bends: boolean): Chip {
  const side = Math.ceil(Math.sqrt(count / 2));
  const pitch = 600;
  const at = (i: number, j: number): [number, number] => [1000 + pitch * i, 1000 + pitch * j];
  const channels: Channel[] = [];
  for (let j = 0; j <= side; j += 1) {
    for (let i = 0; i <= side; i += 1) {
      const width = 80 + ((i * 7 + j * 3) % 40);
      if (i < side && channels.length < count)
        channels.push(channel(`h${i}.${j}`, [at(i, j), at(i + 1, j)], width));
      if (j < side && channels.length < count) {
        const [x, y] = at(i, j);
        const path: [number, number][] = [
          [x, y],
          [x, y + 200],
          [x + 150, y + 200],
          [x + 150, y + 600],
        ];
        if (bends) channels.push(channel(`v${i}.${j}`, path, width, { bendRadius: 75 }));
        else channels.push(channel(`v${i}.${j}`, [at(i, j), at(i, j + 1)], width));
      }
    }
  }
  const size = 1000 * (side * pitch + 2000);
  return chipOf({
    name: 'lattice',
    outline: { width: size, height: size },
    layers: [layer('flow')],
    channels,
  });
}
