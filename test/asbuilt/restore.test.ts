import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { asBuilt } from '../../solver/asbuilt/as-built.ts';
import { boundedLeastSquares } from '../../solver/asbuilt/least-squares.ts';
import type { Measured } from '../../solver/asbuilt/measured.ts';
import { driveEdit, restoreDrives } from '../../solver/asbuilt/restore.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { solve } from '../../solver/solve.ts';
import { cross } from './chips.ts';

const IDEAL = { junctions: 'ideal' } as const;

/** The cross with other widths, µm. */
const wide = (chip: Chip, widths: Readonly<Record<string, number>>): Chip => ({
  ...chip,
  channels: chip.channels.map((one) => {
    const width = Math.round((widths[one.id] ?? one.width[0] / 1000) * 1000);
    return { ...one, width: [width, width] as const };
  }),
});
const pressures = (chip: Chip): (number | null)[] =>
  chip.ports.map(({ drive }) => (drive.kind === 'pressure' ? drive.pressure : null));

describe('drives that restore targets', () => {
  test('by hand: one inlet 10 % wider needs 1/1.1 of the other’s drop over it', () => {
    const chip = wide(cross({ targets: [{ port: 'in a', share: 0.5, within: '1 %' }] }), { b: 1100 });
    const { chip: set, met, settings } = restoreDrives(chip, IDEAL);
    expect(met).toBe(true);
    expect(settings.map(({ port }) => port)).toEqual(['in a', 'in b']);
    const [a, b] = pressures(set) as [number, number];
    // With p in the middle: (a − p) 1 = (b − p) 1.1, and twice that flow leaves by two ways: p = (a − p)
    const p = a / 2;
    // Side walls are 1.3 % of what holds the flow back in these.
    expect((b - p) / (a - p)).toBeCloseTo(1 / 1.1, 2);
    expect(solve(set, IDEAL).ports[0]!.share).toBeCloseTo(0.5, 4);
  });

  test('outlets at one pressure divide by their channels: drives alone do not help, open ports held would', () => {
    const chip = wide(cross({ targets: [{ port: 'out c', share: 0.5, within: '1 %' }] }), { d: 1200 });
    const alone = restoreDrives(chip, IDEAL);
    expect(alone.met).toBe(false);
    expect(alone.settings).toEqual([]);
    expect(alone.strain).toBeCloseTo(Math.abs(1 / 2.2 / 0.5 - 1) / 0.01, 0);
    const all = restoreDrives(chip, { ...IDEAL, set: chip.ports.map(({ id }) => id) });
    expect(all.met).toBe(true);
    // Holding d back rather than sucking at c: a drive keeps its sign.
    const [, , c, d] = pressures(all.chip) as number[];
    expect(c).toBeGreaterThanOrEqual(0);
    expect(d).toBeGreaterThan(0);
    // The inlets are as good as left alone.
    expect(pressures(all.chip)[0]! / 1e4).toBeCloseTo(1, 2);
  });

  test('what is met already is left as it is', () => {
    expect(restoreDrives(cross(), IDEAL)).toMatchObject({ settings: [], met: true });
  });

  test('a pump’s end is kept, and said', () => {
    const chip = wide(
      cross({
        ports: cross().ports.map(({ id, at }, i) => ({
          id,
          at: at.map((v) => v / 1000),
          layer: 'flow',
          diameter: 0,
          drive: { pressure: i < 2 ? '100 mbar' : 0 },
          ...(i === 0 && { pump: { pressure: '105 mbar' } }),
        })),
        targets: [{ port: 'in a', flow: '300 uL/min', within: '1 %' }],
      }),
      {},
    );
    const { settings, met, result } = restoreDrives(chip, { ...IDEAL, set: ['in a'] });
    expect(met).toBe(false);
    expect(settings).toHaveLength(1);
    expect(settings[0]).toMatchObject({ port: 'in a', held: 'pump' });
    expect(
      pressures({
        ...chip,
        ports: chip.ports.map((p) => (p.id === 'in a' ? { ...p, drive: settings[0]!.to } : p)),
      })[0],
    ).toBeCloseTo(10_500, 3);
    expect(result.ports[0]!.flow).not.toBeNull();
  });

  test('flows that are imposed and heads are set as what they are', () => {
    const chip = wide(
      cross({
        ports: cross().ports.map(({ id, at }, i) => ({
          id,
          at: at.map((v) => v / 1000),
          layer: 'flow',
          diameter: 0,
          drive: i === 0 ? { flow: '10 uL/min' } : i === 1 ? { head: '900 mm' } : { pressure: 0 },
        })),
        targets: [
          { port: 'in a', flow: '12 uL/min', within: '0.1 %' },
          { port: 'in b', flow: '6 uL/min', within: '0.1 %' },
        ],
      }),
      { b: 900 },
    );
    const { settings, met } = restoreDrives(chip, IDEAL);
    expect(met).toBe(true);
    expect(settings.map(({ to }) => to.kind).sort()).toEqual(['flow', 'head']);
  });

  test('a thinning fluid: met when solved afresh', () => {
    const chip = wide(
      cross({
        fluid: { density: 1050, shear: { kind: 'power-law', consistency: 0.02, index: 0.6 } },
        targets: [{ port: 'in a', share: 0.4, within: '0.5 %' }],
      }),
      { b: 1100 },
    );
    const { chip: set, met } = restoreDrives(chip, IDEAL);
    expect(met).toBe(true);
    expect(Math.abs(solve(set, IDEAL).targets[0]!.got! / 0.4 - 1)).toBeLessThan(1e-3);
  });

  test('a channel’s flow can be asked for', () => {
    const chip = wide(cross({ targets: [{ channel: 'c', flow: '50 uL/min', within: '0.1 %' }] }), { c: 900 });
    const { chip: set, met } = restoreDrives(chip, IDEAL);
    expect(met).toBe(true);
    expect(solve(set, IDEAL).targets[0]!.met).toBe(true);
  });

  test('the edit sets the drives on the drawn chip in one step and can be taken back', () => {
    const drawn = cross({ targets: [{ port: 'in a', share: 0.5, within: '1 %' }] });
    const { settings } = restoreDrives(wide(drawn, { b: 1100 }), IDEAL);
    const edit = driveEdit(drawn, settings);
    const set = applyEdit(drawn, edit);
    expect(set.channels).toBe(drawn.channels);
    expect(set.ports[1]!.drive).toEqual(settings[1]!.to);
    expect(edit.label).toBe('set the drives that restore the targets');
  });

  test('no target, no such port, a closed port: said, not guessed', () => {
    expect(() => restoreDrives(cross({ targets: [] }), IDEAL)).toThrow(/No target is given/);
    expect(() => restoreDrives(cross(), { ...IDEAL, set: ['nowhere'] })).toThrow(Problem);
    const shut = {
      ...cross(),
      ports: cross().ports.map((p, i) => (i === 3 ? { ...p, drive: { kind: 'closed' as const } } : p)),
    };
    expect(() => restoreDrives(shut, { ...IDEAL, set: ['out d'] })).toThrow(/closed/);
  });

  test('random made chips with an inlet each to set: the shares that inlets can give are met when solved afresh', () => {
    const width = fc.integer({ min: 900, max: 1100 });
    fc.assert(
      fc.property(
        width,
        width,
        width,
        width,
        fc.double({ min: 0.35, max: 0.65, noNaN: true }),
        (a, b, c, d, share) => {
          const chip = wide(cross({ targets: [{ port: 'in a', share, within: '0.1 %' }] }), { a, b, c, d });
          const { chip: set, met } = restoreDrives(chip, IDEAL);
          expect(met).toBe(true);
          const fresh = solve(structuredClone(set), IDEAL);
          expect(Math.abs(fresh.ports[0]!.share! / share - 1)).toBeLessThan(1e-3);
        },
      ),
      { numRuns: 40, seed: 3 },
    );
  });
});

