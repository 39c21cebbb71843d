import { describe, expect, test } from 'vitest';
import { ductCrossing, type FlowingDuct } from '../../solver/exposure/duct-crossing.ts';
import { ductFloor, shareWithin } from '../../solver/exposure/floor.ts';
import { rectangleAt } from '../../solver/exposure/rectangle-point.ts';
import { elementsExposure } from '../../solver/exposure/section-elements.ts';
import { ellipseExposure } from '../../solver/exposure/section-ellipse.ts';
import { rectangleExposure } from '../../solver/exposure/section-rectangle.ts';
import type { Profile } from '../../solver/section/profile.ts';
import { verify } from '../verify/row.ts';

const MU = 1e-3;
const duct = (
  profile: Profile,
  width: number,
  depth: number,
  more: Partial<FlowingDuct> = {},
): FlowingDuct => {
  const section =
    profile.kind === 'rectangle' ? rectangleExposure(width, depth) : ellipseExposure(width, depth);
  const flow = more.flow ?? 1e-10;
  const length = more.length ?? 0.01;
  return {
    profile,
    width: [width, width],
    depth,
    length,
    flow,
    drop: (MU * flow * length) / section.conductance,
    volume: section.area * length,
    peakWallShear: null,
    rheology: { viscosity: MU },
    where: 'a duct',
    ...more,
  };
};
const CIRCLE: Profile = { kind: 'circle' };
const RECTANGLE: Profile = { kind: 'rectangle' };

describe('a round bore', () => {
  const d = 100e-6;
  const r = d / 2;
  const q = 1e-10;
  const l = 0.01;
  const mean = q / (Math.PI * r * r);
  const wall = (4 * MU * mean) / r;
  const how = ductCrossing(duct(CIRCLE, d, d));
  const exact = (quantity: string, tolerance: number, error: () => number): void =>
    verify({ quantity, check: 'exact', at: 'circle', source: 'Hagen-Poiseuille', tolerance }, error);

  exact('mean residence time', 1e-13, () => how.time / (l / mean) - 1);
  // Of u = 2U(1 - s), the hundredth slower than 0.2 U and that faster than 2 U sqrt(0.99).
  exact('time of the slowest hundredth of the flow', 1e-13, () => how.slow / (5 * (l / mean)) - 1);
  exact('time of the fastest hundredth', 1e-13, () => how.fast / (l / mean / (2 * Math.sqrt(0.99))) - 1);
  for (const exponent of [1, 2, 3.0777]) {
    // Mean over the flow of tau^g dt = (L/Q) 2 pi R^2 tau_w^g/(g + 2).
    const dose = ((l / q) * 2 * Math.PI * r * r * wall ** exponent) / (exponent + 2);
    exact(`mean dose of stress to the power ${exponent}`, 1e-12, () => how.dose(exponent) / dose - 1);
  }
  for (const diameter of [10e-6, 40e-6]) {
    const y = diameter / 2;
    const speed = 2 * mean * (1 - ((r - y) / r) ** 2);
    const at = `circle, ball of ${diameter * 1e6} um`;
    const source = 'Hagen-Poiseuille';
    verify({ quantity: 'time along the wall', check: 'exact', at, source, tolerance: 1e-12 }, () => {
      return how.hugging(diameter)!.time / (l / speed) - 1;
    });
    verify({ quantity: 'stress along the wall', check: 'exact', at, source, tolerance: 1e-12 }, () => {
      return how.hugging(diameter)!.peak / (wall * (1 - y / r)) - 1;
    });
  }
});

describe('a power-law fluid in a round bore', () => {
  // Bird, Armstrong and Hassager, Dynamics of Polymeric Liquids, vol. 1, 2nd ed. 1987, table 4.2-1 (from memory).
  const [k, n] = [0.05, 0.6];
  const d = 200e-6;
  const r = d / 2;
  const gradient = 2e5;
  const rate = ((gradient * r) / (2 * k)) ** (1 / n);
  const flow = (Math.PI * r ** 3 * rate) / (1 / n + 3);
  const how = ductCrossing(
    duct(CIRCLE, d, d, {
      flow,
      drop: gradient * 0.01,
      rheology: { shear: { kind: 'power-law', consistency: k, index: n } },
    }),
  );
  verify(
    {
      quantity: 'speed along the wall of a power-law fluid',
      check: 'exact',
      at: 'circle, n = 0.6',
      source: 'Bird, Armstrong, Hassager 1987 (from memory)',
      tolerance: 1e-9,
    },
    () => {
      const y = 15e-6;
      const speed = ((rate * r) / (1 / n + 1)) * (1 - ((r - y) / r) ** (1 / n + 1));
      return how.hugging(2 * y)!.time / (0.01 / speed) - 1;
    },
  );
});

