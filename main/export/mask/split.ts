import {
  Clipper64,
  ClipType,
  FillRule,
  type Path64,
  type Paths64,
  type PolyPath64,
  PolyTree64,
  type Rect64,
  rectClip,
} from 'clipper2-ts';

/**
 * Polygons without holes and of at most `most` points that cover the same ground, for formats that allow
 * no more: pieces are cut along the axes, through holes where there are any, at whole nanometres. Outer
 * boundaries counter-clockwise, holes clockwise; neighbouring pieces share their cut.
 */
export function split(paths: Paths64, most: number): Path64[] {
  const out: Path64[] = [];
  // pieces still to be cut; a list, as a recursion would be as deep as the drawing is odd
  const waiting: { paths: Paths64; clean: boolean }[] = [{ paths, clean: true }];
  while (waiting.length > 0) {
    const { paths: some, clean } = waiting.pop()!;
    const count = some.reduce((sum, path) => sum + path.length, 0);
    if (clean && some.length === 1 && count <= most) {
      out.push(some[0]!);
      continue;
    }
    if (count > 2 * most || clean) {
      waiting.push(...halves(some).map((half) => ({ paths: half, clean: false })));
      continue;
    }
    // few points: what the cuts left is put in order, outer boundary by outer boundary
    for (const piece of ordered(some)) waiting.push({ paths: piece, clean: true });
  }
  return out;
}

/**
 * Two sets of polygons cut alike into pieces of at most `most` points, so that what is asked of both can be
 * asked piece by piece: the cost of that then grows with their size and no faster.
 */
export function tiles(a: Paths64, b: Paths64, most: number): (readonly [Paths64, Paths64])[] {
  const out: (readonly [Paths64, Paths64])[] = [];
  const waiting: (readonly [Paths64, Paths64])[] = [[a, b]];
  while (waiting.length > 0) {
    const [p, q] = waiting.pop()!;
    const count = [...p, ...q].reduce((sum, path) => sum + path.length, 0);
    const boxes = count > most ? sides([...p, ...q]) : [];
    if (boxes.length === 0) out.push([p, q]);
    for (const box of boxes) waiting.push([rectClip(box, p), rectClip(box, q)]);
  }
  return out;
}

/** Each outer boundary with its holes. */
function ordered(paths: Paths64): Paths64[] {
  const clipper = new Clipper64();
  clipper.addSubject(paths);
  const tree = new PolyTree64();
  clipper.execute(ClipType.Union, FillRule.NonZero, tree);
  const found: Paths64[] = [];
  const collect = (node: PolyPath64): void => {
    for (let i = 0; i < node.count; i++) {
      const outer = node.child(i);
      const piece: Paths64 = [outer.poly!];
      for (let k = 0; k < outer.count; k++) {
        piece.push(outer.child(k).poly!);
        collect(outer.child(k));
      }
      found.push(piece);
    }
  };
  collect(tree);
  return found;
}

/** The two sides of a cut across the longer way: through the middle of a hole where the piece is small, else its points. */
function halves(paths: Paths64): Paths64[] {
  return sides(paths)
    .map((side) => rectClip(side, paths))
    .filter((half) => half.length > 0);
}

function sides(paths: Paths64): Rect64[] {
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const path of paths) {
    for (const { x, y } of path) {
      x0 = Math.min(x0, x);
      y0 = Math.min(y0, y);
      x1 = Math.max(x1, x);
      y1 = Math.max(y1, y);
    }
  }
  const across = x1 - x0 >= y1 - y0;
  const [low, high] = across ? [x0, x1] : [y0, y1];
  const at = Math.min(high - 1, Math.max(low + 1, cutAt(paths, across)));
  const box: Rect64 = { left: x0, top: y0, right: x1, bottom: y1 };
  return across
    ? [
        { ...box, right: at },
        { ...box, left: at },
      ]
    : [
        { ...box, bottom: at },
        { ...box, top: at },
      ];
}

/** Points that the place of a cut is chosen by. */
const SAMPLE = 500;

function cutAt(paths: Paths64, across: boolean): number {
  const along = ({ x, y }: { x: number; y: number }): number => (across ? x : y);
  const few = paths.length > 1 && paths.length <= 3;
  if (few) {
    const values = paths[1]!.map(along);
    return Math.round((Math.min(...values) + Math.max(...values)) / 2);
  }
  // of many points a sample tells the middle as well
  const count = paths.reduce((sum, path) => sum + path.length, 0);
  const stride = Math.ceil(count / SAMPLE);
  const values: number[] = [];
  let skip = 0;
  for (const path of paths) {
    for (; skip < path.length; skip += stride) values.push(along(path[skip]!));
    skip -= path.length;
  }
  values.sort((a, b) => a - b);
  const middle = values[values.length >> 1]!;
  // a cut along a wall would leave a sliver: between the middle point and the next one
  const next = values.find((value) => value > middle);
  return next === undefined ? Math.round((values[0]! + middle) / 2) : Math.round((middle + next) / 2);
}
