import { expect, test } from 'vitest';
import { channel, chipOf, port } from '../../test/chip/drawings.ts';
import type { Chip } from '../chip/chip.ts';
import { Session } from '../session.ts';
import { solve } from '../solve.ts';

const IDEAL = { junctions: 'ideal' } as const;
const chip = chipOf({
  channels: [
    channel(
      'feed',
      [
        [1000, 5000],
        [9000, 5000],
      ],
      100,
    ),
  ],
  ports: [{ ...port('in', [1000, 5000]), drive: { kind: 'flow', flow: 1e-11 } }, port('out', [9000, 5000])],
});
const inlet = (change: Partial<Chip['ports'][number]>): Chip => ({
  ...chip,
  ports: [{ ...chip.ports[0]!, ...change }, chip.ports[1]!],
});

test('what a clean drawing is checked by besides its graph is seen when it changes', () => {
  const session = new Session();
  const kinds = (now: Chip): string[] => {
    const live = session.update(now, IDEAL);
    expect(live).toEqual(solve(now, IDEAL));
    return live.findings.map(({ kind }) => kind);
  };
  expect(kinds(chip)).not.toContain('tubing-volume');
  expect(kinds(inlet({ drive: { kind: 'flow', flow: 2e-11 } }))).not.toContain('tubing-volume');
  expect(kinds(inlet({ tubing: [{ bore: 1e-3, length: 2 }] }))).toContain('tubing-volume');
  expect(kinds(chip)).not.toContain('tubing-volume');
  const bare = kinds(chip);
  expect(kinds({ ...chip, process: { kind: 'film-mask', leastWidth: 200_000 } })).not.toEqual(bare);
});
