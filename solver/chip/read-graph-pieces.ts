import type { Finding } from '../problem/finding.ts';
import { um } from './geometry/centreline.ts';
import { curve, pointAt } from './geometry/curve.ts';
import { CURVATURE, S0, S1, STRIDE, UX, UY, X0, X1, Y0, Y1 } from './geometry/elements.ts';
import { TOUCH } from './geometry/tolerance.ts';
import type { Piece } from './graph.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Links } from './read-graph-links.ts';
import type { Hold } from './read-graph-sites.ts';

/** The stretches of a channel between its sites. */
export function readPieces(
  drawing: Drawing,
  links: Links,
  channel: number,
  holds: readonly Hold[],
  pieces: Piece[],
): void {
  const spec = drawing.chip.channels[channel]!;
  const total = drawing.elements.total(channel);
  const slope = (spec.width[1] - spec.width[0]) / total;
  const width = (s: number) => spec.width[0] + slope * Math.min(Math.max(s, 0), total);
  let number = 0;
  for (let k = 1; k < holds.length; k++) {
    const a = holds[k - 1]!;
    const b = holds[k]!;
    const length = b.low - a.high;
    if (length <= TOUCH) continue;
    number++;
    pieces.push({
      channel: spec.id,
      channelIndex: channel,
      number,
      from: a.site,
      to: b.site,
      layer: spec.layer,
      layerIndex: drawing.layerOf[channel]!,
      path: pathBetween(drawing, links, channel, a.coreHigh, b.coreLow),
      start: a.coreHigh,
      stop: b.coreLow,
      length,
      trim: pair(a.high - a.coreHigh, b.coreLow - b.low, UNTRIMMED),
      width: pair(width(a.high), width(b.low), spec.width),
    });
  }
}

const UNTRIMMED: readonly [number, number] = [0, 0];

/** Two numbers; the known pair where they are the same, which most pieces then share. */
function pair(first: number, last: number, known: readonly [number, number]): readonly [number, number] {
  return first === known[0] && last === known[1] ? known : [first, last];
}

/**
 * Where two channels run on the same line, the fluid sees one: of two pieces between the same sites
 * whose middles coincide, the wider stays (the earlier, if equal).
 */
export function dropDoubles(pieces: readonly Piece[], findings: Finding[]): Piece[] {
  const bySites = new Map<string, Piece[]>();
  for (const p of pieces) {
    const key = p.from < p.to ? `${p.from} ${p.to}` : `${p.to} ${p.from}`;
    const list = bySites.get(key);
    if (list) list.push(p);
    else bySites.set(key, [p]);
  }
  const dropped = new Set<Piece>();
  for (const list of bySites.values()) {
    for (let i = 1; i < list.length; i++) {
      for (let j = 0; j < i; j++) {
        const p = list[j]!;
        const q = list[i]!;
        if (dropped.has(p) || dropped.has(q) || !coincide(p, q)) continue;
        const [keep, drop] = q.width[0] + q.width[1] > p.width[0] + p.width[1] ? [q, p] : [p, q];
        dropped.add(drop);
        const { x, y } = drop.path[0]!;
        findings.push({
          kind: 'same-line',
          severity: 'warn',
          where: drop.channel,
          says: `${drop.channel} runs on the same line as ${keep.channel} over ${um(drop.length)}; the fluid sees one channel there, counted as ${keep.channel}.`,
          do: `Take that stretch out of ${drop.channel}.`,
          at: [x * 1e-9, y * 1e-9],
        });
      }
    }
  }
  return dropped.size === 0 ? [...pieces] : renumber(pieces.filter((p) => !dropped.has(p)));
}

function coincide(p: Piece, q: Piece): boolean {
  if (Math.abs(p.length - q.length) > 2 * TOUCH) return false;
  const [px, py] = middle(p);
  const [qx, qy] = middle(q);
  return Math.hypot(px - qx, py - qy) <= 2 * TOUCH;
}

function middle(p: Piece): [number, number] {
  let left = (p.stop - p.start) / 2;
  for (let i = 1; i < p.path.length; i++) {
    const a = p.path[i - 1]!;
    const b = p.path[i]!;
    const c = curve(a.x, a.y, b.x, b.y, a.bulge);
    if (left <= c.length) return pointAt(c, left);
    left -= c.length;
  }
  const last = p.path[p.path.length - 1]!;
  return [last.x, last.y];
}

