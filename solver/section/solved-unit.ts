import { etchedShape } from './etched-shape.ts';
import { polygonShape } from './polygon-shape.ts';
import type { Profile } from './profile.ts';
import { SectionCache } from './section-cache.ts';
import type { SectionShape } from './section-shape.ts';
import { solveSection } from './solve-section.ts';
import type { UnitSection } from './unit-section.ts';

export interface SectionOptions {
  /** Relative accuracy of the conductance; default 0.001. */
  readonly accuracy?: number;
  /** Where solved shapes are kept; by default one that everything shares. */
  readonly cache?: SectionCache;
}

export const ACCURACY = 1e-3;

/** Solved shapes of this process. */
export const sharedSections = new SectionCache();

/** The shape that a profile makes, freed of its size. */
export function shapeOf(profile: Profile, width: number, depth: number, where: string): SectionShape {
  return profile.kind === 'polygon'
    ? measuredShape(profile.points, where)
    : etchedShape(profile, width, depth, where);
}

/** Outlines already read, by identity: a chip is immutable, so the same points are the same array. */
const measured = new WeakMap<readonly (readonly [number, number])[], SectionShape>();

function measuredShape(points: readonly (readonly [number, number])[], where: string): SectionShape {
  const known = measured.get(points);
  if (known) return known;
  const shape = polygonShape(points, where);
  measured.set(points, shape);
  return shape;
}

/** The shape solved by finite elements, from the cache where it has been solved before. */
export function solvedUnit(shape: SectionShape, options: SectionOptions, where: string): UnitSection {
  const accuracy = options.accuracy ?? ACCURACY;
  const cache = options.cache ?? sharedSections;
  const known = cache.get(shape.key, accuracy);
  if (known) return known;
  const unit = solveSection(shape, accuracy, where);
  cache.set(shape.key, accuracy, unit);
  return unit;
}
