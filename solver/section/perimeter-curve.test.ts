import { expect, test } from 'vitest';
import { verify } from '../../test/verify/row.ts';
import { shapeValues } from './basis.ts';
import { perimeterCurve } from './perimeter-curve.ts';
import type { Profile } from './profile.ts';
import { rectangleShear } from './rectangle-curve.ts';
import { type SectionField, sectionField } from './section-field.ts';
import { sectionOf } from './section-of.ts';

const SERIES = 'series of White 2006 eq. 3-48, recomputed';

for (const [a, x, shear] of [
  [1, 0, 1.350629],
  [1, 0.2, 1.210598],
  [1, 0.3, 1.014351],
  [1, 0.4, 0.683774],
  [0.5, 0, 1.39509],
  [0.5, 0.2, 1.300331],
  [0.5, 0.3, 1.143429],
  [0.5, 0.4, 0.825333],
  [0.2, 0, 1.199245],
  [0.2, 0.2, 1.191246],
  [0.2, 0.3, 1.157954],
  [0.2, 0.4, 0.996812],
] as const) {
  verify(
    {
      quantity: 'wall shear along the floor of a rectangle over the mean',
      check: 'published',
      at: `h/W = ${a}, x/W = ${x}`,
      source: SERIES,
      tolerance: 1e-6,
    },
    () => rectangleShear(1, a, x) / (a / (2 * (1 + a))) / shear - 1,
  );
}

/** Mean over a wall by fine Simpson in an angle that clusters at both ends. */
function mean(side: number, other: number): number {
  const n = 400;
  let sum = 0;
  for (let i = 0; i <= n; i += 1) {
    const angle = (Math.PI * i) / n;
    const weight = i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2;
    sum += (weight * rectangleShear(side, other, (side / 2) * Math.cos(angle)) * Math.sin(angle)) / 2;
  }
  return (sum * Math.PI) / (3 * n);
}
for (const [a, long, short] of [
  [0.02, 1.00892781, 0.553609605],
  [0.05, 1.02150539, 0.56989224],
  [0.1, 1.040297, 0.597029966],
  [0.125, 1.04867515, 0.610598829],
  [0.2, 1.06973895, 0.651305231],
  [0.25, 1.08039034, 0.678438644],
  [1 / 3, 1.09214612, 0.723561647],
  [0.4, 1.09628175, 0.759295635],
  [0.5, 1.09437689, 0.811246221],
  [0.6, 1.08420019, 0.859666342],
  [0.75, 1.05786948, 0.922840694],
  [0.8, 1.04714958, 0.941063028],
  [0.9, 1.02409311, 0.973229872],
  [1, 1, 1],
] as const) {
  verify(
    {
      quantity: 'mean shear of the long and the short wall over the whole mean',
      check: 'published',
      at: `h/W = ${Number(a.toFixed(4))}`,
      source: SERIES,
      tolerance: 1e-6,
    },
    () => {
      const whole = a / (2 * (1 + a));
      return Math.max(Math.abs(mean(1, a) / whole / long - 1), Math.abs(mean(a, 1) / whole / short - 1));
    },
  );
}

test('the two series of a rectangle’s shear meet in the square', () => {
  for (const x of [0, 0.1, 0.3, 0.45, 0.499, 0.5]) {
    expect(rectangleShear(1, 1 + 1e-13, x)).toBeCloseTo(rectangleShear(1, 1, x), 11);
  }
  expect(rectangleShear(1, 0.3, 0.5)).toBe(0);
  expect(rectangleShear(0.3, 1, 0.15)).toBe(0);
});

const CASES: readonly (readonly [Profile, number, number])[] = [
  [{ kind: 'rectangle' }, 1, 1],
  [{ kind: 'rectangle' }, 0.1, 1],
  [{ kind: 'circle' }, 1, 1],
  [{ kind: 'ellipse' }, 3, 1],
  [{ kind: 'trapezoid', wallAngle: 54.7356 }, 3, 1],
  [{ kind: 'trapezoid', wallAngle: 54.7356 }, 30, 1],
  [{ kind: 'trapezoid', wallAngle: 54.7356 }, 1, 1],
  [{ kind: 'rounded' }, 1, 1],
  [{ kind: 'rounded' }, 25, 1],
  [{ kind: 'triangle' }, 1, 2],
  [
    {
      kind: 'polygon',
      points: [
        [0, 0],
        [2, 0],
        [2, 1],
        [0, 1.2],
      ],
    },
    1,
    1,
  ],
];

