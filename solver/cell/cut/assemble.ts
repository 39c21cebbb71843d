import { tangentAt } from '../../chip/geometry/curve.ts';
import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Graph } from '../../chip/graph.ts';
import { type PlanBody, planShape } from '../../chip/plan.ts';
import { siteCorners } from '../../chip/plan-corners.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import { twiceArea } from '../../mesh/check-shape.ts';
import type { Edge, Shape } from '../../mesh/mesh.ts';
import type { CellShape } from '../shape.ts';
import type { Hole } from './sources.ts';
import type { Span, SpanEnd } from './spans.ts';
import { widthAt } from './width.ts';

/** Everything that goes into one cell's ground. */
export interface Ground {
  readonly layer: number;
  readonly spans: readonly Span[];
  readonly chambers: readonly number[];
  readonly holes: readonly Hole[];
  /** Sites inside, for the outer corners of channels that end on one another. */
  readonly sites: readonly number[];
}

/** One face of a ground before nodes are known. */
export interface Mouth {
  readonly kind: 'cut' | 'end' | 'rim';
  /** Channel, distance along it, and 1 where the cell lies below the cut, -1 above. */
  readonly channel: number;
  readonly s: number;
  readonly side: 1 | -1;
  /** Site of the port or via; -1 at a cut. */
  readonly site: number;
  readonly hole: Hole | undefined;
  readonly width: number;
  readonly centre: readonly [number, number];
  readonly direction: readonly [number, number];
}

/** A connected part of a ground, ready to be solved. */
export interface Part {
  readonly shape: CellShape;
  readonly mouths: readonly Mouth[];
}

/** Faces may lose this share of their width to fillets and rounding; more, and something overlaps them. */
const WHOLE = 0.01;

/**
 * The plan shape of a ground with its faces tagged, part by part, in metres from `origin`; undefined
 * where a cut is not what it should be (its ground overlaps another's).
 */
export function assemble(
  drawing: Drawing,
  graph: Graph,
  ground: Ground,
  origin: readonly [number, number],
): Part[] | undefined {
  const layer = drawing.chip.layers[ground.layer]!;
  const mouths: Mouth[] = [];
  const tag = (mouth: Mouth | undefined): number => (mouth ? mouths.push(mouth) : 0);
  const bodies: PlanBody[] = ground.spans.map((span) => ({
    kind: 'strip',
    channel: span.channel,
    from: span.low.s,
    to: span.high.s,
    tagFrom: tag(mouthAt(drawing, span.channel, span.low, -1)),
    tagTo: tag(mouthAt(drawing, span.channel, span.high, 1)),
  }));
  for (const chamber of ground.chambers) bodies.push({ kind: 'chamber', chamber, tag: 0 });
  const covered = (channel: number, s: number) =>
    ground.spans.some((p) => p.channel === channel && p.low.s - TOUCH <= s && s <= p.high.s + TOUCH);
  for (const site of ground.sites) bodies.push(...siteCorners(drawing, graph, site, ground.layer, covered));
  const minus = ground.holes.map(
    (hole): PlanBody => ({
      kind: 'disc',
      x: hole.x,
      y: hole.y,
      radius: hole.radius,
      tag: tag(rim(hole)),
    }),
  );
  const { shapes } = planShape(drawing, bodies, layer.fillet, minus);
  const seen = new Set<number>();
  const parts: Part[] = [];
  for (const whole of shapes) {
    const shape = whole.filter((loop, l) => l === 0 || !isSliver(loop));
    const widths = faceWidths(shape);
    for (const [t, width] of widths) {
      const mouth = mouths[t - 1]!;
      if (mouth.kind === 'rim') continue;
      if (seen.has(t) || Math.abs(width - mouth.width) > WHOLE * mouth.width) return undefined;
      seen.add(t);
    }
    if (widths.size < 2) continue;
    const tags = [...widths.keys()].sort((a, b) => a - b);
    parts.push({
      shape: {
        loops: localised(shape, tags, origin),
        depth: groundDepth(drawing, ground, layer.depth) * 1e-9,
        faces: tags.length,
        profile: layer.profile,
      },
      mouths: tags.map((t) => mouths[t - 1]!),
    });
  }
  const cuts = mouths.filter((m) => m.kind !== 'rim').length;
  return seen.size === cuts ? parts : undefined;
}

/**
 * The one depth (nm) that a ground is solved at: that of its channels where they share one, their geometric mean
 * where they do not (a trust finding says so), the layer's where a chamber is part of it.
 */
function groundDepth(drawing: Drawing, { spans, chambers }: Ground, layer: number): number {
  if (chambers.length > 0 || spans.length === 0) return layer;
  const depths = spans.map(({ channel }) => drawing.chip.channels[channel]!.depth ?? layer);
  const [least, most] = [Math.min(...depths), Math.max(...depths)];
  return least === most ? least : Math.round(Math.sqrt(least * most));
}

function mouthAt(drawing: Drawing, channel: number, end: SpanEnd, side: 1 | -1): Mouth | undefined {
  if (end.kind === 'wall') return undefined;
  const id = side > 0 ? drawing.elementAt(channel, end.s) : drawing.elementAfter(channel, end.s);
  const e = drawing.elements.at(id);
  const [tx, ty] = tangentAt(e.curve, end.s - e.s0);
  return {
    kind: end.kind === 'cut' ? 'cut' : 'end',
    channel,
    s: end.s,
    side,
    site: end.kind === 'port' ? end.site : -1,
    hole: undefined,
    width: widthAt(drawing, channel, end.s),
    centre: drawing.placeAt(channel, end.s),
    direction: [side * tx, side * ty],
  };
}

function rim(hole: Hole): Mouth {
  return {
    kind: 'rim',
    channel: -1,
    s: 0,
    side: 1,
    site: hole.site,
    hole,
    width: 2 * hole.radius,
    centre: [hole.x, hole.y],
    direction: [0, 0],
  };
}

/** A gap thinner than what counts as touching, as rounding leaves it between channels that abut. */
function isSliver(loop: readonly Edge[]): boolean {
  let perimeter = 0;
  loop.forEach((e, k) => {
    const next = loop[(k + 1) % loop.length]!;
    perimeter += Math.hypot(next.x - e.x, next.y - e.y);
  });
  return Math.abs(twiceArea(loop)) <= TOUCH * perimeter;
}

/** Total length (chords) of the edges of every tag but the wall's. */
function faceWidths(shape: Shape): Map<number, number> {
  const widths = new Map<number, number>();
  for (const loop of shape) {
    loop.forEach((e, k) => {
      if (e.tag === 0) return;
      const next = loop[(k + 1) % loop.length]!;
      widths.set(e.tag, (widths.get(e.tag) ?? 0) + Math.hypot(next.x - e.x, next.y - e.y));
    });
  }
  return widths;
}

function localised(shape: Shape, tags: readonly number[], origin: readonly [number, number]): Edge[][] {
  const number = new Map(tags.map((t, k) => [t, k + 1]));
  return shape.map((loop) =>
    loop.map((e) => ({
      x: (e.x - origin[0]) / 1e9,
      y: (e.y - origin[1]) / 1e9,
      bulge: e.bulge,
      tag: number.get(e.tag) ?? 0,
    })),
  );
}