function renumber(pieces: readonly Piece[]): Piece[] {
  let channel = -1;
  let number = 0;
  return pieces.map((p) => {
    number = p.channelIndex === channel ? number + 1 : 1;
    channel = p.channelIndex;
    return p.number === number ? p : { ...p, number };
  });
}

interface Vertex {
  x: number;
  y: number;
  bulge: number;
}

/** The same within one straight element, which most pieces are: a list that grows takes four times the room of two. */
function withinOne(
  drawing: Drawing,
  channel: number,
  from: number,
  to: number,
): readonly Vertex[] | undefined {
  const { elements } = drawing;
  if (from < 0 || to <= from || to > elements.total(channel)) return undefined;
  const { data: d, first } = elements;
  const k = (from === 0 ? first[channel]! : drawing.elementAt(channel, from)) * STRIDE;
  const s0 = d[k + S0]!;
  const s1 = d[k + S1]!;
  if (d[k + CURVATURE] !== 0 || from < s0 || from >= s1 || to > s1) return undefined;
  const ux = d[k + UX]!;
  const uy = d[k + UY]!;
  const x0 = d[k + X0]!;
  const y0 = d[k + Y0]!;
  return [
    from === s0
      ? { x: x0, y: y0, bulge: 0 }
      : { x: x0 + ux * (from - s0), y: y0 + uy * (from - s0), bulge: 0 },
    to === s1
      ? { x: d[k + X1]!, y: d[k + Y1]!, bulge: 0 }
      : { x: x0 + ux * (to - s0), y: y0 + uy * (to - s0), bulge: 0 },
  ];
}

/** Centreline of a channel between two distances along it, the added ends included. */
function pathBetween(
  drawing: Drawing,
  links: Links,
  channel: number,
  from: number,
  to: number,
): readonly Vertex[] {
  const { elements } = drawing;
  const { data: d, first } = elements;
  const straight = withinOne(drawing, channel, from, to);
  if (straight) return straight;
  const path: Vertex[] = [];
  if (from < 0) {
    const { x, y } = links.head.get(channel)!;
    path.push({ x, y, bulge: 0 });
  }
  const last = first[channel + 1]! - 1;
  let endX = 0;
  let endY = 0;
  for (let id = from <= 0 ? first[channel]! : drawing.elementAt(channel, from); id <= last; id++) {
    const k = id * STRIDE;
    const s0 = d[k + S0]!;
    const s1 = d[k + S1]!;
    if (s0 >= to) break;
    const low = Math.max(from, s0);
    const high = Math.min(to, s1);
    if (high <= low) continue;
    const curvature = d[k + CURVATURE]!;
    if (curvature !== 0) {
      const c = elements.curve(id);
      const [x, y] = low === s0 ? [c.x0, c.y0] : pointAt(c, low - s0);
      const whole = low === s0 && high === s1;
      path.push({ x, y, bulge: whole ? c.bulge : Math.tan((curvature * (high - low)) / 4) });
      [endX, endY] = high === s1 ? [c.x1, c.y1] : pointAt(c, high - s0);
      continue;
    }
    const ux = d[k + UX]!;
    const uy = d[k + UY]!;
    const x0 = d[k + X0]!;
    const y0 = d[k + Y0]!;
    path.push(
      low === s0
        ? { x: x0, y: y0, bulge: 0 }
        : { x: x0 + ux * (low - s0), y: y0 + uy * (low - s0), bulge: 0 },
    );
    endX = high === s1 ? d[k + X1]! : x0 + ux * (high - s0);
    endY = high === s1 ? d[k + Y1]! : y0 + uy * (high - s0);
  }
  const total = elements.total(channel);
  // a piece may lie wholly in an added length, which starts or ends at the drawn end
  if (to <= 0)
    path.push({ x: d[first[channel]! * STRIDE + X0]!, y: d[first[channel]! * STRIDE + Y0]!, bulge: 0 });
  else if (from >= total) path.push({ x: d[last * STRIDE + X1]!, y: d[last * STRIDE + Y1]!, bulge: 0 });
  else path.push({ x: endX, y: endY, bulge: 0 });
  if (to > total) {
    const { x, y } = links.tail.get(channel)!;
    path.push({ x, y, bulge: 0 });
  }
  return path;
}
