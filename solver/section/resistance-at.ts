import { ellipseConductance } from './ellipse.ts';
import { checkWallAngle, etchedShape, LEAST_ANGLE, LONGEST_FLAT } from './etched-shape.ts';
import type { Profile } from './profile.ts';
import { rectangleConductance } from './rectangle.ts';
import { ResistanceTable } from './resistance-table.ts';

/**
 * Resistance of a profile as its mask width varies, fast enough for every place of every taper: closed
 * forms where there are any; else a table in the shape's one parameter, made once per profile, and exact
 * scaling beyond it (a closed V grows with the fourth power of its width, a flat middle like plates).
 */
export interface VaryingResistance {
  /** Per length and µ, m⁻⁴: 1/conductance; metres. A `Problem` names `where`. */
  at(width: number, depth: number, where: string): number;
  /** Widths between which it is smooth. */
  kinks(depth: number): readonly number[];
}

export function varyingResistance(
  profile: Exclude<Profile, { kind: 'polygon' | 'circle' }>,
  where: string,
): VaryingResistance {
  const known = made.get(profile);
  if (known) return known;
  const varying = makeVarying(profile, where);
  made.set(profile, varying);
  return varying;
}

/** By identity: the profiles of a chip are immutable. */
const made = new WeakMap<Profile, VaryingResistance>();

function makeVarying(
  profile: Exclude<Profile, { kind: 'polygon' | 'circle' }>,
  where: string,
): VaryingResistance {
  switch (profile.kind) {
    case 'rectangle':
      return { at: (width, depth) => 1 / rectangleConductance(width, depth), kinks: none };
    case 'ellipse':
      return { at: (width, depth) => 1 / ellipseConductance(width, depth), kinks: none };
    case 'rounded': {
      const table = tableOf('rounded', FLATS, (flat) => etchedShape(profile, flat, 1, ''));
      return {
        at: (width, depth, where) => flatResistance(table, width / depth, where) / fourth(depth),
        kinks: none,
      };
    }
    case 'triangle': {
      const table = tableOf('triangle', LID_LOGS, (lid) => etchedShape(profile, Math.exp(lid), 1, ''));
      return {
        at(width, depth, where) {
          const lid = Math.log(width / depth);
          // Throws: the triangle is too thin to be solved.
          if (lid < LID_LOGS[0] || lid > LID_LOG) etchedShape(profile, width, depth, where);
          return table.at(lid, where) / fourth(depth);
        },
        kinks: none,
      };
    }
    case 'trapezoid': {
      checkWallAngle(profile.wallAngle, where);
      const lean = 1 / Math.tan((profile.wallAngle * Math.PI) / 180);
      const shapeAt = (flat: number) => etchedShape(profile, flat + 2 * lean, 1, '');
      const table = tableOf(`trapezoid ${profile.wallAngle}`, FLATS, shapeAt);
      // The closed V: its resistance times the fourth power of its width.
      let closed = 0;
      return {
        at(width, depth, where) {
          const flat = width / depth - 2 * lean;
          if (flat > 0) return flatResistance(table, flat, where) / fourth(depth);
          if (closed === 0) closed = table.at(0, where) * fourth(2 * lean);
          return closed / fourth(width);
        },
        kinks: (depth) => [2 * lean * depth],
      };
    }
  }
}

/** Breaks in flat width over depth, closer where the sides are near each other. */
const FLATS = [0, 0.25, 0.75, 2, 4.5, LONGEST_FLAT];
/** In the logarithm of lid over depth of a triangle. */
const LID_LOG = Math.log(2 / Math.tan((LEAST_ANGLE * Math.PI) / 180)) - 1e-9;
const LID_LOGS = [-LID_LOG + Math.log(4), -2.5, -1.5, -0.75, 0, 0.75, 1.5, 2.5, 3.5, LID_LOG];

const none = (): readonly number[] => [];

const fourth = (x: number): number => x * x * (x * x);

function flatResistance(table: ResistanceTable, flat: number, where: string): number {
  if (flat <= LONGEST_FLAT) return table.at(flat, where);
  return 1 / (1 / table.at(LONGEST_FLAT, where) + (flat - LONGEST_FLAT) / 12);
}

const tables = new Map<string, ResistanceTable>();
const MOST_TABLES = 256;

function tableOf(
  name: string,
  breaks: readonly number[],
  shapeAt: ConstructorParameters<typeof ResistanceTable>[1],
): ResistanceTable {
  const known = tables.get(name);
  if (known) return known;
  if (tables.size >= MOST_TABLES) tables.clear();
  const table = new ResistanceTable(breaks, shapeAt);
  tables.set(name, table);
  return table;
}
