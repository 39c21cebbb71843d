import { area, EndType, FillRule, inflatePaths, JoinType, type Paths64, union } from 'clipper2-ts';
import { describe, expect, test } from 'vitest';
import type { MaskOptions } from '../../main/contract/mask.ts';
import { compensated } from '../../main/export/mask/compensate.ts';
import { markHalf, markRange, markStep } from '../../main/export/mask/marks.ts';
import {
  areaOf,
  boxOf,
  flatPaths,
  moved,
  perimeterOf,
  polygon,
  rectangle,
} from '../../main/export/mask/shapes.ts';
import { waferLayout } from '../../main/export/mask/wafer.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { planCavities } from '../../solver/chip/plan.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import type { Shape } from '../../solver/mesh/mesh.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { chamber, channel, chipOf, layer, port, via } from '../chip/drawings.ts';
import { crowdedDrawing, randomDrawing } from '../chip/random-drawing.ts';
import { areaBetween, BARE, bend, modelOf } from './mask-drawings.ts';

const um2 = (shapes: readonly Shape[]): number => areaOf(shapes) / 1e6;

const problem = (work: () => unknown): Problem => {
  try {
    work();
  } catch (error) {
    expect(error).toBeInstanceOf(Problem);
    return error as Problem;
  }
  throw new Error('nothing was thrown');
};

describe('etch compensation', () => {
  // Plane geometry: what lies at least u inside. A square loses u on each side; the inner corner of an L, from
  // which the etch reaches in every direction, becomes a quarter circle of radius u.
  test('a square and an L, by hand', () => {
    const square: Shape = [rectangle(0, 0, 100e3, 100e3)];
    expect(um2(compensated(square, 10e3))).toBeCloseTo(80 * 80, 6);
    const points = [
      [0, 0],
      [100, 0],
      [100, 40],
      [40, 40],
      [40, 100],
      [0, 100],
    ].map(([x, y]) => [x! * 1000, y! * 1000] as const);
    const [l, ...none] = compensated([polygon(points)], 10e3);
    expect(none).toEqual([]);
    expect(l![0]!.some(({ bulge }) => Math.abs(bulge + Math.tan(Math.PI / 8)) < 1e-6)).toBe(true);
    // two arms of 20 µm, 80 long, their corner once, and what the round corner leaves of its square
    const round = 10 * 10 * (1 - Math.PI / 4);
    expect(um2([l!])).toBeCloseTo(80 * 20 * 2 - 20 * 20 + round, 4);
  });

  test('a ring keeps true arcs of the radii that it then has', () => {
    const ring: Shape = [
      [
        { x: -50e3, y: 0, bulge: 1, tag: 0 },
        { x: 50e3, y: 0, bulge: 1, tag: 0 },
      ],
      [
        { x: -20e3, y: 0, bulge: -1, tag: 0 },
        { x: 20e3, y: 0, bulge: -1, tag: 0 },
      ],
    ];
    expect(um2(compensated(ring, 5e3))).toBeCloseTo(Math.PI * (45 ** 2 - 25 ** 2), 6);
    expect(compensated(ring, 16e3)).toEqual([]);
  });

  test('random drawings: the same as the polygon library takes off, within its chords', () => {
    for (let seed = 1; seed <= 12; seed++) {
      const chip = seed % 2 === 0 ? randomDrawing(seed, 5) : crowdedDrawing(seed);
      const graph = readGraph(chip);
      for (const { id } of chip.layers) {
        for (const { shape } of planCavities(chip, graph, id, { fillets: false, holes: true })) {
          const undercut = 3000;
          const ours = compensated(shape, undercut);
          const paths: Paths64 = union(flatPaths(shape, 5), FillRule.NonZero);
          const theirs = inflatePaths(paths, -undercut, JoinType.Round, EndType.Polygon, 2, 5);
          const off = areaBetween(
            ours.flatMap((one) => flatPaths(one, 5)),
            theirs,
          );
          expect(off, `seed ${seed} ${id}`).toBeLessThan(20 * perimeterOf([shape]));
          // etched again, nothing outside the wanted shape is gone
          const etched = inflatePaths(theirs, undercut, JoinType.Round, EndType.Polygon, 2, 5);
          const grown = union([...etched, ...paths], FillRule.NonZero);
          const more = grown.reduce((sum, path) => sum + area(path), 0);
          expect(more - areaOf([shape])).toBeLessThan(20 * perimeterOf([shape]));
        }
      }
    }
  });

  const glass = (profile: Chip['layers'][number]['profile'], undercut?: number): Chip => ({
    ...bend(),
    layers: [{ ...layer('a', 1), profile }],
    process: { kind: 'glass-etch', ...(undercut !== undefined && { undercut }) },
  });

  test('is what the process has, less what the drawn width means already', () => {
    // an isotropic etch goes as far sideways as down; a rounded profile's width is that of its mask
    const of = (chip: Chip): number => modelOf(chip, BARE).planes[0]!.undercut;
    expect(of(glass({ kind: 'ellipse' }))).toBe(1000);
    expect(of(glass({ kind: 'rounded' }))).toBe(0);
    expect(of(glass({ kind: 'rounded' }, 1.4))).toBe(400);
    expect(of(bend())).toBe(0);
    expect(modelOf(bend(), { ...BARE, undercut: { a: 700 } }).planes[0]!.undercut).toBe(700);
  });

  test('what it would close is a problem that says where', () => {
    expect(problem(() => modelOf(bend(), { undercut: 2000 })).where).toBe('channel c');
    const chip = chipOf({
      layers: [layer('flow')],
      chambers: [
        chamber('w', [
          [10, 10],
          [15, 10],
          [15, 900],
          [10, 900],
        ]),
      ],
      ports: [port('p', [12, 20])],
    });
    const said = problem(() => modelOf(chip, { undercut: 3000 }));
    expect(said.where).toMatch(/^layer flow, near 10, 10/);
    expect(said.remedy).toMatch(/undercut/);
  });
});

