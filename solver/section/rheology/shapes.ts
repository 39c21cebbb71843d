import { etchedShape } from '../etched-shape.ts';
import type { Profile } from '../profile.ts';
import { shapeOf } from '../solved-unit.ts';
import { closedTable } from './closed-table.ts';
import { sectionElements } from './elements.ts';
import { quarterRectangle, WALL } from './rectangle-mesh.ts';
import type { ScaledFluid } from './scaled.ts';
import { shapeElements, withFlat } from './shape-elements.ts';
import { type ShapeTable, shapeTable } from './shape-table.ts';

/** Solved shapes and the share of each: a section between two solved aspect ratios is interpolated. */
export type ShapeMix = readonly { readonly table: ShapeTable; readonly share: number }[];

/**
 * A section as its tables see it. Of a flat middle so long that the sides know nothing of each other
 *, `strip` metres are left out of `mix`: there the flow is that between plates.
 */
export interface SectionParts {
  readonly mix: ShapeMix;
  readonly strip: number;
  readonly plates: ShapeMix;
}

/** Tables of one scaled fluid, by shape. */
export interface ShapeTables {
  partsOf(profile: Profile, width: number, depth: number, where: string): SectionParts;
}

type Etched = Exclude<Profile, { kind: 'polygon' }>;

/** Step of the logarithm of the aspect ratio; cubic interpolation between is within 1e-4 (checked). */
const ASPECT_STEP = 0.25;
/** Flatter or steeper than e^±4, triangles and ellipses keep their flow per wall stress: the last table serves. */
const LAST_STEP = 16;
/** Tables kept; one holds a few hundred kilobytes. */
const MOST_KEPT = 200;
/** Cells over the half depth of a rectangle. */
const ACROSS = 8;

export function shapeTables(fluid: ScaledFluid): ShapeTables {
  const kept = new Map<string, ShapeTable>();
  const keep = (key: string, make: () => ShapeTable): ShapeTable => {
    const known = kept.get(key);
    if (known) return known;
    const made = make();
    if (kept.size >= MOST_KEPT) kept.clear();
    kept.set(key, made);
    return made;
  };
  const one = (table: ShapeTable): ShapeMix => [{ table, share: 1 }];
  const plates = one(closedTable('plates', fluid));

  /** The table of a profile of unit depth and this width. */
  const tableOf = (profile: Etched, width: number): ShapeTable => {
    if (profile.kind === 'rectangle') {
      const aspect = Math.max(width, 1 / width);
      return keep(`rectangle ${aspect.toPrecision(12)}`, () =>
        shapeTable(
          sectionElements(quarterRectangle(aspect, ACROSS), (tag) => tag === WALL),
          fluid,
          4,
        ),
      );
    }
    const shape = withFlat(etchedShape(profile, width, 1, ''));
    return keep(shape.key, () => shapeTable(shapeElements(shape, ''), fluid, 2));
  };
  const between = (profile: Etched, at: number): ShapeMix =>
    cubicMix(at, (step) =>
      tableOf(profile, Math.exp(Math.min(Math.max(step, -LAST_STEP), LAST_STEP) * ASPECT_STEP)),
    );

  return {
    partsOf(profile, width, depth, where) {
      if (profile.kind === 'polygon') {
        const shape = shapeOf(profile, width, depth, where);
        const copies = shape.symmetric ? 2 : 1;
        const table = keep(shape.key, () => shapeTable(shapeElements(shape, where), fluid, copies));
        return { mix: one(table), strip: 0, plates };
      }
      if (profile.kind === 'circle') {
        return { mix: one(keep('tube', () => closedTable('tube', fluid))), strip: 0, plates };
      }
      const wide = profile.kind === 'rectangle' ? Math.max(width, depth) : width;
      const deep = profile.kind === 'rectangle' ? Math.min(width, depth) : depth;
      const { extra } = etchedShape(profile, wide, deep, where);
      if (extra > 0) {
        const cut = wide / deep - extra;
        return { mix: one(tableOf(profile, cut)), strip: extra * deep, plates };
      }
      return { mix: between(profile, Math.log(wide / deep) / ASPECT_STEP), strip: 0, plates };
    },
  };
}

/** Cubic Lagrange through the four steps around `at`; one step where it falls on one. */
function cubicMix(at: number, table: (step: number) => ShapeTable): ShapeMix {
  const first = Math.floor(at + 1e-9);
  const s = at - first;
  if (Math.abs(s) < 1e-9) return [{ table: table(first), share: 1 }];
  return [
    { table: table(first - 1), share: (-s * (s - 1) * (s - 2)) / 6 },
    { table: table(first), share: ((s + 1) * (s - 1) * (s - 2)) / 2 },
    { table: table(first + 1), share: (-(s + 1) * s * (s - 2)) / 2 },
    { table: table(first + 2), share: ((s + 1) * s * (s - 1)) / 6 },
  ];
}
