import type { Profile } from './profile.ts';
import { rectangleShear } from './rectangle-curve.ts';
import type { Place } from './section.ts';
import { checkSize, type SectionOptions } from './section-of.ts';
import { shapeOf, solvedUnit } from './solved-unit.ts';
import { toMetres } from './unit-section.ts';

/** Wall shear once round a section, counter-clockwise; a symmetric one starts in the middle of its floor. */
export interface PerimeterCurve {
  /** Places on the wall, as `Section` counts them; m. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Distance along the wall from the first point, m. */
  readonly s: Float64Array;
  /** Wall shear stress per unit G, m. Near a re-entrant corner it has no bound. */
  readonly shear: Float64Array;
}

/** For plots: exact for rectangles, circles and ellipses, else from the finite-element solution. */
export function perimeterCurve(
  profile: Profile,
  width: number,
  depth: number,
  where = '',
  options: SectionOptions = {},
): PerimeterCurve {
  checkSize(profile, width, depth, where);
  if (profile.kind === 'rectangle') return mirrored(rectangleHalf(width, depth));
  if (profile.kind === 'circle' || profile.kind === 'ellipse') return mirrored(ellipseHalf(width, depth));
  const shape = shapeOf(profile, width, depth, where);
  const { wall } = solvedUnit(shape, options, where);
  const points: Point[] = [];
  for (let p = 0; p < wall.length; p += 3) {
    const [x, y] = toMetres(shape, [wall[p], wall[p + 1]]);
    points.push({ at: [x, y], shear: wall[p + 2] * shape.unit });
  }
  return shape.symmetric ? mirrored(points) : closed(points);
}

export interface Point {
  readonly at: Place;
  readonly shear: number;
}

/** Intervals on half a side; closer towards its ends. */
const STEPS = 24;

/** Right half, from the middle of the floor to that of the lid. */
function rectangleHalf(width: number, depth: number): Point[] {
  const points: Point[] = [];
  const floor = (share: number): Point => ({
    at: [(share * width) / 2, 0],
    shear: rectangleShear(width, depth, (share * width) / 2),
  });
  for (let i = 0; i <= STEPS; i += 1) points.push(floor(Math.sin((Math.PI * i) / (2 * STEPS))));
  for (let i = 1; i < 2 * STEPS; i += 1) {
    const share = (1 - Math.cos((Math.PI * i) / (2 * STEPS))) / 2;
    points.push({
      at: [width / 2, share * depth],
      shear: rectangleShear(depth, width, (share - 0.5) * depth),
    });
  }
  for (let i = STEPS; i >= 0; i -= 1) {
    const { at, shear } = points[i];
    points.push({ at: [at[0], depth], shear });
  }
  return points;
}

function ellipseHalf(width: number, depth: number): Point[] {
  const a = width / 2;
  const b = depth / 2;
  const factor = (a * a * b * b) / (a * a + b * b);
  return Array.from({ length: 4 * STEPS + 1 }, (_, i) => {
    const angle = Math.PI * (i / (4 * STEPS) - 0.5);
    const [c, s] = i === 0 ? [0, -1] : i === 4 * STEPS ? [0, 1] : [Math.cos(angle), Math.sin(angle)];
    return { at: [a * c, b + b * s], shear: factor * Math.hypot(c / a, s / b) };
  });
}

/** A symmetric section's right half, from the middle of its floor to that of its lid, and its image. */
export function mirrored(half: readonly Point[]): PerimeterCurve {
  const image = half.slice(1, -1).map(({ at, shear }): Point => ({ at: [-at[0], at[1]], shear }));
  return closed([...half, ...image.reverse()]);
}

/** The first point again at the end, so that the curve closes. */
export function closed(points: readonly Point[]): PerimeterCurve {
  const round = [...points, points[0]];
  let along = 0;
  return {
    x: Float64Array.from(round, ({ at }) => at[0]),
    y: Float64Array.from(round, ({ at }) => at[1]),
    s: Float64Array.from(round, ({ at }, i) => {
      if (i > 0) along += Math.hypot(at[0] - round[i - 1].at[0], at[1] - round[i - 1].at[1]);
      return along;
    }),
    shear: Float64Array.from(round, ({ shear }) => shear),
  };
}