describe('least squares within bounds', () => {
  test('against every way of setting variables free or to a bound, 200 random problems', () => {
    const entry = fc.double({ min: -3, max: 3, noNaN: true });
    fc.assert(
      fc.property(
        fc.array(fc.tuple(entry, entry, entry, entry), { minLength: 3, maxLength: 5 }),
        fc.tuple(entry, entry, entry).map((b) => b.map((v) => [Math.min(0, v), Math.max(0.1, -v)] as const)),
        (given, bounds) => {
          const rows = [...given.map((row) => row.slice(0, 3)), [0.3, 0, 0], [0, 0.3, 0], [0, 0, 0.3]];
          const right = [...given.map((row) => row[3]!), 0, 0, 0];
          const cost = (x: readonly number[]): number =>
            rows.reduce(
              (sum, row, r) => sum + (row.reduce((s, a, i) => s + a * x[i]!, 0) - right[r]!) ** 2,
              0,
            );
          const x = boundedLeastSquares(rows, right, bounds);
          x.forEach((v, i) => {
            expect(v).toBeGreaterThanOrEqual(bounds[i]![0] - 1e-12);
            expect(v).toBeLessThanOrEqual(bounds[i]![1] + 1e-12);
          });
          // No small step within the bounds is better: the problem is convex, so this is the best.
          const least = cost(x);
          for (let i = 0; i < 3; i += 1) {
            for (const step of [1e-4, -1e-4]) {
              const moved = x.map((v, k) =>
                k === i ? Math.min(bounds[k]![1], Math.max(bounds[k]![0], v + step)) : v,
              );
              expect(cost(moved)).toBeGreaterThanOrEqual(least - 1e-9 * (1 + least));
            }
          }
        },
      ),
      { numRuns: 200, seed: 11 },
    );
  });
});

