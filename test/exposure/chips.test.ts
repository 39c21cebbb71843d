import { describe, expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Result } from '../../solver/chip/result.ts';
import { rectangleConductance } from '../../solver/section/rectangle.ts';
import { solve as solveWith } from '../../solver/solve.ts';
import { verify } from '../verify/row.ts';

const solve = (chip: Chip): Result => solveWith(chip, { junctions: 'ideal' });
const MU = 1e-3;
const UL_MIN = 1e-9 / 60;

function chipOf(parts: Record<string, unknown>): Chip {
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'test',
      outline: { width: 76000, height: 26000 },
      layers: [{ id: 'flow', depth: 50, profile: { kind: 'rectangle' }, fillet: 5 }],
      fluid: { viscosity: '1 mPa.s', density: 1000 },
      ...parts,
    }),
  );
}
const channel = (id: string, path: number[][], width = 100) => ({ id, layer: 'flow', path, width });
const port = (id: string, at: number[], drive: Record<string, unknown>, more = {}) => ({
  id,
  at,
  layer: 'flow',
  drive,
  ...more,
});
const kinds = ({ findings }: Result): string[] => findings.map(({ kind }) => kind);

/** One line of two channels, 100 µm wide for 5 mm, then 200 µm for 4 mm; 1 µL/min. */
const line = (more: Record<string, unknown> = {}, drive: Record<string, unknown> = { flow: '1 uL/min' }) =>
  chipOf({
    channels: [
      channel('a', [
        [0, 1000],
        [5000, 1000],
      ]),
      channel(
        'b',
        [
          [5000, 1000],
          [9000, 1000],
        ],
        200,
      ),
    ],
    ports: [port('in', [0, 1000], drive), port('out', [9000, 1000], { pressure: 0 })],
    ...more,
  });

/** Two inlets into a lane that parts to two outlets, arms of different widths. */
const crossing = (more: Record<string, unknown> = {}) =>
  chipOf({
    channels: [
      channel('p', [
        [1000, 9000],
        [5000, 5000],
      ]),
      channel(
        'q',
        [
          [1000, 1000],
          [5000, 5000],
        ],
        150,
      ),
      channel(
        'lane',
        [
          [5000, 5000],
          [15000, 5000],
        ],
        200,
      ),
      channel('r', [
        [15000, 5000],
        [19000, 9000],
      ]),
      channel(
        's',
        [
          [15000, 5000],
          [19000, 1000],
        ],
        160,
      ),
    ],
    ports: [
      port('one', [1000, 9000], { flow: '3 uL/min' }),
      port('two', [1000, 1000], { flow: '1 uL/min' }),
      port('up', [19000, 9000], { pressure: 0 }),
      port('down', [19000, 1000], { pressure: 0 }),
    ],
    ...more,
  });

