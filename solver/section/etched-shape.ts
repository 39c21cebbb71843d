import type { Edge } from '../mesh/mesh.ts';
import { Problem } from '../problem/problem.ts';
import { ellipsePerimeter } from './ellipse.ts';
import type { Profile } from './profile.ts';
import { type SectionShape, SYMMETRY, WALL } from './section-shape.ts';

/** Flat middles longer than this many depths are cut to it: what is neglected is below e^(−10π/2). */
export const LONGEST_FLAT = 10;
/** Walls and tips flatter or sharper than this are not solved. */
export const LEAST_ANGLE = 1;
const RIGHT_ANGLE = 90;
const QUARTER = Math.tan(Math.PI / 8);

const degrees = (angle: number): number => (angle * Math.PI) / 180;
const keyNumber = (value: number): string => value.toPrecision(13);
const edge = (x: number, y: number, bulge = 0, tag = WALL): Edge => ({ x, y, bulge, tag });

/**
 * The shape that a process makes of a mask width and a depth, right half. Width and depth have been
 * checked to be lengths.
 */
export function etchedShape(
  profile: Exclude<Profile, { kind: 'polygon' }>,
  width: number,
  depth: number,
  where: string,
): SectionShape {
  switch (profile.kind) {
    case 'rectangle':
      return trapezoidShape(RIGHT_ANGLE, width / depth, depth, 0);
    case 'trapezoid': {
      checkWallAngle(profile.wallAngle, where);
      const slope = Math.tan(degrees(profile.wallAngle));
      const closed = (width / 2) * slope;
      if (closed <= depth) return triangleShape(2 / slope, closed, depth - closed);
      return trapezoidShape(profile.wallAngle, width / depth - 2 / slope, depth, 1 / slope);
    }
    case 'triangle': {
      const half = width / 2 / depth;
      const least = Math.tan(degrees(LEAST_ANGLE));
      if (half < least || 1 / half < least) {
        throw new Problem(
          'profile',
          `A triangle ${width} m wide and ${depth} m deep is too thin to be solved.`,
          where,
          `Keep width and depth within ${Math.floor(2 / least)} times of each other.`,
        );
      }
      return triangleShape(2 * half, depth, 0);
    }
    case 'rounded':
      return roundedShape(width / depth, depth);
    case 'circle':
    case 'ellipse':
      return ellipseShape(width / depth, depth);
  }
}

export function checkWallAngle(angle: number, where: string): void {
  if (angle >= LEAST_ANGLE && angle < RIGHT_ANGLE) return;
  throw new Problem(
    'profile',
    `A wall angle of ${angle}° cannot be made: walls lean outwards, ${LEAST_ANGLE}° to below 90° from the floor.`,
    where,
    angle === RIGHT_ANGLE
      ? 'Use the rectangle profile for upright walls.'
      : 'Give the angle between floor and wall, as in 54.74 for etched silicon.',
  );
}

/** Floor `flat` wide, sides leaning out by `lean` each, all in depths. */
function trapezoidShape(angle: number, flat: number, unit: number, lean: number): SectionShape {
  const kept = Math.min(flat, LONGEST_FLAT);
  const half = kept / 2;
  return {
    key: `trapezoid ${keyNumber(angle)} ${keyNumber(kept)}`,
    shape: [[edge(0, 0), edge(half, 0), edge(half + lean, 1), edge(0, 1, 0, SYMMETRY)]],
    symmetric: true,
    stretch: 1,
    unit,
    origin: [0, 0],
    extra: flat - kept,
    area: kept + lean,
    perimeter: 2 * kept + 2 * lean + 2 * Math.hypot(1, lean),
    width: kept + 2 * lean,
    depth: 1,
    floorMiddle: [0, 0],
    sideMiddle: [half + lean / 2, 0.5],
    obtuse: lean > 0 ? [[half, 0]] : [],
    reentrant: [],
    moved: 0,
    averaged: 0,
  };
}

/** Tip down, lid `lid` depths wide. */
function triangleShape(lid: number, unit: number, lift: number): SectionShape {
  return {
    key: `triangle ${keyNumber(lid)}`,
    shape: [[edge(0, 0), edge(lid / 2, 1), edge(0, 1, 0, SYMMETRY)]],
    symmetric: true,
    stretch: 1,
    unit,
    origin: [0, lift],
    extra: 0,
    area: lid / 2,
    perimeter: lid + 2 * Math.hypot(1, lid / 2),
    width: lid,
    depth: 1,
    floorMiddle: [0, 0],
    sideMiddle: [lid / 4, 0.5],
    obtuse: lid > 2 ? [[0, 0]] : [],
    reentrant: [],
    moved: 0,
    averaged: 0,
  };
}

/** Floor as wide as the mask, quarter circles of radius depth at both sides. */
function roundedShape(mask: number, unit: number): SectionShape {
  const kept = Math.min(mask, LONGEST_FLAT);
  const half = kept / 2;
  return {
    key: `rounded ${keyNumber(kept)}`,
    shape: [[edge(0, 0), edge(half, 0, QUARTER), edge(half + 1, 1), edge(0, 1, 0, SYMMETRY)]],
    symmetric: true,
    stretch: 1,
    unit,
    origin: [0, 0],
    extra: mask - kept,
    area: kept + Math.PI / 2,
    perimeter: 2 * kept + 2 + Math.PI,
    width: kept + 2,
    depth: 1,
    floorMiddle: [0, 0],
    sideMiddle: [half + Math.sqrt(0.75), 0.5],
    obtuse: [],
    reentrant: [],
    moved: 0,
    averaged: 0,
  };
}

/** The half circle of radius 1/2 on the lid's height, stretched across. */
function ellipseShape(ratio: number, unit: number): SectionShape {
  return {
    key: `ellipse ${keyNumber(ratio)}`,
    shape: [[edge(0, 0, QUARTER), edge(0.5, 0.5, QUARTER), edge(0, 1, 0, SYMMETRY)]],
    symmetric: true,
    stretch: ratio,
    unit,
    origin: [0, 0],
    extra: 0,
    area: (Math.PI * ratio) / 4,
    perimeter: ellipsePerimeter(ratio / 2, 0.5),
    width: ratio,
    depth: 1,
    floorMiddle: [0, 0],
    sideMiddle: [ratio / 2, 0.5],
    obtuse: [],
    reentrant: [],
    moved: 0,
    averaged: 0,
  };
}
