import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { apart, FORMATS, masks, reRead } from './re-read.ts';
import { chipOf, drawingOf } from './read.ts';

/** Masks of the demos, read back as any drawing: the same walls, and the same flow at every port. */

const FOLDER = join(import.meta.dirname, '../../assets/demo');
const DEMOS = readdirSync(FOLDER).filter((name) => name.endsWith('.json'));
const demo = (name: string): Chip => readDescription(readFileSync(join(FOLDER, name), 'utf8'), name);

/** In a verification run with solved junctions too. */
const JUNCTIONS = process.env.CHANNELWRIGHT_VERIFY ? (['ideal', 'solved'] as const) : (['ideal'] as const);

describe.each(FORMATS)('%s', (format) => {
  test.each(DEMOS)(
    '%s comes back with its walls and its flows',
    async (name) => {
      const chip: Chip = { ...demo(name), targets: [], limits: [] };
      const read = await reRead(chip, format);
      // Chords stand for arcs within 0.1 µm; what is read back may lie twice that off.
      expect(read.furthest).toBeLessThan(0.2e-6);
      expect(read.area).toBeLessThan(1);
      expect(read.outlines.length).toBe(format === 'svg' ? chip.layers.length : 1);
      for (const outline of read.outlines) expect(outline).toEqual(chip.outline);
      for (const junctions of JUNCTIONS) {
        const { off, whole } = apart(chip, read.chip, junctions);
        expect(off).toBeLessThan(0.002);
        expect(whole).toBe(true);
      }
    },
    600_000,
  );
});

test('svg: a layer by itself comes back with its walls, its unit and its edge', async () => {
  const chip = demo('gravity-crossing.json');
  const [bytes] = await masks(chip, 'svg');
  expect(drawingOf(bytes!).unit).toBeCloseTo(1e-3, 12);
  const { chip: read, report } = chipOf(bytes!);
  expect(read.outline).toEqual(chip.outline);
  expect(report.chipLayers).toHaveLength(1);
  expect(report.chipLayers[0]!.deviation!.furthest).toBeLessThan(0.2e-6);
  const lower = chip.channels.filter(({ layer }) => layer === 'lower');
  expect(read.channels.map(({ width }) => width)).toEqual(lower.map(({ width }) => width));
});