describe('routes', () => {
  const claim = { check: 'exact', source: 'volume over flow', tolerance: 1e-9 } as const;
  verify({ ...claim, quantity: 'mean residence time of a route', at: 'two channels in a row' }, () => {
    const [route] = solve(line()).routes;
    const volume = 50e-6 * (100e-6 * 5e-3 + 200e-6 * 4e-3);
    return route.residenceTime! / (volume / UL_MIN) - 1;
  });

  verify(
    { ...claim, quantity: 'residence times of all routes by their shares', at: 'two inlets, two outlets' },
    () => {
      const result = solve(crossing());
      let mean = 0;
      for (const { share, residenceTime } of result.routes) mean += share * residenceTime!;
      let volume = 0;
      for (const { pieces } of result.channels) {
        for (const { residenceTime, flow } of pieces) volume += residenceTime! * Math.abs(flow!);
      }
      return mean / (volume / (4 * UL_MIN)) - 1;
    },
  );

  test('shares are those of full mixing, add up to what enters and leaves, and say so', () => {
    const result = solve(crossing());
    const share = (from: string, to: string): number =>
      result.routes.find((route) => route.from === from && route.to === to)!.share;
    const up = result.ports.find(({ id }) => id === 'up')!.share!;
    expect(result.routes).toHaveLength(4);
    expect(share('one', 'up')).toBeCloseTo(0.75 * up, 10);
    expect(share('two', 'up')).toBeCloseTo(0.25 * up, 10);
    expect(result.routes.reduce((sum, route) => sum + route.share, 0)).toBeCloseTo(1, 10);
    expect(kinds(result)).toContain('streams-meet');
    expect(kinds(solve(line()))).not.toContain('streams-meet');
  });

  test('a path names what it crosses, with time and pressure falling to the outlet', () => {
    const [route] = solve(line()).routes;
    expect(route.path!.map(({ name }) => name)).toEqual(['a#1', 'b#1']);
    expect(route.path!.at(-1)!.pressure).toBeCloseTo(0, 9);
    expect(route.path!.at(-1)!.time).toBeCloseTo(route.residenceTime!, 12);
    expect(route.pathShare).toBeCloseTo(1, 12);
    expect(route.peakAt).toBe('a#1');
    expect(route.fastest!).toBeLessThan(route.residenceTime!);
    expect(route.slowest!).toBeGreaterThan(route.residenceTime!);
  });

  test('parallel ways between the same ports are one route, of which the wider carries most', () => {
    const chip = chipOf({
      channels: [
        channel(
          'wide',
          [
            [0, 5000],
            [5000, 9000],
            [10000, 5000],
          ],
          200,
        ),
        channel('thin', [
          [0, 5000],
          [5000, 1000],
          [10000, 5000],
        ]),
      ],
      ports: [port('in', [0, 5000], { flow: '1 uL/min' }), port('out', [10000, 5000], { pressure: 0 })],
    });
    const { routes } = solve(chip);
    expect(routes).toHaveLength(1);
    const [w, t] = [200e-6, 100e-6].map((width) => rectangleConductance(width, 50e-6));
    expect(routes[0].path!.map(({ name }) => name)).toEqual(['wide#1']);
    expect(routes[0].pathShare).toBeCloseTo(w / (w + t), 6);
    expect(routes[0].share).toBeCloseTo(1, 12);
  });
});

