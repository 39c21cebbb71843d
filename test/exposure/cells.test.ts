import { describe, expect, test } from 'vitest';
import type { CellSolution } from '../../solver/cell/cell.ts';
import { flowField, mixVelocity, pressuresOf } from '../../solver/cell/flow-field.ts';
import { emptySample, sampler } from '../../solver/cell/sample.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { CellPaths } from '../../solver/exposure/cell-crossing.ts';
import { CellReader } from '../../solver/exposure/cell-reader.ts';
import { type Start, tracesFrom } from '../../solver/exposure/cell-trace.ts';
import { cellFloor, ductFloor, type FloorParts, shareWithin } from '../../solver/exposure/floor.ts';
import { rectangleAt } from '../../solver/exposure/rectangle-point.ts';
import { rectangleExposure } from '../../solver/exposure/section-rectangle.ts';
import { bend, star, tee } from '../cell/shapes.ts';
import { verify } from '../verify/row.ts';

const SERIES = 'White, Viscous Fluid Flow, 3rd ed. 2006, eq. 3-48';
const FINE = { flow: 0.001, peak: null };

/** Area of a plan with straight sides. */
const planArea = ({ loops: [outer] }: CellShape): number =>
  outer!.reduce((sum, { x, y }, i) => {
    const next = outer![(i + 1) % outer!.length]!;
    return sum + (x * next.y - y * next.x) / 2;
  }, 0);

const pathsOf = (solution: CellSolution, flow: readonly number[], viscosity = 1): CellPaths =>
  CellPaths.of({
    solution,
    flow,
    viscosity,
    origin: [0, 0],
    faceWidth: flow.map(() => 1),
    peakWallShear: null,
    slow: 1,
    fast: 1,
  })!;

describe('a straight duct drawn as a cell is the duct', () => {
  for (const depth of [0.5, 1]) {
    const shape = star(
      [
        { angle: 30, width: 1 },
        { angle: 210, width: 1 },
      ],
      depth,
    );
    const length = planArea(shape);
    const [q, mu] = [0.7, 3];
    const section = rectangleExposure(1, depth);
    const gradient = (mu * q) / section.conductance;
    const how = pathsOf(solveCell(shape, FINE), [q, -q], mu).crossing(0, 1);
    const at = `depth/width ${depth}, drawn at 30 degrees`;
    const exact = (quantity: string, tolerance: number, error: () => number): void =>
      verify({ quantity, check: 'exact', at, source: SERIES, tolerance }, error);

    exact('mean residence time of a cell', 1e-6, () => how.time / ((length * depth) / q) - 1);
    for (const exponent of [1, 3.0777]) {
      const dose = (gradient ** exponent * section.shearPower(exponent) * length) / q;
      exact(
        `mean dose of stress to the power ${exponent} in a cell`,
        0.01,
        () => how.dose(exponent) / dose - 1,
      );
    }
    const diameter = 0.2;
    const radius = diameter / 2;
    // Where paths along the walls start: on the floor, and on a side at two heights.
    const [edge, low] = [0.5 - radius, depth / 2 - radius];
    const places = [
      ...[0, 0.25, edge].map((x) => [x, low] as const),
      ...[0, low / 2].map((y) => [edge, y] as const),
    ].map(([x, y]) => {
      const out = new Float64Array(3);
      rectangleAt(1, depth, x, y, out);
      return { speed: (gradient / mu) * out[0]!, stress: gradient * Math.hypot(out[1]!, out[2]!) };
    });
    const hugging = how.hugging(diameter)!;
    exact('slowest time along the wall of a cell', 0.02, () => {
      return hugging.time / (length / Math.min(...places.map(({ speed }) => speed))) - 1;
    });
    exact('largest stress along the wall of a cell', 0.02, () => {
      return hugging.peak / Math.max(...places.map(({ stress }) => stress)) - 1;
    });
    exact('largest dose along the wall of a cell', 0.03, () => {
      const doses = places.map(({ speed, stress }) => (stress ** 2 * length) / speed);
      return hugging.dose(2) / Math.max(...doses) - 1;
    });
    test(`nothing is pulled apart along ${at}`, () => {
      expect(how.stretch!.rate).toBeLessThan(0.02 * (gradient / mu));
    });
  }
});

