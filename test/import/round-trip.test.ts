import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import type { MaskFormat } from '../../main/contract/mask.ts';
import { makeMasks } from '../../main/export/mask/make.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { solve } from '../../solver/solve.ts';
import { chipOf, drawingOf } from './read.ts';

/** Masks of the demos, read back as any drawing: the same walls, and the same flow at every port. */

const FOLDER = join(import.meta.dirname, '../../assets/demo');
const DEMOS = readdirSync(FOLDER).filter((name) => name.endsWith('.json'));
const demo = (name: string): Chip => readDescription(readFileSync(join(FOLDER, name), 'utf8'), name);

async function masks(chip: Chip, format: MaskFormat): Promise<Uint8Array[]> {
  const made = await makeMasks(chip, {
    formats: [format],
    options: { marks: false, labels: false, lane: 0, polarity: 'clear-field' },
    version: 'test',
    made: new Date(0),
  });
  return made.files.map(({ content }) => content);
}

/** The layer of the drawing that holds the fluid of the chip's layer `i`, and what the others are. */
function rolesFor(names: readonly string[], chip: Chip): Parameters<typeof chipOf>[1] {
  const roles = names.map((name) => {
    const i = Number(/^L?(\d+)/.exec(name)?.[1] ?? 0) - 1;
    if (/_OUTLINE$|\/2$/.test(name)) return [name, { kind: 'outline' }];
    if (/_(MARKS|LANE|LABELS)$|\/[134]$/.test(name)) return [name, { kind: 'ignore' }];
    const layer = chip.layers[i];
    return layer
      ? [name, { kind: 'cavity', depth: layer.depth, layer: layer.id }]
      : [name, { kind: 'holes' }];
  });
  return { roles: Object.fromEntries(roles) };
}

/** The chip's drives, fluid and holes with the channels that were read back. */
function reread(chip: Chip, read: Chip): Chip {
  return { ...chip, channels: read.channels, chambers: read.chambers, targets: [], limits: [] };
}

for (const format of ['dxf', 'gdsii'] as const) {
  test.each(DEMOS)(`${format}: %s comes back with its walls and its flows`, async (name) => {
    const chip = demo(name);
    const [bytes] = await masks(chip, format);
    const names = drawingOf(bytes!).layers.map((layer) => layer.name);
    const { chip: read, report } = chipOf(bytes!, rolesFor(names, chip));
    // Chords stand for arcs within 0.1 µm; what is read back may lie twice that off.
    for (const { deviation } of report.chipLayers) {
      expect(deviation!.furthest).toBeLessThan(0.2e-6);
      expect(deviation!.difference).toBeLessThan(0.1e-6 * deviation!.perimeter);
    }
    expect(read.outline).toEqual(chip.outline);
    const [wanted, got] = await Promise.all(
      [{ ...chip, targets: [], limits: [] }, reread(chip, read)].map((one) =>
        solve(one, { junctions: 'ideal' }),
      ),
    );
    const most = Math.max(...wanted!.ports.map(({ flow }) => Math.abs(flow ?? 0)));
    for (const port of wanted!.ports) {
      const again = got!.ports.find(({ id }) => id === port.id)!;
      expect(Math.abs(again.flow! - port.flow!), `${port.id} of ${name}`).toBeLessThan(0.002 * most);
      if (port.share)
        expect(Math.abs(again.share! / port.share - 1), `${port.id} of ${name}`).toBeLessThan(0.002);
    }
  });
}

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
