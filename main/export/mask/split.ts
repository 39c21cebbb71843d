import {
  area,
  Clipper64,
  ClipType,
  FillRule,
  getBounds,
  type Path64,
  type Paths64,
  type PolyPath64,
  PolyTree64,
  type Rect64,
  rectClip,
} from 'clipper2-ts';

/** Ground within a box, with the boxes of its polygons so that those on one side of a cut need no look. */
interface Piece {
  readonly paths: Paths64;
  readonly boxes: readonly Rect64[];
  /** What it was cut to; edges of polygons along its sides may be shared by several. */
  readonly box: Rect64;
  readonly count: number;
}

/**
 * Polygons without holes and of at most `most` points that cover the same ground, for formats that allow
 * no more: pieces are cut along the axes, through holes where there are any, at whole nanometres. Outer
 * boundaries counter-clockwise, holes clockwise; neighbouring pieces share their cut.
 */
export function split(paths: Paths64, most: number): Path64[] {
  const out: Path64[] = [];
  if (paths.length === 0) return out;
  // pieces still to be cut; a list, as a recursion would be as deep as the drawing is odd
  const waiting: { piece: Piece; clean: boolean }[] = [{ piece: pieceOf(paths), clean: true }];
  while (waiting.length > 0) {
    const { piece, clean } = waiting.pop()!;
    const { paths: some, count } = piece;
    if (clean && some.length === 1 && count <= most) {
      out.push(some[0]!);
      continue;
    }
    const hole = count > 2 * most ? undefined : innerHole(piece);
    if (count > 2 * most || hole || clean) {
      for (const half of halves(piece, hole)) waiting.push({ piece: half, clean: false });
      continue;
    }
    // few points, and every hole cut open: what the cuts left is put in order, outer boundary by outer boundary
    for (const ordering of ordered(some)) waiting.push({ piece: pieceOf(ordering), clean: true });
  }
  return out;
}

function pieceOf(paths: Paths64): Piece {
  const boxes = paths.map(getBounds);
  return { paths, boxes, box: around(boxes), count: pointsOf(paths) };
}

function pointsOf(paths: Paths64): number {
  let sum = 0;
  for (const path of paths) sum += path.length;
  return sum;
}

function around(boxes: readonly Rect64[]): Rect64 {
  const all: Rect64 = { left: Infinity, top: Infinity, right: -Infinity, bottom: -Infinity };
  for (const { left, top, right, bottom } of boxes) {
    all.left = Math.min(all.left, left);
    all.top = Math.min(all.top, top);
    all.right = Math.max(all.right, right);
    all.bottom = Math.max(all.bottom, bottom);
  }
  return all;
}

/** The hole that no cut has opened yet nearest to the middle. */
function innerHole({ paths, boxes, box }: Piece): Rect64 | undefined {
  if (paths.length === 1) return undefined;
  let best: Rect64 | undefined;
  let least = Infinity;
  for (let k = 0; k < paths.length; k++) {
    const own = boxes[k]!;
    const open =
      own.left <= box.left || own.right >= box.right || own.top <= box.top || own.bottom >= box.bottom;
    if (open) continue;
    const off =
      Math.abs(own.left + own.right - box.left - box.right) +
      Math.abs(own.top + own.bottom - box.top - box.bottom);
    if (off >= least || area(paths[k]!) >= 0) continue;
    least = off;
    best = own;
  }
  return best;
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
    const boxes = count > most ? sides([...p, ...q], around([...p, ...q].map(getBounds))) : [];
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

/** The two sides of a cut across the longer way: through the middle of the hole, else of its points. */
function halves({ paths, boxes, box }: Piece, hole: Rect64 | undefined): Piece[] {
  const out: Piece[] = [];
  for (const side of sides(paths, box, hole)) {
    const kept: { paths: Paths64; boxes: Rect64[] } = { paths: [], boxes: [] };
    const cut: Paths64 = [];
    for (let k = 0; k < paths.length; k++) {
      const own = boxes[k]!;
      if (
        own.right <= side.left ||
        own.left >= side.right ||
        own.bottom <= side.top ||
        own.top >= side.bottom
      )
        continue;
      if (
        own.left >= side.left &&
        own.right <= side.right &&
        own.top >= side.top &&
        own.bottom <= side.bottom
      ) {
        kept.paths.push(paths[k]!);
        kept.boxes.push(own);
      } else cut.push(paths[k]!);
    }
    for (const path of rectClip(side, cut)) {
      kept.paths.push(path);
      kept.boxes.push(getBounds(path));
    }
    if (kept.paths.length > 0) out.push({ ...kept, box: side, count: pointsOf(kept.paths) });
  }
  return out;
}

/** The two sides of a cut across the longer way of `box`. */
function sides(paths: Paths64, box: Rect64, hole?: Rect64): Rect64[] {
  const across = box.right - box.left >= box.bottom - box.top;
  const [low, high] = across ? [box.left, box.right] : [box.top, box.bottom];
  const middle = hole && Math.round((across ? hole.left + hole.right : hole.top + hole.bottom) / 2);
  const at = Math.min(high - 1, Math.max(low + 1, middle ?? cutAt(paths, across)));
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
  // of many points a sample tells the middle as well
  const stride = Math.ceil(pointsOf(paths) / SAMPLE);
  const values = new Float64Array(SAMPLE);
  let count = 0;
  let skip = 0;
  for (const path of paths) {
    for (; skip < path.length; skip += stride) values[count++] = across ? path[skip]!.x : path[skip]!.y;
    skip -= path.length;
  }
  const sorted = values.subarray(0, count).sort();
  const middle = sorted[count >> 1]!;
  // a cut along a wall would leave a sliver: between the middle point and the next one
  let next = (count >> 1) + 1;
  while (next < count && sorted[next] === middle) next++;
  return next < count ? Math.round((middle + sorted[next]!) / 2) : Math.round((sorted[0]! + middle) / 2);
}
