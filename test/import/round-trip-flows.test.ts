import { beforeAll, describe, expect, test } from 'vitest';
import type { Role } from '../../main/contract/bring-in.ts';
import type { MaskFormat } from '../../main/contract/mask.ts';
import { makeMasks } from '../../main/export/mask/make.ts';
import type { Chamber, Channel, Chip } from '../../solver/chip/chip.ts';
import { solve } from '../../solver/solve.ts';
import { randomNetwork } from '../chips/random-network.ts';
import { verify } from '../verify/row.ts';
import { chipOf, drawingOf } from './read.ts';

/**
 * Masks of random chips, read back as any drawing: how the flow splits. A mask has no ports and drives: those of the
 * chip are put back where they were. In every test run a fixed half of the chips goes through one format each, in a
 * verification run all 200 through all formats.
 */

const WHOLE = process.env.CHANNELWRIGHT_VERIFY !== undefined;
const CHIPS = WHOLE ? 200 : 99;
const FORMATS = ['dxf', 'gdsii', 'svg'] as const;
type Format = (typeof FORMATS)[number];
/** Chips whose junctions are solved: every such one, and those that ideal junctions do not tell alike. */
const SOLVED = WHOLE ? 10 : 33;
/** Asked of solved junctions, well below what the two may differ by. */
const ACCURACY = 0.001;
/** A port that takes less than this of the whole is compared by the whole. */
const LEAST_SHARE = 0.05;
const HOUR = 3.6e6;

async function masks(chip: Chip, format: MaskFormat): Promise<Uint8Array[]> {
  const { files } = await makeMasks(chip, {
    formats: [format],
    options: { marks: false, labels: false, lane: 0, polarity: 'clear-field' },
    version: 'test',
    made: new Date(0),
  });
  return files.map(({ content }) => content);
}

function roleOf(name: string, chip: Chip): Role {
  const layer = chip.layers[Number(/^L?(\d+)/.exec(name)?.[1] ?? 0) - 1];
  if (!/^L?\d/.test(name) || /_(MARKS|LANE|LABELS)$|\/[134]$/.test(name)) return { kind: 'ignore' };
  if (/_OUTLINE$|\/2$/.test(name)) return { kind: 'outline' };
  return layer ? { kind: 'cavity', depth: layer.depth, layer: layer.id } : { kind: 'holes' };
}

interface Read {
  readonly chip: Chip;
  /** Area of the difference over what the chord error allows. */
  readonly area: number;
}

/** The chip with the channels and chambers that its masks hold. */
async function readBack(chip: Chip, format: Format): Promise<Read> {
  const channels: Channel[] = [];
  const chambers: Chamber[] = [];
  let area = 0;
  for (const bytes of await masks(chip, format)) {
    const roles = drawingOf(bytes).layers.map(({ name }): [string, Role] => [name, roleOf(name, chip)]);
    if (!roles.some(([, { kind }]) => kind === 'cavity')) continue;
    const { chip: read, report } = chipOf(bytes, { roles: Object.fromEntries(roles) });
    expect(read.outline).toEqual(chip.outline);
    channels.push(...read.channels.map((one) => ({ ...one, id: `${one.layer} ${one.id}` })));
    chambers.push(...read.chambers.map((one) => ({ ...one, id: `${one.layer} ${one.id}` })));
    for (const { deviation } of report.chipLayers)
      area = Math.max(area, deviation!.difference / (0.1e-6 * deviation!.perimeter));
  }
  return { chip: { ...chip, channels, chambers }, area };
}

/** The most that a port's flow differs by, relative; whether all junctions were taken as asked. */
function apart(
  one: Chip,
  other: Chip,
  junctions: 'ideal' | 'solved',
): { readonly off: number; readonly whole: boolean } {
  const results = [one, other].map((chip) => solve(chip, { junctions, accuracy: ACCURACY }));
  const [wanted, got] = results.map(({ ports }) => ports);
  const total = wanted!.reduce((sum, { flow }) => sum + Math.max(0, flow!), 0);
  const off = wanted!.reduce((most, { id, flow }) => {
    const again = got!.find((port) => port.id === id)!.flow!;
    return Math.max(most, Math.abs(again - flow!) / Math.max(Math.abs(flow!), LEAST_SHARE * total));
  }, 0);
  return { off, whole: results.every((result) => result.junctions === junctions) };
}

describe.each(FORMATS)('%s', (format) => {
  const found = { area: 0, ideal: 0, solved: 0, chips: 0, doubted: 0, mixed: 0, wells: 0, layers: 0 };
  beforeAll(async () => {
    for (let seed = 1; seed <= CHIPS; seed += 1) {
      if (!WHOLE && seed % FORMATS.length !== FORMATS.indexOf(format)) continue;
      const chip = randomNetwork(seed);
      const read = await readBack(chip, format);
      const { off } = apart(chip, read.chip, 'ideal');
      found.chips += 1;
      found.wells += chip.chambers.length;
      found.layers += chip.layers.length - 1;
      found.area = Math.max(found.area, read.area);
      // Where channels meet in one another's way a junction has no one set of centrelines; its shape decides.
      const doubted = off > 0.002;
      if (doubted) found.doubted += 1;
      else found.ideal = Math.max(found.ideal, off);
      if (!doubted && seed % SOLVED >= FORMATS.length) continue;
      const solved = apart(chip, read.chip, 'solved');
      // A junction that the solver leaves ideal, and says so, is told by the ideal comparison.
      if (!solved.whole && !doubted) found.mixed += 1;
      else found.solved = Math.max(found.solved, solved.off);
    }
  }, HOUR);

  test('there are chips of every sort among them, and hardly any in doubt', () => {
    expect(found.chips).toBeGreaterThanOrEqual(WHOLE ? CHIPS : Math.floor(CHIPS / FORMATS.length));
    expect(Math.min(found.wells, found.layers)).toBeGreaterThan(3);
    expect(found.doubted + found.mixed).toBeLessThanOrEqual(0.02 * found.chips);
  });
  const claim = { check: 'invariant', source: 'the chip before it went through the mask' } as const;
  const at = `random chips through ${format.toUpperCase()} and back`;
  verify(
    { ...claim, at, tolerance: 1, quantity: 'area of the difference, over chord error times perimeter' },
    () => found.area,
  );
  verify({ ...claim, at, tolerance: 0.002, quantity: 'flow split, ideal junctions' }, () => found.ideal);
  verify({ ...claim, at, tolerance: 0.002, quantity: 'flow split, solved junctions' }, () => found.solved);
});
