import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { MASK_FORMATS, type MaskOptions } from '../../main/contract/mask.ts';
import { PARTS } from '../../main/export/mask/cells.ts';
import type { MaskModel } from '../../main/export/mask/model.ts';
import { perimeterOf } from '../../main/export/mask/shapes.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { crowdedDrawing, random, randomDrawing } from '../chip/random-drawing.ts';
import { apart, modelOf, roundTrip } from './mask-drawings.ts';

/** Writes, reads back and compares every part of every drawing by the polygon library's symmetric difference. */
async function check(model: MaskModel, says: string): Promise<number> {
  let compared = 0;
  const { chordError, separate } = model.settings;
  expect(separate).toBe(false);
  for (const format of MASK_FORMATS) {
    const models = format === 'svg' ? model.planes.map((plane) => ({ ...model, planes: [plane] })) : [model];
    for (const some of models) {
      const { found, name } = await roundTrip(some, format);
      expect(found.offArc, `${says} ${format}`).toBeLessThan(chordError / 4);
      for (const plane of some.planes) {
        for (const part of PARTS) {
          const shapes = plane[part];
          if (shapes.length === 0) continue;
          const loops = found.loops.get(name(plane, part))?.edges() ?? [];
          // to be compared at all, true arcs are cut within a quarter of the chord error
          const difference = apart(shapes, loops, chordError / 4);
          const allowed = chordError * perimeterOf(shapes);
          expect(difference, `${says} ${format} ${plane.name} ${part}`).toBeLessThanOrEqual(allowed);
          compared += 1;
        }
      }
    }
  }
  return compared;
}

const DEMOS = join(import.meta.dirname, '../../assets/demo');

test('every demo through every format and back', async () => {
  for (const file of readdirSync(DEMOS)) {
    const chip = readDescription(readFileSync(join(DEMOS, file), 'utf8'));
    expect(await check(modelOf(chip), file)).toBeGreaterThan(15);
  }
});

/** Options of a random mask: everything that moves or changes what is drawn. */
function randomOptions(seed: number): MaskOptions {
  const next = random(seed);
  return {
    chordError: [20, 100, 500][Math.floor(next() * 3)]!,
    mirror: next() < 0.5,
    pads: next() < 0.5,
    marks: next() < 0.3,
    polarity: next() < 0.5 ? 'dark-field' : 'clear-field',
    lane: next() < 0.5 ? 0 : 100_000,
    labels: next() < 0.1,
    ...(next() < 0.4 && { undercut: Math.round(next() * 4000) }),
    ...(next() < 0.4 && { shrink: next() * 0.03 }),
    ...(next() < 0.2 && { wafer: { diameter: 200_000_000, edge: 3_000_000 } }),
  };
}

test('200 random chips through every format and back', async () => {
  let compared = 0;
  for (let seed = 1; seed <= 200; seed++) {
    const chip = seed % 2 === 0 ? randomDrawing(seed, 3) : crowdedDrawing(seed);
    if (chip.channels.length === 0) continue;
    compared += await check(modelOf(chip, randomOptions(seed)), `seed ${seed}`);
  }
  expect(compared).toBeGreaterThan(2000);
}, 120_000);