describe('scale and side', () => {
  const chip = { ...bend(), ports: [port('in', [10, 10], 2, 'a')] };

  test('shrinkage is over the mould, about the centre of the chip, and holes are those of the part', () => {
    const model = modelOf(chip, { shrink: 0.015, lane: 0, marks: false });
    const [drawn, holes] = model.planes;
    expect(drawn!.scale).toBe(1 / 0.985);
    const box = boxOf(drawn!.outline)!;
    // 40 µm of part come off a mould of 40.609 µm
    expect((box.x1 - box.x0) * (1 - 0.015)).toBeCloseTo(40e3, 6);
    expect((box.x0 + box.x1) / 2).toBeCloseTo(20e3, 6);
    expect(areaOf(drawn!.cavities) * 0.985 ** 2).toBeCloseTo(
      areaOf(modelOf(chip, BARE).planes[0]!.cavities),
      0,
    );
    expect(holes!.scale).toBe(1);
    expect(areaOf(holes!.cavities)).toBeCloseTo(Math.PI * 1000 ** 2, 3);
    expect(drawn!.notes.join(' ')).toMatch(/Scaled by 1\.015228 .* shrinkage of 1\.5 %/);
  });

  test('mirrored twice is as it was; once, what was left is right and arcs turn', () => {
    const plain = modelOf(chip, BARE).planes[0]!;
    const turned = modelOf(chip, { ...BARE, mirror: true }).planes[0]!;
    const flat = (shapes: readonly Shape[]): Paths64 => shapes.flatMap((shape) => flatPaths(shape, 1));
    const back = flat(turned.cavities).map((path) => path.map(({ x, y }) => ({ x: 40e3 - x, y })).reverse());
    expect(areaBetween(flat(plain.cavities), back)).toBeLessThan(perimeterOf(plain.cavities));
    expect(boxOf(turned.cavities)!.x0).toBeCloseTo(40e3 - boxOf(plain.cavities)!.x1, 6);
    expect(areaOf(turned.cavities)).toBeCloseTo(areaOf(plain.cavities), 3);
  });

  test('layers that are not there are named with those that are', () => {
    expect(problem(() => modelOf(chip, { layers: ['b'] })).remedy).toMatch(/"a"/);
    expect(problem(() => modelOf(chip, { shrink: { b: 0.01 } })).what).toMatch(/"b"/);
    expect(problem(() => modelOf(chipOf({}))).what).toMatch(/nothing to draw/);
  });
});