describe('a rectangle', () => {
  // u/u_mean as printed: aspect, x/W from the middle, y/h from the floor.
  const PRINTED: [aspect: number, x: number, y: number, velocity: number][] = [
    [1, 0, 0.1, 0.826367],
    [1, 0.25, 0.5, 1.631416],
    [1, 0.25, 0.25, 1.288579],
    [0.5, 0, 0.1, 0.726955],
    [0.5, 0.25, 0.5, 1.698746],
    [0.5, 0.4, 0.5, 0.98896],
    [0.25, 0, 0.1, 0.638875],
    [0.25, 0.25, 0.5, 1.700992],
  ];
  for (const [aspect, x, y, wanted] of PRINTED) {
    verify(
      {
        quantity: 'velocity inside a rectangle over its mean',
        check: 'published',
        at: `h/W = ${aspect}, x/W = ${x}, y/h = ${y}`,
        source: 'White, Viscous Fluid Flow, 3rd ed. 2006, eq. 3-48',
        tolerance: 1e-6,
      },
      () => {
        const out = new Float64Array(3);
        const section = rectangleExposure(1 / aspect, 1);
        rectangleAt(1 / aspect, 1, x / aspect, y - 0.5, out);
        return (out[0] * section.area) / section.conductance / wanted - 1;
      },
    );
  }

  verify(
    {
      quantity: 'slopes of the velocity inside a rectangle against its differences',
      check: 'invariant',
      at: '2 x 1 and 1 x 2, twenty places',
      source: 'definition of a derivative',
      tolerance: 1e-8,
    },
    () => {
      const at = (w: number, h: number, x: number, y: number): number[] => {
        const out = new Float64Array(3);
        rectangleAt(w, h, x, y, out);
        return [...out];
      };
      let worst = 0;
      const step = 1e-5;
      for (const [w, h] of [
        [2, 1],
        [1, 2],
      ]) {
        for (let i = 0; i < 20; i += 1) {
          const [x, y] = [w * (0.45 - 0.04 * i), h * (0.04 * i - 0.38)];
          const [, ux, uy] = at(w, h, x, y);
          const dx = (at(w, h, x + step, y)[0] - at(w, h, x - step, y)[0]) / (2 * step);
          const dy = (at(w, h, x, y + step)[0] - at(w, h, x, y - step)[0]) / (2 * step);
          worst = Math.max(worst, Math.abs(ux - dx), Math.abs(uy - dy));
        }
      }
      return worst;
    },
  );

  // Far from the sides of a wide duct flow is that between plates.
  const plates = rectangleExposure(2000, 1);
  for (const exponent of [1, 3.0777]) {
    verify(
      {
        quantity: `mean dose of stress to the power ${exponent}`,
        check: 'exact',
        at: 'plates (2000 wide)',
        source: 'plane Poiseuille flow',
        tolerance: 2e-3,
      },
      () => plates.shearPower(exponent) / ((2000 * 2 * 0.5 ** (exponent + 1)) / (exponent + 1)) - 1,
    );
  }
  verify(
    {
      quantity: 'speed of the slowest hundredth of the flow over the mean',
      check: 'exact',
      at: 'plates',
      source: 'plane Poiseuille flow',
      tolerance: 0.02,
    },
    () => {
      // (3/2)(d^2 - d^3/3) = 0.01 of the flow lies within d (of half the gap) of the walls.
      let d = 0.08;
      for (let i = 0; i < 30; i += 1) d -= (1.5 * (d * d - d ** 3 / 3) - 0.01) / (1.5 * (2 * d - d * d));
      return plates.slow / (1.5 * (2 * d - d * d)) - 1;
    },
  );

  test.each([
    ['rectangle', { kind: 'rectangle' } as Profile, 2],
    ['circle', { kind: 'circle' } as Profile, 1],
    ['ellipse', { kind: 'ellipse' } as Profile, 2],
  ])('the finite-element field of a %s agrees with the exact one', (_, profile, width) => {
    const exact = profile.kind === 'rectangle' ? rectangleExposure(width, 1) : ellipseExposure(width, 1);
    const field = elementsExposure(profile, width, 1, '');
    const near = (got: number, wanted: number, within: number): void =>
      expect(Math.abs(got / wanted - 1), `${got} against ${wanted}`).toBeLessThan(within);
    near(field.clearance, exact.clearance, 0.005);
    near(field.slow, exact.slow, 0.03);
    near(field.fast, exact.fast, 0.005);
    near(field.shearPower(3), exact.shearPower(3), 0.005);
    near(field.hugging(0.2)!.velocity, exact.hugging(0.2)!.velocity, 0.005);
    near(field.hugging(0.2)!.shear, exact.hugging(0.2)!.shear, 0.02);
  });

  test('a ball larger than the duct does not fit, whichever side is the short one', () => {
    for (const [w, h] of [
      [50e-6, 100e-6],
      [100e-6, 50e-6],
    ]) {
      const how = ductCrossing(duct(RECTANGLE, w, h));
      expect(how.hugging(50e-6)).not.toBeNull();
      expect(how.hugging(50.1e-6)).toBeNull();
    }
    expect(ductCrossing(duct(CIRCLE, 1e-4, 1e-4)).hugging(1.001e-4)).toBeNull();
  });
});

describe('floor of a rectangular duct', () => {
  // tau(x)/tau_mean at x/W, as printed: the floor between -x and x bears that or more.
  const PRINTED: [aspect: number, x: number, stress: number][] = [
    [1, 0.2, 1.210598],
    [1, 0.4, 0.683774],
    [0.5, 0.3, 1.143429],
    [0.2, 0.4, 0.996812],
  ];
  for (const [aspect, x, stress] of PRINTED) {
    verify(
      {
        quantity: 'share of the floor that bears a stress or more',
        check: 'published',
        at: `h/W = ${aspect}, stress ${stress} of the mean`,
        source: 'White, Viscous Fluid Flow, 3rd ed. 2006, eq. 3-48',
        tolerance: 0.003,
      },
      () => {
        const [w, h] = [1 / aspect, 1];
        const mean = (w * h) / (2 * (w + h));
        return shareWithin(ductFloor(w, h, 1, 1 / mean), stress, 100) - 2 * x;
      },
    );
  }
});