describe('paths through a bend and a tee', () => {
  /** Gauss-Legendre on [-1, 1], eight points. */
  const GAUSS = [
    [0.1834346424956498, 0.362683783378362],
    [0.525532409916329, 0.3137066458778873],
    [0.7966664774136267, 0.2223810344533745],
    [0.9602898564975363, 0.1012285362903763],
  ].flatMap(([x, w]) => [
    [x!, w!],
    [-x!, w!],
  ]) as [number, number][];

  verify(
    {
      quantity: 'times of paths through a cell by the flow on each, against its volume',
      check: 'invariant',
      at: 'square bend, fillet 0.3, depth/width 0.5, 64 paths',
      source: 'what flows in fills the volume: the integral of time over flow is volume',
      tolerance: 0.02,
    },
    () => {
      const shape = bend(0.5, 0.3);
      const solution = solveCell(shape, FINE);
      const field = mixVelocity(solution.fields!, [1, 0]);
      const reader = new CellReader(field);
      const { mesh } = field;
      // The first face as the solved copy has it.
      const ends = Array.from(mesh.boundaryTag.keys()).filter((e) => mesh.boundaryTag[e] === 1);
      const [a, b] = [mesh.boundary[3 * ends[0]!]!, mesh.boundary[3 * ends.at(-1)! + 1]!];
      const width = Math.hypot(mesh.x[b]! - mesh.x[a]!, mesh.y[b]! - mesh.y[a]!);
      const [nx, ny] = [-(mesh.y[b]! - mesh.y[a]!) / width, (mesh.x[b]! - mesh.x[a]!) / width];
      const starts: Start[] = [];
      const flows: number[] = [];
      for (const [across, w] of GAUSS) {
        for (const [s, h] of GAUSS) {
          const share = (1 + across) / 2;
          starts.push([share * width, s]);
          const x = mesh.x[a]! + share * (mesh.x[b]! - mesh.x[a]!) + 1e-6 * nx;
          const y = mesh.y[a]! + share * (mesh.y[b]! - mesh.y[a]!) + 1e-6 * ny;
          expect(reader.read(x, y, s)).toBe(true);
          flows.push((reader.u * nx + reader.v * ny) * (w * width * h) * 0.25);
        }
      }
      const paths = tracesFrom(field, 0, starts, 0);
      let filled = 0;
      paths.forEach((path, i) => {
        expect(path!.to).toBe(1);
        filled += path!.time * flows[i]!;
      });
      return filled / pathsOf(solution, [1, -1]).volume / (1 / solution.placements[0].scale ** 3) - 1;
    },
  );

  verify(
    {
      quantity: 'flow through cuts across a leg against the flow in at its face',
      check: 'invariant',
      at: 'tee, depth/width 0.5, three flows, cuts at four places',
      source: 'nothing is lost',
      tolerance: 0.005,
    },
    () => {
      const solution = solveCell(tee(0.5), FINE);
      const flows = [1, -0.3, -0.7];
      const field = flowField(solution, pressuresOf(solution.portMatrix, 3, flows))!;
      const at = sampler(field);
      const sample = emptySample();
      // The second leg of the tee runs along the x axis to negative x.
      let worst = 0;
      for (const x of [-1.4, -1.2, -1, -0.8]) {
        let through = 0;
        for (const [across, w] of GAUSS) {
          for (const [s, h] of GAUSS) {
            expect(at.at(x, across / 2, s, sample)).toBe(true);
            // Velocities of the sample are those of depth 1: times the depth here.
            through += sample.velocity[0]! * 0.5 * (w / 2) * (h / 2) * 0.5;
          }
        }
        worst = Math.max(worst, Math.abs(Math.abs(through) / 0.3 - 1));
      }
      return worst;
    },
  );

  test('turned and mirrored copies have the same paths', () => {
    const arms = [
      { angle: 180, width: 1 },
      { angle: 290, width: 0.6 },
      { angle: 360, width: 0.8 },
    ];
    const flow = [1, -0.4, -0.6];
    const found = (turn: number, mirror: 1 | -1) => {
      const turned = arms.map(({ angle, width }) => ({ angle: mirror * angle + turn, width }));
      // Arms go counter-clockwise: mirrored, they go the other way round.
      const order = mirror === 1 ? [0, 1, 2] : [0, 2, 1];
      const shape = star(
        order.map((i) => turned[i]!),
        0.5,
        0.1,
      );
      const paths = pathsOf(
        solveCell(shape, { flow: 0.01, peak: null }),
        order.map((i) => flow[i]!),
      );
      return [1, 2].flatMap((to) => {
        const how = paths.crossing(0, order.indexOf(to));
        const along = how.hugging(0.1)!;
        return [how.time, how.dose(2.5), how.stretch!.rate, along.time, along.peak, along.dose(2.5)];
      });
    };
    const plain = found(0, 1);
    for (const [turn, mirror] of [
      [37, 1],
      [90, 1],
      [0, -1],
      [141, -1],
    ] as const) {
      found(turn, mirror).forEach((value, i) => {
        expect(Math.abs(value / plain[i]! - 1), `turned by ${turn}, ${mirror}: ${i}`).toBeLessThan(1e-3);
      });
    }
  });

  test('a ball too large for the cell has no path', () => {
    const paths = pathsOf(solveCell(tee(0.5), { flow: 0.02, peak: null }), [1, -0.5, -0.5]);
    expect(paths.crossing(0, 1).hugging(0.49)).not.toBeNull();
    expect(paths.crossing(0, 1).hugging(0.51)).toBeNull();
  });
});