describe('limits', () => {
  const LAW = { constant: 3.62e-5, stress: 2.416, time: 0.785 };
  const limit = (more: Record<string, unknown>, ...rest: Record<string, unknown>[]) => ({
    limits: [more, ...rest].map((entry, i) => ({ name: `limit ${i + 1}`, ...entry })),
  });

  test('no limit given is not a limit met', () => {
    const result = solve(line());
    expect(result.limits).toEqual([]);
    expect(result.routes[0].damage).toEqual([]);
  });

  test('a law is judged on its routes, passes and all, and the figure stands with each route', () => {
    const result = solve(
      line(
        limit(
          { law: LAW, damage: '1 %', cellDiameter: '12 um' },
          { law: LAW, damage: '0.0000000001 %', passes: 1000 },
        ),
      ),
    );
    const [first, second] = result.limits;
    expect(first).toMatchObject({ met: true, limit: 0.01, where: 'a#1', route: ['in', 'out'] });
    expect(second).toMatchObject({ met: false });
    const [one, thousand] = result.routes[0].damage;
    expect(thousand.mean! / one.mean!).toBeCloseTo(1000 ** LAW.time, 6);
    expect(one.wallHugging).toBeGreaterThan(one.mean!);
    expect(thousand.wallHugging).toBeNull();
  });

  test('a limit holds in its own part alone', () => {
    const result = solve(
      line(
        limit(
          { shear: '0.3 Pa', where: 'b' },
          { shear: '0.3 Pa', where: 'flow' },
          { shear: '0.3 Pa', where: ['in', 'out'] },
          { law: LAW, damage: '1 %', where: 'b' },
          { law: LAW, damage: '1 %' },
        ),
      ),
    );
    expect(result.limits.slice(0, 3).map(({ met }) => met)).toEqual([true, false, false]);
    expect(result.limits[1]!.where).toBe('a#1');
    expect(result.limits[3]!.worst!).toBeLessThan(result.limits[4]!.worst!);
    expect(result.limits[3]!.where).toBe('b#1');
  });

  test('a curve is met, broken, or left open above its first point', () => {
    const judged = (curve: string[][]) => solve(line(limit({ curve, cellDiameter: '12 um' })));
    expect(judged([['1000 s', '1 Pa']]).limits[0]).toMatchObject({ met: true, limit: 1 });
    const broken = judged([
      ['1 ms', '1 Pa'],
      ['2 ms', '1 mPa'],
    ]);
    expect(broken.limits[0]).toMatchObject({ met: false });
    expect(broken.limits[0]!.worst).toBeGreaterThan(1);
    const open = judged([['1000 s', '0.4 Pa']]);
    expect(open.limits[0]!.met).toBeNull();
    expect(kinds(open)).toContain('limit-not-judged');
  });

  test('a cell larger than the channel is a finding of its own, and leaves its limit open', () => {
    const at = (diameter: string) => solve(line(limit({ law: LAW, damage: '1 %', cellDiameter: diameter })));
    expect(kinds(at('50 um'))).not.toContain('cell-too-large');
    const stuck = at('51 um');
    expect(kinds(stuck)).toContain('cell-too-large');
    expect(stuck.limits[0]!.met).toBeNull();
    expect(stuck.routes[0]!.wallHugging).toMatchObject({ residenceTime: null, peakShear: null });
    expect(() => line(limit({ shear: '1 Pa', cellDiameter: '0 um' }))).toThrow(/cellDiameter/);
    expect(() =>
      line(
        limit({
          curve: [
            ['1 s', '1 Pa'],
            ['1 s', '2 Pa'],
          ],
        }),
      ),
    ).toThrow(/longer/);
    expect(() => line(limit({ shear: '1 um' }))).toThrow(/takes a stress/);
  });

  test('constants of two laws in one are told', () => {
    const mixed = { ...LAW, stress: 1.991, time: 0.765 };
    expect(kinds(solve(line(limit({ law: mixed, damage: '1 %' }))))).toContain('law-mixed');
  });

  test('the floor of a straight chamber is that of its duct, of another it is left open', () => {
    const chamber = (outline: number[][], floor: string[], mouth: number) =>
      solve(
        chipOf({
          channels: [
            channel(
              'a',
              [
                [0, 5000],
                [10000, 5000],
              ],
              mouth,
            ),
            channel(
              'b',
              [
                [30000, 5000],
                [40000, 5000],
              ],
              mouth,
            ),
          ],
          chambers: [{ id: 'well', layer: 'flow', outline }],
          ports: [port('in', [0, 5000], { flow: '10 uL/min' }), port('out', [40000, 5000], { pressure: 0 })],
          ...limit({ floor, area: 0.9, where: 'well' }),
        }),
      );
    const box = [
      [10000, 4500],
      [30000, 4500],
      [30000, 5500],
      [10000, 5500],
    ];
    const gradient = (MU * 10 * UL_MIN) / rectangleConductance(1e-3, 50e-6);
    const middle = (gradient * 50e-6) / 2;
    const pa = (value: number): string => `${value} Pa`;
    const near = chamber(box, [pa(0.9 * middle), pa(1.1 * middle)], 1000).limits[0]!;
    expect(near).toMatchObject({ met: true, where: 'chamber:well', limit: 0.9 });
    expect(near.worst!).toBeGreaterThan(0.93);
    expect(chamber(box, [pa(1.1 * middle), pa(2 * middle)], 1000).limits[0]!.met).toBe(false);
    // A narrow mouth leaves 1.5 widths at either end unknown: 3 mm of 20.
    expect(chamber(box, [pa(0.9 * middle), pa(1.1 * middle)], 200).limits[0]!.met).toBeNull();
    const skewed = box.map(([x, y], i) => (i === 2 ? [x, y + 500] : [x, y]));
    const open = chamber(skewed, [pa(0.9 * middle), pa(1.1 * middle)], 200);
    expect(open.limits[0]!.met).toBeNull();
    expect(kinds(open)).toContain('limit-not-judged');
  });
});

