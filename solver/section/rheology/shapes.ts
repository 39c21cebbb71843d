import type { Profile } from '../profile.ts';
import { closedTable } from './closed-table.ts';
import { sectionElements } from './elements.ts';
import { quarterRectangle, WALL } from './rectangle-mesh.ts';
import type { ScaledFluid } from './scaled.ts';
import { type ShapeTable, shapeTable } from './shape-table.ts';

/** Solved shapes and the share of each: a section between two solved aspect ratios is interpolated. */
export type ShapeMix = readonly { readonly table: ShapeTable; readonly share: number }[];

/** Tables of one scaled fluid, by shape. */
export interface ShapeTables {
  mixOf(profile: Profile, width: number, depth: number): ShapeMix;
}

/** Step of the logarithm of the aspect ratio; cubic interpolation between is within 1e-4 (checked). */
const ASPECT_STEP = 0.25;
/** Beyond an aspect ratio of e^4 = 55 rectangles go over into plates, linearly in the aspect ratio. */
const SHALLOWEST = 16;
/** Cells over the half depth of a rectangle. */
const ACROSS = 8;

export function shapeTables(fluid: ScaledFluid): ShapeTables {
  const kept = new Map<string, ShapeTable>();
  const keep = (key: string, make: () => ShapeTable): ShapeTable => {
    const known = kept.get(key);
    if (known) return known;
    const made = make();
    kept.set(key, made);
    return made;
  };
  const rectangle = (step: number): ShapeTable =>
    keep(`rectangle ${Math.abs(step)}`, () => {
      const mesh = quarterRectangle(Math.exp(Math.abs(step) * ASPECT_STEP), ACROSS);
      return shapeTable(
        sectionElements(mesh, (tag) => tag === WALL),
        fluid,
        4,
      );
    });
  return {
    mixOf(profile, width, depth) {
      switch (profile.kind) {
        case 'circle':
          return [{ table: keep('tube', () => closedTable('tube', fluid)), share: 1 }];
        case 'rectangle': {
          const at = Math.abs(Math.log(width / depth)) / ASPECT_STEP;
          if (at < SHALLOWEST) return cubicMix(at, rectangle);
          const share = Math.exp((SHALLOWEST - at) * ASPECT_STEP);
          const plates = keep('plates', () => closedTable('plates', fluid));
          return [
            { table: rectangle(SHALLOWEST), share },
            { table: plates, share: 1 - share },
          ];
        }
        default:
          throw new RangeError(profile.kind);
      }
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
