import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { verdicts } from '../../renderer/verdict/verdicts.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Result } from '../../solver/chip/result.ts';
import { emptyMemory } from '../../solver/memory.ts';
import { solve, solveInParts } from '../../solver/solve.ts';

const FOLDER = join(import.meta.dirname, '../../assets/demo');
const DEMOS = readdirSync(FOLDER)
  .filter((file) => file.endsWith('.json'))
  .map((file): readonly [string, Chip] => [file, readDescription(readFileSync(join(FOLDER, file), 'utf8'))]);

/** With limits that need routes, with one that needs none, without any. */
const variants = (chip: Chip): readonly Chip[] => [
  chip,
  { ...chip, limits: [{ name: 'any wall', shear: 3 }] },
  { ...chip, limits: [{ name: 'a large cell', shear: 3, cellDiameter: 1 }] },
  { ...chip, limits: [] },
];
const answers = (chip: Chip, result: Result) => verdicts({ chip, result, trouble: '', waiting: 0 });
const IDEAL = { junctions: 'ideal' } as const;

describe.each(DEMOS)('%s in two parts', (_, demo) => {
  test('the first part gives the five answers of the whole', () => {
    for (const chip of variants(demo)) {
      const { first, whole } = solveInParts(chip, IDEAL, emptyMemory());
      expect(answers(chip, first)).toEqual(answers(chip, whole()));
    }
  });

  test('the whole is that of a fresh solve, though the same memory solved something else meanwhile', () => {
    const memory = emptyMemory();
    for (const chip of variants(demo)) {
      const parts = solveInParts(chip, IDEAL, memory);
      const halved = { ...chip.fluid, density: 500 };
      solve({ ...chip, fluid: halved, ports: chip.ports.slice().reverse() }, IDEAL, memory);
      const wider = chip.channels.map((one) => ({ ...one, width: [9e4, 9e4] as const }));
      solve({ ...chip, channels: wider }, IDEAL, memory);
      expect(JSON.stringify(parts.whole())).toBe(JSON.stringify(solve(chip, IDEAL)));
    }
  });
});
