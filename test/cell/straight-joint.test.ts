import { expect, test } from 'vitest';
import { readDescription } from '../../solver/chip/description.ts';
import { solve } from '../../solver/solve.ts';

/** A sharp bend, drawn in one or with the second leg going on in a channel of its own from `joint` on (um). */
function resistance(joint: number | null): number {
  const [dx, dy] = [0.5468, 0.8372];
  const at = (s: number): [number, number] => [2000 + s * dx, 6000 + s * dy];
  const channel = (id: string, path: [number, number][]) => ({ id, layer: 'flow', path, width: 130 });
  const start: [number, number][] = [
    [4000, 6000],
    [2000, 6000],
  ];
  const channels =
    joint === null
      ? [channel('a', [...start, at(2000)])]
      : [channel('a', [...start, at(joint)]), channel('b', [at(joint), at(2000)])];
  const chip = readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'bend',
      lengthUnit: 'um',
      outline: { width: 12000, height: 12000 },
      layers: [{ id: 'flow', depth: 40, fillet: 10 }],
      channels,
      ports: [
        { id: 'in', at: start[0], layer: 'flow', drive: { flow: '1 uL/min' } },
        { id: 'out', at: at(2000), layer: 'flow', drive: { pressure: 0 } },
      ],
      fluid: { name: 'water', temperature: '25 degC' },
    }),
  );
  const { ports, junctions, cells } = solve(chip, { junctions: 'solved' });
  expect(junctions, `joint at ${joint}`).toBe('solved');
  expect(cells.length, `joint at ${joint}`).toBeGreaterThan(0);
  return ports[0]!.pressure! / ports[0]!.flow!;
}

test('a channel that goes on straight in another is the same wherever the one ends and the other begins', () => {
  const whole = resistance(null);
  for (let joint = 150; joint <= 700; joint += 11)
    expect(Math.abs(resistance(joint) / whole - 1), `joint at ${joint}`).toBeLessThan(0.005);
});
