import { Clipper, ClipType, EndType, FillRule, JoinType, type Paths64 } from 'clipper2-ts';
import type { Patch } from '../compare.ts';
import { type Box, boxAround } from './clusters.ts';
import { dropExcess } from './excess.ts';
import type { Found } from './layer.ts';
import { type Area, booleanAreas, pathsOf } from './plane.ts';

interface Ground {
  readonly areas: readonly Area[];
  /** The same as paths. */
  readonly regions: Paths64;
  /** What the channels of regions cover. */
  readonly covered: Paths64;
  /** Where they do not fit. */
  readonly off: readonly Patch[];
  readonly found: readonly Found[];
  /** Channels that were drawn as paths. */
  readonly tracks: readonly Found[];
}

/**
 * Where channels do not fit what was drawn: channels without those that cover what is not there, and the
 * areas that are left, patch by patch.
 */
export function roomsIn(
  { areas, regions, covered, off, found, tracks }: Ground,
  cover: (some: readonly Found[]) => Paths64,
): { kept: Found[]; left: Area[] } {
  if (off.length === 0) return { kept: [...found], left: [] };
  const areaOf = areas.flatMap(({ holes }, i) => Array<number>(1 + holes.length).fill(i));
  const byArea = new Map<number, Found[]>();
  for (const one of found) {
    const known = byArea.get(one.area);
    if (known) known.push(one);
    else byArea.set(one.area, [one]);
  }
  const dropped = new Set<Found>();
  const patches = off.map(({ drawn, made }) => {
    const own = [...new Set(drawn.map((i) => areaOf[i]))].flatMap((area) => byArea.get(area) ?? []);
    const ground = drawn.map((i) => regions[i]);
    const before = made.map((i) => covered[i]);
    const kept = dropExcess(own, before, ground);
    const left = new Set(kept);
    for (const one of own) if (!left.has(one)) dropped.add(one);
    const box = boxAround(ground);
    const over = tracks.filter(({ course }) => reaches(course, box));
    const same = kept.length === own.length && over.length === 0;
    return { ground, over, kept, covered: same ? before : null };
  });
  const kept = found.filter((one) => !dropped.has(one));
  const narrowest = [...tracks, ...kept].reduce(
    (least, { course }) => Math.min(least, ...course.width),
    Infinity,
  );
  const thin = Number.isFinite(narrowest) ? narrowest : 0;
  const left = patches.flatMap((patch) =>
    restOf(patch.ground, patch.covered ?? cover([...patch.over, ...patch.kept]), thin),
  );
  return { kept, left };
}

function reaches({ path, width }: Found['course'], { left, top, right, bottom }: Box): boolean {
  const reach = 2 * Math.max(...width);
  const box = boxAround([path.map(([x, y]) => ({ x, y }))]);
  return (
    box.left - reach <= right &&
    box.right + reach >= left &&
    box.top - reach <= bottom &&
    box.bottom + reach >= top
  );
}

/** What counts as ground at all, nm: thinner than twice this it is the edge of something else. */
const THINNEST = 100;
const THIN_SHARE = 0.03;
const THICKEST = 3000;
/** Chambers reach this far into the channels beside them, nm, so that no rounding parts them. */
const OVERLAP = 8;

/** The parts of `ground` that `covered` leaves, without what is only a thin edge. */
function restOf(ground: Paths64, covered: Paths64, narrowest: number): Area[] {
  const thin = Math.min(THICKEST, Math.max(THINNEST, THIN_SHARE * narrowest));
  // A sliver of rounding that runs the wrong way round would turn all others into holes.
  const left = (covered.length > 0 ? Clipper.difference(ground, covered, FillRule.NonZero) : ground).filter(
    (path) => Math.abs(Clipper.area(path)) > thin * thin,
  );
  if (left.length === 0) return [];
  const thick = Clipper.inflatePaths(left, -thin, JoinType.Miter, EndType.Polygon, 4);
  if (thick.length === 0) return [];
  const again = Clipper.inflatePaths(thick, thin + OVERLAP, JoinType.Miter, EndType.Polygon, 4);
  const grown = Clipper.inflatePaths(left, OVERLAP, JoinType.Miter, EndType.Polygon, 4);
  const both = Clipper.intersect(again, grown, FillRule.NonZero);
  return booleanAreas(ClipType.Intersection, both, ground);
}

/** Steps that growing and rounding leave in an outline, nm: a chamber has none as small. */
const STEP = 12;

/** An area as outlines without holes and without steps of rounding: cut through its holes, the parts overlapping a little. */
export function withoutHoles(area: Area, depth = 0): Paths64 | null {
  if (area.holes.length === 0) return [Clipper.simplifyPath(area.outer, STEP)];
  if (depth > 60) return null;
  const box = Clipper.getBounds(area.outer);
  const hole = Clipper.getBounds(area.holes[area.holes.length >> 1]);
  const x = Math.round((hole.left + hole.right) / 2);
  const out: Paths64 = [];
  for (const [from, to] of [
    [box.left - 1, x + OVERLAP],
    [x - OVERLAP, box.right + 1],
  ]) {
    const band = [
      { x: from, y: box.top - 1 },
      { x: to, y: box.top - 1 },
      { x: to, y: box.bottom + 1 },
      { x: from, y: box.bottom + 1 },
    ];
    for (const part of booleanAreas(ClipType.Intersection, pathsOf([area]), [band])) {
      const outlines = withoutHoles(part, depth + 1);
      if (!outlines) return null;
      out.push(...outlines);
    }
  }
  return out;
}
