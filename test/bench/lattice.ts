/** A lattice of about `count` channels, each from one crossing to the next, as a description. */
export function lattice(count: number): string {
  const side = Math.ceil(Math.sqrt(count / 2));
  const pitch = 500;
  const channels: unknown[] = [];
  const at = (i: number, j: number): [number, number] => [1000 + pitch * i, 1000 + pitch * j];
  for (let j = 0; j <= side; j += 1) {
    for (let i = 0; i <= side; i += 1) {
      const width = 80 + ((i * 7 + j * 3) % 40);
      if (i < side && channels.length < count)
        channels.push({ id: `h${i}.${j}`, layer: 'flow', path: [at(i, j), at(i + 1, j)], width });
      if (j < side && channels.length < count)
        channels.push({ id: `v${i}.${j}`, layer: 'flow', path: [at(i, j), at(i, j + 1)], width });
    }
  }
  return JSON.stringify({
    format: 'channelwright-chip',
    version: 1,
    name: 'lattice',
    outline: { width: 400000, height: 400000 },
    layers: [{ id: 'flow', depth: 50, profile: { kind: 'rectangle' }, fillet: 5 }],
    channels,
    ports: [
      { id: 'in', at: at(0, 0), layer: 'flow', diameter: 0, drive: { flow: '10 uL/min' } },
      { id: 'out', at: at(1, side >> 1), layer: 'flow', diameter: 0, drive: { pressure: 0 } },
    ],
    fluid: { name: 'water', temperature: '25 degC' },
  });
}
