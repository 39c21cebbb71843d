import type { Chip } from '../chip/chip.ts';
import { drawingOf } from '../chip/read-graph-drawing.ts';
import type { Finding } from '../problem/finding.ts';
import type { Drawn } from './evidence.ts';
import type { Gathered } from './gather.ts';
import { length, METRE, placeOf } from './words.ts';

/** What a part covers: least x, least y, greatest x, greatest y, nm. */
type Box = readonly [number, number, number, number];

/** nm; below this two places are one. */
const TOUCH = 1;

/** Everything drawn, with its width and what an etch adds, against the outline and the edge that must stay. */
export function checkOutline(drawn: Drawn, found: Gathered): void {
  const { chip, rules } = drawn;
  const undercut = rules?.undercut?.number ?? 0;
  const depths = chip.layers.map(({ depth }) => depth * undercut);
  const extra = new Map(chip.layers.map((layer, i) => [layer.id, depths[i]!]));
  const { elements, boxes, layerOf } = drawingOf(chip);
  for (const [c, { id, path, depth }] of chip.channels.entries()) {
    let minX = Infinity;
    let minY = Infinity;
    let maxX = -Infinity;
    let maxY = -Infinity;
    for (let e = elements.first[c]!; e < elements.first[c + 1]!; e += 1) {
      minX = Math.min(minX, boxes[4 * e]!);
      minY = Math.min(minY, boxes[4 * e + 1]!);
      maxX = Math.max(maxX, boxes[4 * e + 2]!);
      maxY = Math.max(maxY, boxes[4 * e + 3]!);
    }
    // A channel that ends on the outline is meant to open to the side.
    const open = onEdge(chip, path[0]!) || onEdge(chip, path[path.length - 1]!);
    const by = depth === undefined ? depths[layerOf[c]!]! : depth * undercut;
    judge(drawn, id, id, [minX - by, minY - by, maxX + by, maxY + by], open, found);
  }
  for (const { id, layer, outline } of chip.chambers) {
    const xs = outline.map(([x]) => x);
    const ys = outline.map(([, y]) => y);
    const box: Box = [Math.min(...xs), Math.min(...ys), Math.max(...xs), Math.max(...ys)];
    judge(drawn, `chamber:${id}`, id, grown(box, extra.get(layer) ?? 0), false, found);
  }
  for (const { id, at, diameter } of chip.vias)
    judge(drawn, `via:${id}`, id, around(at, diameter), false, found);
  for (const { id, at, diameter } of chip.ports)
    judge(drawn, `port:${id}`, id, around(at, diameter), diameter === 0, found);
}

function onEdge({ outline }: Chip, at: readonly [number, number]): boolean {
  const x = at[0];
  const y = at[1];
  return x <= TOUCH || y <= TOUCH || x >= outline.width - TOUCH || y >= outline.height - TOUCH;
}

const grown = ([a, b, c, d]: Box, by: number): Box => [a - by, b - by, c + by, d + by];
const around = ([x, y]: readonly [number, number], diameter: number): Box =>
  grown([x, y, x, y], diameter / 2);

function judge(
  { chip, rules }: Drawn,
  where: string,
  name: string,
  box: Box,
  open: boolean,
  found: Gathered,
): void {
  const { width, height } = chip.outline;
  const least = Math.min(box[0], box[1], width - box[2], height - box[3]);
  const edge = rules?.edge;
  const over = least < -TOUCH;
  if (!over && (open || !edge || least >= edge.number)) return;
  const [minX, minY, maxX, maxY] = box;
  const sides = [minX, minY, width - maxX, height - maxY];
  const at = placeOf(...nearestPlace(sides.indexOf(least), [minX, minY, maxX, maxY], width, height));
  if (over) {
    found.add({
      kind: 'outside',
      severity: 'stop',
      where,
      says: `${name} reaches ${length(-least)} over the outline of the chip, with its width.`,
      do: `Move it ${length(-least)} inward, or make the chip larger.`,
      at,
      value: -least / METRE,
      threshold: 0,
      ...larger(chip, sides, edge && !open ? edge.number : 0),
      off: -least,
    });
    return;
  }
  found.add({
    kind: 'edge',
    severity: 'warn',
    where,
    says: `${name} lies ${length(Math.max(0, least))} from the edge of the chip; ${rules!.name} wants ${length(edge!.number)} (${edge!.source}).`,
    do: `Move it ${length(edge!.number - least)} inward, or make the chip larger.`,
    at,
    value: Math.max(0, least) / METRE,
    threshold: edge!.number / METRE,
    ...larger(chip, sides, edge!.number),
    off: edge!.number / Math.max(1, least),
  });
}

/** The edit that makes the chip larger to its right and top, where it is there alone that room is wanting. */
export function larger(
  { outline }: Chip,
  [left, bottom, right, top]: readonly number[],
  room: number,
): Pick<Finding, 'remedy'> {
  if (left! < room || bottom! < room) return {};
  const wide = outline.width + Math.ceil(Math.max(0, room - right!));
  const high = outline.height + Math.ceil(Math.max(0, room - top!));
  return {
    remedy: {
      label: `make the chip ${length(wide)} by ${length(high)}`,
      changes: [{ kind: 'set', key: 'outline', value: { width: wide, height: high } }],
    },
  };
}

function nearestPlace(side: number, [a, b, c, d]: Box, width: number, height: number): [number, number] {
  const [x, y] = [(a + c) / 2, (b + d) / 2];
  if (side === 0) return [0, y];
  if (side === 1) return [x, 0];
  return side === 2 ? [width, y] : [x, height];
}
