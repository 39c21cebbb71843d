import { ConductanceTable } from './conductance-table.ts';
import { ellipseConductance } from './ellipse.ts';
import { checkWallAngle, etchedShape, LEAST_ANGLE, LONGEST_FLAT } from './etched-shape.ts';
import type { Profile } from './profile.ts';
import { rectangleConductance } from './rectangle.ts';

/**
 * Conductance of a profile as its mask width varies, fast enough for every place of every taper: closed
 * forms where there are any; else a table in the shape's one parameter, made once per profile, and exact
 * scaling beyond it (a closed V grows with the fourth power of its width, a flat middle like plates).
 */
export interface VaryingConductance {
  /** m⁴; metres. */
  at(width: number, depth: number): number;
  /** Widths between which the conductance is smooth. */
  kinks(depth: number): readonly number[];
}

export function varyingConductance(
  profile: Exclude<Profile, { kind: 'polygon' | 'circle' }>,
  where: string,
): VaryingConductance {
  switch (profile.kind) {
    case 'rectangle':
      return { at: rectangleConductance, kinks: none };
    case 'ellipse':
      return { at: ellipseConductance, kinks: none };
    case 'rounded': {
      const table = tableOf('rounded', FLATS, (flat) => etchedShape(profile, flat, 1, where), where);
      return { at: (width, depth) => depth ** 4 * flatConductance(table, width / depth), kinks: none };
    }
    case 'triangle': {
      const table = tableOf(
        'triangle',
        LID_LOGS,
        (lid) => etchedShape(profile, Math.exp(lid), 1, where),
        where,
      );
      return {
        at(width, depth) {
          // Throws where the triangle is too thin to be solved.
          if (Math.abs(Math.log(width / depth)) > LID_LOG) etchedShape(profile, width, depth, where);
          return depth ** 4 * table.at(Math.log(width / depth));
        },
        kinks: none,
      };
    }
    case 'trapezoid': {
      checkWallAngle(profile.wallAngle, where);
      const lean = 1 / Math.tan((profile.wallAngle * Math.PI) / 180);
      const shapeAt = (flat: number) => etchedShape(profile, flat + 2 * lean, 1, where);
      const table = tableOf(`trapezoid ${profile.wallAngle}`, FLATS, shapeAt, where);
      // The closed V: its conductance per fourth power of its width.
      let closed = 0;
      return {
        at(width, depth) {
          const flat = width / depth - 2 * lean;
          if (flat > 0) return depth ** 4 * flatConductance(table, flat);
          if (closed === 0) closed = table.at(0) / (2 * lean) ** 4;
          return closed * width ** 4;
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

function flatConductance(table: ConductanceTable, flat: number): number {
  return flat <= LONGEST_FLAT ? table.at(flat) : table.at(LONGEST_FLAT) + (flat - LONGEST_FLAT) / 12;
}

const tables = new Map<string, ConductanceTable>();
const MOST_TABLES = 256;

function tableOf(
  name: string,
  breaks: readonly number[],
  shapeAt: ConstructorParameters<typeof ConductanceTable>[1],
  where: string,
): ConductanceTable {
  const known = tables.get(name);
  if (known) return known;
  if (tables.size >= MOST_TABLES) tables.clear();
  const table = new ConductanceTable(breaks, shapeAt, where);
  tables.set(name, table);
  return table;
}