describe('pumps and reservoirs', () => {
  test('what a pump must deliver stands against what it can', () => {
    const at = (pump: Record<string, string>, more: Record<string, unknown> = {}) =>
      solve(
        line({
          ports: [
            port('in', [0, 1000], { flow: '1 uL/min' }, { pump }),
            port('out', [9000, 1000], { pressure: 0 }),
          ],
          ...more,
        }),
      );
    const weak = at({ pressure: '50 Pa', flow: '2 uL/min', bore: '1 mm', volume: '30 uL' });
    expect(weak.pumps![0]).toMatchObject({ port: 'in', met: false, ratedPressure: 50 });
    expect(kinds(weak)).toContain('pump-pressure');
    expect(weak.pumps![0]!.runTime).toBeCloseTo(1800, 6);
    expect(weak.pumps![0]!.plungerSpeed).toBeCloseTo(UL_MIN / ((Math.PI / 4) * 1e-6), 12);
    expect(at({ pressure: '1 kPa' }).pumps![0]!.met).toBe(true);
    const short = at({ volume: '30 uL' }, { assay: { time: '1 h' } });
    expect(short.pumps![0]!.met).toBe(false);
    expect(kinds(short)).toContain('runs-out');
    const slow = at({ flow: '0.5 uL/min' });
    expect(kinds(slow)).toContain('pump-flow');
    expect(solve(line()).pumps!.map(({ met }) => met)).toEqual([null, null]);
  });

  test('chip and fittings against their rating', () => {
    expect(kinds(solve(line({ rating: { pressure: '100 Pa' } })))).toContain('burst');
    expect(kinds(solve(line({ rating: { pressure: '1 kPa' } })))).not.toContain('burst');
  });

  verify(
    {
      quantity: 'level of a reservoir that empties through a channel',
      check: 'exact',
      at: 'one vessel, outlet at 0 Pa, two hours',
      source: 'h = h0 exp(-t rho g/(R A))',
      tolerance: 1e-6,
    },
    () => {
      const chip = line({
        ports: [
          port('in', [0, 1000], { head: '50 mm' }, { reservoir: { area: '2 mm^2' } }),
          port('out', [9000, 1000], { pressure: 0 }),
        ],
        assay: { time: '2 h' },
      });
      const resistance =
        MU * (5e-3 / rectangleConductance(100e-6, 50e-6) + 4e-3 / rectangleConductance(200e-6, 50e-6));
      const level = 0.05 * Math.exp((-7200 * 1000 * 9.80665) / (resistance * 2e-6));
      return solve(chip).drift!.levels[0]!.to / level - 1;
    },
  );

  test('a loop that goes round more often than its limit counts is told', () => {
    const law = { constant: 3.62e-5, stress: 2.416, time: 0.785 };
    const at = (time: string, passes: number) =>
      kinds(
        solve(
          crossing({
            ports: [
              port('one', [1000, 9000], { flow: '3 uL/min' }),
              port('two', [1000, 1000], { flow: '1 uL/min' }),
              port('up', [19000, 9000], { flow: '-3 uL/min' }),
              port('down', [19000, 1000], { pressure: 0 }),
            ],
            assay: { time },
            limits: [{ name: 'loop', law, damage: '1 %', passes, where: ['one', 'up'] }],
          }),
        ),
      );
    expect(at('1 h', 1)).toContain('loop-passes');
    expect(at('1 s', 1)).not.toContain('loop-passes');
    expect(at('1 h', 100_000)).not.toContain('loop-passes');
  });
});