describe('alignment marks', () => {
  const unit = 30e3;
  const step = markStep(unit);

  /** Middles of the teeth of a scale along one axis, by the vertical (or level) edges of its polygon. */
  function teeth(shape: Shape, along: 'x' | 'y'): number[] {
    const across = along === 'x' ? 'y' : 'x';
    const loop = shape[0]!;
    const tips = loop.flatMap((e, k) => {
      const next = loop[(k + 1) % loop.length]!;
      const isTip =
        Math.abs(Math.abs(next[along] - e[along]) - unit) < 1 && Math.abs(e[across] - next[across]) < 1;
      return isTip ? [{ at: (e[along] + next[along]) / 2, face: Math.round(e[across]) }] : [];
    });
    // the tips that face the other scale are those of which there are eleven on one line
    const lines = new Map<number, number[]>();
    for (const { at, face } of tips) lines.set(face, [...(lines.get(face) ?? []), at]);
    return [...lines.values()].find((list) => list.length === 11)!.sort((a, b) => a - b);
  }

  // The vernier principle: the tooth that lines up, counted from the middle, times the step is the offset.
  test('read offsets of both axes to a step', () => {
    expect(markRange(unit)).toBe(unit);
    const first = markHalf('first', 0, 0, unit);
    for (let dx = -5; dx <= 5; dx++) {
      for (const dy of [-5, -2, 0, 3]) {
        const second = markHalf('second', dx * step, dy * step, unit);
        for (const [index, axis, offset] of [
          [0, 'x', dx],
          [1, 'y', dy],
        ] as const) {
          const a = teeth(first[index]!, axis);
          const b = teeth(second[index]!, axis);
          const apart = a.map((at, i) => Math.abs(at - b[i]!));
          const inLine = apart.findIndex((gap) => gap < step / 1000);
          expect(inLine - 5, `${axis} ${offset}`).toBe(offset);
          expect(apart.filter((gap) => gap < step / 2).length).toBe(1);
        }
      }
    }
  });

  test('halves in place cover none of each other, on either side of the chip, outside outline and lane', () => {
    const chip = chipOf({
      channels: [
        channel('a', [
          [1000, 1000],
          [9000, 1000],
        ]),
        channel(
          'b',
          [
            [9000, 1000],
            [9000, 9000],
          ],
          100,
          { layer: 'upper' },
        ),
      ],
      vias: [via('v', [9000, 1000], 300)],
      ports: [port('p', [1000, 1000], 600)],
    });
    const { planes, field } = modelOf(chip, { lane: 200_000 });
    expect(planes.map(({ kind }) => kind)).toEqual(['layer', 'layer', 'holes']);
    // two pairs on each side: layer with layer, layer with holes; a half is two scales and a cross or four squares
    expect(planes.map(({ marks }) => marks.length)).toEqual([2 * 2 * 3, 2 * 6, 2 * 6]);
    const all = planes.flatMap(({ marks }) => marks);
    const sum = areaOf(all);
    const together = union(
      all.flatMap((shape) => flatPaths(shape, 1)),
      FillRule.NonZero,
    ).reduce((total, path) => total + area(path), 0);
    expect(together / sum).toBeCloseTo(1, 9);
    for (const shape of all) {
      const { x0, x1 } = boxOf([shape])!;
      expect(x1 < -200_000 || x0 > chip.outline.width + 200_000).toBe(true);
    }
    expect(field.x0).toBeLessThan(-200_000);
  });
});