test.each(CASES)(
  '%j: the curve goes once round, balances the driving force and shows the peak',
  (...args) => {
    const [profile, width, depth] = args;
    const section = sectionOf(profile, width, depth, '', { accuracy: 1e-4 });
    const { x, y, s, shear } = perimeterCurve(profile, width, depth, '', { accuracy: 1e-4 });
    const last = s.length - 1;
    expect([x[last], y[last], shear[last]]).toEqual([x[0], y[0], shear[0]]);
    expect(Math.abs(s[last] / section.perimeter - 1)).toBeLessThan(2e-4);
    let [force, area] = [0, 0];
    for (let i = 0; i < last; i += 1) {
      expect(s[i + 1]).toBeGreaterThan(s[i]);
      force += ((s[i + 1] - s[i]) * (shear[i] + shear[i + 1])) / 2;
      area += (x[i] * y[i + 1] - x[i + 1] * y[i]) / 2;
    }
    // Trapezoidal rule over a curve with kinks in its corners.
    expect(Math.abs(force / section.area - 1)).toBeLessThan(6e-3);
    expect(Math.abs(area / section.area - 1)).toBeLessThan(2e-3);
    const peak = Math.max(...shear);
    expect(peak).toBeLessThan(section.peakShear! * 1.001);
    expect(peak).toBeGreaterThan(section.peakShear! * 0.995);
    const highest = shear.indexOf(peak);
    const near = Math.min(
      Math.hypot(x[highest] - section.peakShearAt![0], y[highest] - section.peakShearAt![1]),
      Math.hypot(-x[highest] - section.peakShearAt![0], y[highest] - section.peakShearAt![1]),
      // Floor and lid, and both ends of an ellipse, are alike.
      Math.hypot(x[highest] - section.peakShearAt![0], depth - y[highest] - section.peakShearAt![1]),
      profile.kind === 'circle' || width < depth ? 0 : Number.POSITIVE_INFINITY,
      // In wide sections the peak is flat.
      section.peakShear! < 0.51 * depth ? 0 : Number.POSITIVE_INFINITY,
    );
    expect(near).toBeLessThan(0.2);
  },
);

/** Velocity at a place by the triangle that holds it; rectangles, right half. */
function velocityAt({ mesh, velocity }: SectionField, x: number, y: number): number {
  const value = new Float64Array(6);
  for (let t = 0; t < mesh.triangles.length; t += 6) {
    const n = mesh.triangles.subarray(t, t + 6);
    const [ax, ay] = [mesh.x[n[0]], mesh.y[n[0]]];
    const [bx, by, cx, cy] = [mesh.x[n[1]] - ax, mesh.y[n[1]] - ay, mesh.x[n[2]] - ax, mesh.y[n[2]] - ay];
    const det = bx * cy - by * cx;
    const u = ((x - ax) * cy - (y - ay) * cx) / det;
    const v = (bx * (y - ay) - by * (x - ax)) / det;
    if (u < -1e-9 || v < -1e-9 || u + v > 1 + 1e-9) continue;
    shapeValues(u, v, value);
    return n.reduce((sum, node, i) => sum + value[i] * velocity[node], 0);
  }
  return Number.NaN;
}

for (const [a, x, y, velocity] of [
  [1, 0, 0.1, 0.826367],
  [1, 0.25, 0.5, 1.631416],
  [1, 0.25, 0.25, 1.288579],
  [0.5, 0, 0.1, 0.726955],
  [0.5, 0.25, 0.5, 1.698746],
  [0.5, 0.4, 0.5, 0.98896],
  [0.25, 0, 0.1, 0.638875],
  [0.25, 0.25, 0.5, 1.700992],
] as const) {
  verify(
    {
      quantity: 'velocity inside a rectangle over the mean',
      check: 'published',
      at: `h/W = ${a}, x/W = ${x}, y/h = ${y}`,
      source: SERIES,
      tolerance: 2e-3,
    },
    () => {
      const section = sectionOf({ kind: 'rectangle' }, 1e-4, a * 1e-4);
      const field = sectionField({ kind: 'rectangle' }, 1e-4, a * 1e-4);
      return velocityAt(field, x * 1e-4, y * a * 1e-4) / (section.conductance / section.area) / velocity - 1;
    },
  );
}

test('a field lies where its section lies', () => {
  const v = sectionField({ kind: 'trapezoid', wallAngle: 54.7356 }, 1e-4, 2e-4);
  expect(Math.max(...v.mesh.y)).toBeCloseTo(2e-4, 12);
  expect(Math.min(...v.mesh.y)).toBeGreaterThan(1e-4);
  expect(v.mirrored).toBe(true);
  expect(v.leftOut).toBe(0);
  const wide = sectionField({ kind: 'rounded' }, 30e-4, 1e-4);
  expect(wide.leftOut).toBeCloseTo(20e-4, 10);
  expect(Math.max(...wide.velocity)).toBeCloseTo(1e-8 / 8, 12);
});