describe('the way that a target’s flow runs', () => {
  /** A bridge between two branches, from left to right where left is the wide one above. */
  const bridge = (widths: Readonly<Record<string, number>>): Chip =>
    wide(
      cross({
        channels: [
          {
            id: 'a',
            layer: 'flow',
            path: [
              [8000, 20000],
              [30000, 20000],
            ],
            width: 1000,
          },
          {
            id: 'b',
            layer: 'flow',
            path: [
              [8000, 6000],
              [30000, 6000],
            ],
            width: 1000,
          },
          {
            id: 'c',
            layer: 'flow',
            path: [
              [30000, 20000],
              [52000, 20000],
            ],
            width: 1000,
          },
          {
            id: 'd',
            layer: 'flow',
            path: [
              [30000, 6000],
              [52000, 6000],
            ],
            width: 1000,
          },
          {
            id: 'bridge',
            layer: 'flow',
            path: [
              [30000, 20000],
              [30000, 6000],
            ],
            width: 1000,
          },
        ],
        targets: [{ channel: 'bridge', flow: '1 uL/min', within: '99 %' }],
      }),
      widths,
    );
  const measured = (id: string, value: number): Measured => ({
    what: 'width',
    of: 'channel',
    id,
    value,
    uncertainty: 1e-9,
    along: null,
    at: null,
    row: 1,
  });

  test('a flow that the made chip turns round is not met, whatever its size', () => {
    const drawn = bridge({ a: 1500 });
    const size = solve(drawn, IDEAL).targets[0]!.got!;
    const chip: Chip = { ...drawn, targets: [{ channel: 'bridge', flow: size, within: 0.2 }] };
    expect(solve(chip, IDEAL).targets[0]).toMatchObject({ met: true });
    // Made as the mirror image of what was drawn: the same flow through the bridge, the other way.
    const made = asBuilt(chip, [measured('a', 1e-3), measured('b', 1.5e-3)], {
      ...IDEAL,
      set: ['in a', 'in b'],
    });
    expect(made.drawn.targets[0]).toMatchObject({ met: true });
    expect(made.result.targets[0]!.met).toBe(false);
    expect(made.result.targets[0]!.got! / size).toBeCloseTo(-1, 6);
    // The drives bring it back the way it was drawn, and only so is it met.
    expect(made.restored!.met).toBe(true);
    const { pieces } = made.restored!.result.channels.find(({ id }) => id === 'bridge')!;
    expect(pieces[0]!.flow! / size).toBeGreaterThan(0.8);
  });

  test('without a drawn chip beside it the flow is to run as it does', () => {
    const chip = bridge({ b: 1500 });
    const { flow } = solve(chip, IDEAL).channels.find(({ id }) => id === 'bridge')!.pieces[0]!;
    expect(flow).toBeLessThan(0);
    const twice: Chip = { ...chip, targets: [{ channel: 'bridge', flow: -1.5 * flow!, within: 0.01 }] };
    const { met, result } = restoreDrives(twice, { ...IDEAL, set: ['in a', 'in b'] });
    expect(met).toBe(true);
    expect(result.channels.find(({ id }) => id === 'bridge')!.pieces[0]!.flow! / flow!).toBeCloseTo(1.5, 1);
  });
});