describe('the floor of a chamber', () => {
  const [W, L, MOUTH, LEG, DEPTH] = [4, 14, 1, 1.5, 0.5];
  const [w, m] = [W / 2, MOUTH / 2];
  const points: [x: number, y: number, tag: number][] = [
    [-LEG, -m, 0],
    [0, -m, 0],
    [0, -w, 0],
    [L, -w, 0],
    [L, -m, 0],
    [L + LEG, -m, 2],
    [L + LEG, m, 0],
    [L, m, 0],
    [L, w, 0],
    [0, w, 0],
    [0, m, 0],
    [-LEG, m, 1],
  ];
  const shape: CellShape = {
    loops: [points.map(([x, y, tag]) => ({ x, y, bulge: 0, tag }))],
    depth: DEPTH,
    faces: 2,
    profile: { kind: 'rectangle' },
  };
  const usual = solveCell(shape, { flow: 0.005, peak: null });
  const gradient = (solution: CellSolution): number =>
    solution.portMatrix[0]! / rectangleExposure(W, DEPTH).conductance;
  /** The floor between two places along the chamber, in the stress of the duct's middle. */
  const floor = (solution: CellSolution, from: number, to: number): FloorParts => {
    const { area, stress } = cellFloor(solution, [1, 0], (x, y) => x >= from && x < to && Math.abs(y) <= w)!;
    const unit = (gradient(solution) * DEPTH) / 2;
    return { area, stress: stress.map((value) => value / unit) };
  };
  const mean = ({ area, stress }: FloorParts): number => {
    let [sum, whole] = [0, 0];
    area.forEach((part, i) => {
      sum += part * stress[i]!;
      whole += part;
    });
    return sum / whole;
  };

  const fine = solveCell(shape, { flow: 0.0007, peak: null });
  // One and a half widths from either end a hundredth of what the mouths disturb is left.
  const far = floor(usual, 6, 8);
  const duct = ductFloor(W, DEPTH, 2, 2 / DEPTH);
  for (const [solution, asked, tolerance] of [
    [usual, 0.005, 0.035],
    [fine, 0.0007, 0.015],
  ] as const) {
    const at = `chamber 14 by 4 by 0.5 solved to ${asked}, mouths 1 wide, 1.5 widths from its ends`;
    const parts = floor(solution, 6, 8);
    verify(
      { quantity: 'mean stress on the floor', check: 'exact', at, source: SERIES, tolerance: 0.005 },
      () => mean(parts) / mean(duct) - 1,
    );
    for (const least of [0.5, 0.9, 0.97]) {
      verify(
        {
          quantity: `share of the floor that bears ${least} of the stress in its middle`,
          check: 'exact',
          at,
          source: SERIES,
          tolerance,
        },
        () => shareWithin(parts, least, 2) - shareWithin(duct, least, 2),
      );
    }
  }

  const ends = 'the same chamber, the width next to its mouth';
  const refined = 'the same solved to 0.0007';
  const near = floor(usual, 0, W);
  const better = floor(fine, 0, W);
  verify(
    { quantity: 'mean stress on the floor', check: 'order', at: ends, source: refined, tolerance: 0.005 },
    () => mean(near) / mean(better) - 1,
  );
  for (const [low, high] of [
    [0, 0.5],
    [0.5, 1.1],
    [1.1, 2],
    [2, 100],
  ] as const) {
    verify(
      {
        quantity: `share of the floor that bears ${low} to ${high} of the stress in the middle`,
        check: 'order',
        at: ends,
        source: refined,
        tolerance: 0.01,
      },
      () => shareWithin(near, low, high) - shareWithin(better, low, high),
    );
  }
  test('near its mouths the floor is uneven', () => {
    expect(shareWithin(near, 0.9, 1.1)).toBeLessThan(0.6);
    expect(shareWithin(far, 0.9, 1.1)).toBeGreaterThan(0.85);
  });
});
