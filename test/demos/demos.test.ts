import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import type { PieceResult, Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';
import { run } from '../cli/run.ts';
import { microlitresPerMinute, peakShear, resistance, rounded, stressPower, taper } from './by-hand.ts';

const FOLDER = join(import.meta.dirname, '../../assets/demo');
const FILES = readdirSync(FOLDER).filter((file) => file.endsWith('.json'));

const read = (name: string): Chip =>
  readDescription(readFileSync(join(FOLDER, `${name}.json`), 'utf8'), name);
const solved = async (chip: Chip): Promise<Result> => await solve(chip, { junctions: 'ideal' });
const piece = (result: Result, id: string, number = 1): PieceResult =>
  result.channels.find((channel) => channel.id === id)!.pieces[number - 1]!;
const port = (result: Result, id: string): Result['ports'][number] =>
  result.ports.find((entry) => entry.id === id)!;

/** Relative difference; hand and solver share no code, so what is left is the series cut short. */
const near = (got: number | null, wanted: number, within = 1e-6): void => {
  expect(Math.abs(got! / wanted - 1), `${got} against ${wanted}`).toBeLessThan(within);
};

describe('every demo', () => {
  test('there are at least five', () => {
    expect(FILES.length).toBeGreaterThanOrEqual(5);
  });

  test.each(FILES)('%s is named, captioned, written as the program writes, and solved', async (file) => {
    const text = readFileSync(join(FOLDER, file), 'utf8');
    const chip = readDescription(text);
    expect(chip.name).toMatch(/\S/);
    expect(chip.note.length).toBeGreaterThan(60);
    expect(chip.targets.length + chip.limits.length).toBeGreaterThan(0);
    expect(writeDescription(chip)).toBe(text);
    const result = await solved(chip);
    expect(result.findings.filter(({ severity }) => severity === 'stop')).toEqual([]);
    expect(result.balance.conservationResidual).toBeLessThan(1e-10);
    near(result.balance.dissipation, result.balance.powerIn, 1e-9);
    // A demo is a chip of ordinary size: a slide of 76 by 26 mm, channels of 50 to 1200 um.
    expect(chip.outline).toEqual({ width: 76_000_000, height: 26_000_000 });
    for (const { width } of chip.channels) {
      for (const end of width) expect(end).toSatisfy((nm: number) => nm >= 50_000 && nm <= 1_200_000);
    }
  });

  const CODES: [file: string, code: number][] = [
    ['eight-way-splitter', 0],
    ['gradient-tree', 0],
    ['gravity-crossing', 0],
    ['recirculation-loop', 0],
    ['cell-loading', 1],
    ['circulating-cells', 1],
  ];
  test.each(CODES)('%s ends the command with %i', async (file, code) => {
    const ran = await run(join(FOLDER, `${file}.json`), '--junctions', 'ideal');
    expect(ran.code, ran.out + ran.err).toBe(code);
  });
});

describe('eight-way splitter', () => {
  test('an eighth of the flow at each outlet, pressure level by level', async () => {
    const result = await solved(read('eight-way-splitter'));
    const mu = result.fluid.viscosity!;
    for (let i = 1; i <= 8; i += 1) near(port(result, `out ${i}`).share, 0.125, 1e-12);
    expect(result.targets.map(({ met }) => met)).toEqual(Array(8).fill(true));
    const depth = 80e-6;
    const hole = 0.5e-3;
    near(
      piece(result, 'feed').pressureDrop,
      microlitresPerMinute(80) * resistance(mu, 4e-3 - hole, 240e-6, depth),
    );
    const arms = [
      { id: 'level 1 arm 2', flow: 40, width: 200e-6, length: rounded(18e-3, 5e-3, 0.3e-3) },
      { id: 'level 2 arm 3', flow: 20, width: 160e-6, length: rounded(9e-3, 5e-3, 0.24e-3) },
      { id: 'level 3 arm 8', flow: 10, width: 120e-6, length: rounded(4.5e-3, 4e-3, 0.18e-3) - hole },
    ];
    for (const { id, flow, width, length } of arms) {
      const q = microlitresPerMinute(flow);
      near(piece(result, id).pressureDrop, q * resistance(mu, length, width, depth));
      near(piece(result, id).peakWallShear, peakShear(mu, q, width, depth));
      near(piece(result, id).residenceTime, (length * width * depth) / q);
    }
  });
});

describe('gradient tree', () => {
  test('five lanes carry a fifth each within half a per cent, alike from both sides', async () => {
    const result = await solved(read('gradient-tree'));
    const shares = [1, 2, 3, 4, 5].map((lane) => port(result, `waste ${lane}`).share!);
    near(
      shares.reduce((sum, share) => sum + share, 0),
      1,
      1e-12,
    );
    near(shares[0]!, shares[4]!, 1e-10);
    near(shares[1]!, shares[3]!, 1e-10);
    // The middle lane is nearest to both inlets, the outer ones farthest from them.
    expect(shares[2]).toBeGreaterThan(shares[1]!);
    expect(shares[1]).toBeGreaterThan(shares[0]!);
    for (const share of shares) near(share, 0.2, 5e-3);
    near(port(result, 'buffer').pressure, port(result, 'dye').pressure, 1e-10);
    const mu = result.fluid.viscosity!;
    const lane = piece(result, 'lane 3');
    near(lane.pressureDrop, lane.flow! * resistance(mu, 16.9e-3 - 0.5e-3, 300e-6, 60e-6));
  });
});

describe('cell loading', () => {
  const mu = 0.85e-3;
  const depth = 50e-6;
  /** Neck of a given width and the lines before and behind it, against the way round it. */
  const share = (neck: number): number => {
    const through =
      resistance(mu, (13 + 15.5 + 10) * 1e-3, 200e-6, depth) +
      2 * taper(mu, 1e-3, 200e-6, neck, depth) +
      resistance(mu, 1.5e-3, neck, depth);
    const around = resistance(mu, 50e-3, 110e-6, depth);
    return around / (around + through);
  };

  test('fails at first: the neck takes more than the cells bear', async () => {
    const result = await solved(read('cell-loading'));
    near(result.fluid.viscosity, mu, 1e-12);
    const flow = microlitresPerMinute(4) * share(80e-6);
    near(piece(result, 'neck').flow, flow, 1e-5);
    near(piece(result, 'neck').peakWallShear, peakShear(mu, flow, 80e-6, depth), 1e-5);
    near(piece(result, 'neck').pressureDrop, flow * resistance(mu, 1.5e-3, 80e-6, depth), 1e-5);
    near(port(result, 'waste').share, 1, 1e-12);
    expect(result.targets[0]!.met).toBe(true);
    expect(result.limits[0]).toMatchObject({ limit: 1.5, met: false });
    near(result.limits[0]!.worst, 1.67965, 1e-5);
  });

  test('holds in the channels once the neck is 120 um wide', async () => {
    const chip = read('cell-loading');
    const wider = (id: string, width: readonly [number, number]) =>
      ({
        kind: 'put',
        list: 'channels',
        id,
        part: { ...chip.channels.find((channel) => channel.id === id)!, width },
      }) as const;
    const saved = applyEdit(chip, {
      label: 'widen the neck',
      changes: [
        wider('funnel', [200_000, 120_000]),
        wider('neck', [120_000, 120_000]),
        wider('release', [120_000, 200_000]),
      ],
    });
    const result = await solved(saved);
    const flow = microlitresPerMinute(4) * share(120e-6);
    near(piece(result, 'neck').peakWallShear, peakShear(mu, flow, 120e-6, depth), 1e-5);
    expect(result.limits[0]!.met).toBe(true);
    expect(result.targets[0]!.met).toBe(true);
  });
});

describe('recirculation loop', () => {
  test('the lane carries loop and make-up together, and the bleed what is added', async () => {
    const result = await solved(read('recirculation-loop'));
    const mu = 0.85e-3;
    const depth = 150e-6;
    near(result.fluid.viscosity, mu, 1e-12);
    near(piece(result, 'culture lane').flow, microlitresPerMinute(124), 1e-12);
    near(port(result, 'bleed out').flow, microlitresPerMinute(-4), 1e-9);
    near(port(result, 'loop pump out').share, 120 / 124, 1e-12);
    const lane = microlitresPerMinute(124);
    near(piece(result, 'culture lane').pressureDrop, lane * resistance(mu, 32e-3, 1.1e-3, depth));
    near(piece(result, 'culture lane').peakWallShear, peakShear(mu, lane, 1.1e-3, depth));
    const head = rounded(7e-3, 10e-3, 0.8e-3) - 0.5e-3;
    const loop = microlitresPerMinute(120);
    near(piece(result, 'loop head').pressureDrop, loop * resistance(mu, head, 400e-6, depth));
    const bleed = microlitresPerMinute(4) * resistance(mu, 8.5e-3, 100e-6, depth);
    // From the outlet backwards: what the loop pump draws from lies below the bleed's junction.
    near(port(result, 'loop pump in').pressure, bleed - loop * resistance(mu, head, 400e-6, depth));
    expect(result.limits.map(({ met }) => met)).toEqual([true, true]);
  });
});

describe('circulating cells', () => {
  const mu = (result: Result): number => result.fluid.viscosity!;
  /** Damage of all passes on the mean path, by the law of the demo: ducts and tapers slice by slice. */
  const damage = (viscosity: number, window: number, passes: number): number => {
    const flow = microlitresPerMinute(40);
    const exponent = 2.416 / 0.785;
    const per = (width: number, length: number): number =>
      ((viscosity * flow) ** exponent * stressPower(width, 60e-6, exponent) * length) / flow;
    let dose = per(300e-6, (50 - 1) * 1e-3) + per(window, 6e-3);
    const slices = 24;
    for (let i = 0; i < slices; i += 1) {
      dose += 2 * per(window + ((i + 0.5) / slices) * (300e-6 - window), 2e-3 / slices);
    }
    return (3.62e-5 * (passes * dose) ** 0.785) / 100;
  };
  const widened = (chip: Chip, window: number): Chip =>
    applyEdit(chip, {
      label: 'widen the window',
      changes: (
        [
          ['narrowing', [300_000, window]],
          ['window', [window, window]],
          ['widening', [window, 300_000]],
        ] as const
      ).map(([id, width]) => ({
        kind: 'put',
        list: 'channels',
        id,
        part: { ...chip.channels.find((channel) => channel.id === id)!, width },
      })),
    });

  test('no moment harms, the dose of all passes does; a wider window saves the cells, as the caption says', async () => {
    const drawn = read('circulating-cells');
    const result = await solved(drawn);
    const [moment, hour] = result.limits;
    expect(moment).toMatchObject({ met: true, limit: 150 });
    expect(moment!.worst).toBeLessThan(25);
    expect(hour).toMatchObject({ met: false, path: 'wall-hugging', where: 'window#1' });
    const route = result.routes.find(({ from, to }) => from === 'pump out' && to === 'pump in')!;
    near(route.damage[0]!.mean, damage(mu(result), 60e-6, 41), 0.01);
    expect(hour!.worst).toBeGreaterThan(route.damage[0]!.mean!);

    const wider = await solved(widened(drawn, 90_000));
    expect(wider.limits.map(({ met }) => met)).toEqual([true, true]);
    near(wider.routes[0]!.damage[0]!.mean, damage(mu(wider), 90e-6, 41), 0.01);
  });

  test('its passes are those of the loop: an hour over its own volume and that of its tubing', async () => {
    const drawn = read('circulating-cells');
    const flow = microlitresPerMinute(40);
    const chip = 60e-6 * (49e-3 * 300e-6 + 6e-3 * 60e-6 + 4e-3 * 180e-6);
    const tubing = 2 * 0.15 * (Math.PI / 4) * 0.5e-3 ** 2;
    const round = (chip + tubing) / flow;
    const law = drawn.limits.find((limit) => 'law' in limit)!;
    expect(law).toMatchObject({ passes: Math.ceil(3600 / round) });
    const kinds = (await solved(drawn)).findings.map(({ kind }) => kind);
    expect(kinds).not.toContain('loop-passes');
  });
});

describe('attached-cell chamber', () => {
  test('both arms carry half, and the lines stay below their limit', async () => {
    const result = await solved(read('attached-cells'));
    const mu = 0.85e-3;
    const depth = 120e-6;
    near(port(result, 'waste').flow, microlitresPerMinute(-120), 1e-12);
    const arm = microlitresPerMinute(60);
    near(piece(result, 'upper inlet arm').flow, arm, 1e-9);
    near(
      piece(result, 'lower outlet arm').pressureDrop,
      arm * resistance(mu, rounded(3e-3, 6e-3, 0.5e-3), 300e-6, depth),
    );
    near(
      piece(result, 'supply').pressureDrop,
      microlitresPerMinute(120) * resistance(mu, 8.25e-3, 300e-6, depth),
    );
    near(piece(result, 'supply').peakWallShear, peakShear(mu, microlitresPerMinute(120), 300e-6, depth));
    expect(result.limits.find(({ name }) => name === 'lines')).toMatchObject({ met: true });
  });
});

describe('gravity crossing', () => {
  test('the lines do not meet, and each runs as its height and its resistance say', async () => {
    const result = await solved(read('gravity-crossing'));
    const mu = result.fluid.viscosity!;
    const drop = result.fluid.density * 9.80665 * (0.15 - 0.005);
    const sample = resistance(mu, 66e-3 - 1e-3, 150e-6, 60e-6);
    near(port(result, 'sample').flow, drop / sample, 1e-5);
    expect(piece(result, 'sample line')).toMatchObject({ from: 'port:sample', to: 'port:sample waste' });
    const wash =
      resistance(mu, 25e-3 - 0.7e-3, 150e-6, 60e-6) +
      resistance(mu, 14e-3 - 0.4e-3, 150e-6, 80e-6) +
      resistance(mu, 41e-3 - 0.7e-3, 150e-6, 60e-6);
    near(port(result, 'wash').flow, drop / wash, 1e-5);
    near(port(result, 'sample').pressure, result.fluid.density * 9.80665 * 0.15, 1e-9);
  });
});