describe('wafer', () => {
  const field = { x0: -1e6, y0: -0.5e6, x1: 11e6, y1: 5.5e6 };
  const centre = [5e6, 2.5e6] as const;

  test('chips lie whole within the edge, none on another, as many as any of the four settings holds', () => {
    const { centres } = waferLayout(field, centre, { diameter: 100_000_000, edge: 4_000_000 }, [12e6, 6e6]);
    const radius = 46e6;
    for (const [x, y] of centres) {
      for (const [dx, dy] of [
        [-6e6, -3e6],
        [6e6, -3e6],
        [6e6, 3e6],
        [-6e6, 3e6],
      ] as const)
        expect(Math.hypot(x + dx, y + dy)).toBeLessThanOrEqual(radius);
    }
    expect(new Set(centres.map(String)).size).toBe(centres.length);
    // counted by rows: a row at height y holds what fits between the chords at its lower and its upper edge
    let most = 0;
    for (const shiftY of [0, 3e6]) {
      for (const half of [0, 1]) {
        let count = 0;
        for (let y = shiftY - 60e6; y < 60e6; y += 6e6) {
          const reach = Math.abs(y) + 3e6;
          if (reach > radius) continue;
          const width = 2 * Math.sqrt(radius ** 2 - reach ** 2);
          const fit = Math.floor(width / 12e6);
          // an odd row has a chip in its middle, an even one a gap
          count += fit % 2 === 1 - half ? fit : Math.max(0, fit - 1);
        }
        most = Math.max(most, count);
      }
    }
    expect(centres.length).toBe(most);
  });

  test('what does not fit or is too much is a problem', () => {
    const on = (box: typeof field, diameter: number, pitch: [number, number]) =>
      problem(() => waferLayout(box, [0, 0], { diameter, edge: 0 }, pitch));
    expect(on(field, 13_000_000, [12e6, 6e6]).what).toMatch(/does not fit/);
    expect(on({ x0: 0, y0: 0, x1: 1e3, y1: 1e3 }, 1e8, [1e3, 1e3]).kind).toBe('too-many');
  });

  /** 20 by 10 mm, two layers; marks of 30 µm lines end 46 of them from where their room begins, with 12 free on either side. */
  const pair = () =>
    chipOf({
      outline: { width: 20_000_000, height: 10_000_000 },
      channels: [
        channel('a', [
          [1000, 1000],
          [9000, 1000],
        ]),
        channel(
          'b',
          [
            [1000, 2000],
            [9000, 2000],
          ],
          100,
          { layer: 'upper' },
        ),
      ],
    });
  const ROOM = (46 + 12 + 12) * 30_000;
  const LANE = 200_000;
  const on = (options: MaskOptions) =>
    modelOf(pair(), { wafer: { diameter: 100_000_000, edge: 3_000_000 }, lane: LANE, ...options });
  const up = (nm: number): number => Math.ceil(nm / 10_000) * 10_000;

  test('without marks a chip takes itself and one lane, half of it drawn on each side', () => {
    const { planes, wafer, notes } = on({ marks: false });
    expect(wafer!.pitch).toEqual([20_200_000, 10_200_000]);
    expect(boxOf(planes[0]!.lane)).toEqual({ x0: -1e5, y0: -1e5, x1: 20.1e6, y1: 10.1e6 });
    expect(notes.join(' ')).toMatch(/200 µm wide, outside the outline; where two chips meet they share one/);
    // nothing of one chip on another, and the lane between two is whole
    const [a, b] = [planes[0]!.lane, planes[0]!.lane.map((shape) => moved(shape, wafer!.pitch[0], 0))];
    const paths = [...a, ...b].flatMap((shape) => flatPaths(shape, 1));
    const together = union(paths, FillRule.NonZero).reduce((sum, path) => sum + area(path), 0);
    expect(together).toBeCloseTo(2 * areaOf(a), -3);
    expect(union(paths, FillRule.NonZero).filter((path) => area(path) > 0)).toHaveLength(1);
  });

  test('marks count once between two chips where that holds more of them', () => {
    const { wafer, planes, notes, field } = on({});
    expect(wafer!.pitch).toEqual([up(20_000_000 + 2 * LANE + ROOM), 10_200_000]);
    expect(planes.flatMap(({ marks }) => marks).every((shape) => boxOf([shape])!.x0 > 20_000_000)).toBe(true);
    expect(notes.join(' ')).toMatch(/Marks stand to the right of each chip/);
    // every chip whole within the edge, none within another
    for (const [x, y] of wafer!.centres) {
      for (const cx of [field.x0 - 10e6, field.x1 - 10e6])
        for (const cy of [field.y0 - 5e6, field.y1 - 5e6])
          expect(Math.hypot(x + cx, y + cy)).toBeLessThanOrEqual(47e6);
    }
    expect(field.x1 - field.x0).toBeLessThanOrEqual(wafer!.pitch[0]);
    // on both sides where that costs no chip: of one alone there is no neighbour to share with
    const alone = on({ wafer: { diameter: 30_000_000, edge: 0 } });
    expect(alone.wafer!.centres).toHaveLength(1);
    expect(alone.planes[0]!.marks.some((shape) => boxOf([shape])!.x1 < 0)).toBe(true);
  });

  test('a pitch that is given is kept; one that is too small says what is needed', () => {
    const wafer = { diameter: 100_000_000, edge: 3_000_000 };
    const wide = on({ wafer: { ...wafer, pitch: [30_000_000, 12_000_000] } });
    expect(wide.wafer!.pitch).toEqual([30_000_000, 12_000_000]);
    // apart by more than two lanes: each has its own
    expect(boxOf(wide.planes[0]!.lane)).toEqual({ x0: -2e5, y0: -2e5, x1: 20.2e6, y1: 10.2e6 });
    expect(wide.notes.join(' ')).not.toMatch(/share one/);
    const narrow = problem(() => on({ wafer: { ...wafer, pitch: [21_000_000, 12_000_000] } }));
    expect(narrow.where).toBe('pitch');
    expect(narrow.what).toBe(
      'The pitch of 21 mm × 12 mm is too small: a chip with its dicing lane and one set of marks takes 22.5 mm × 10.2 mm.',
    );
    expect(narrow.remedy).toMatch(/without alignment marks it is enough/);
    expect(problem(() => on({ wafer: { ...wafer, pitch: [20_100_000, 12_000_000] } })).remedy).not.toMatch(
      /without/,
    );
  });

  test('a mould is larger by its shrinkage, and so are the pitch and the lane', () => {
    const { wafer, planes } = on({ marks: false, shrink: 0.02 });
    expect(wafer!.pitch).toEqual([up(20_200_000 / 0.98), up(10_200_000 / 0.98)]);
    const { x0, x1 } = boxOf(planes[0]!.lane)!;
    expect(x1 - x0).toBeCloseTo(wafer!.pitch[0], 3);
  });
});
