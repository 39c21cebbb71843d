import type { Edge, Shape } from '../mesh/mesh.ts';
import type { Chip, Point } from './chip.ts';
import { type Curve, curve, pointAt } from './geometry/curve.ts';
import { filletLoop, type Reduced } from './geometry/fillet.ts';
import { cornerPatch, discPatch, type Patch, polygonPatch, stripPatch, type Way } from './geometry/patch.ts';
import { unite } from './geometry/union.ts';
import type { Graph } from './graph.ts';
import { siteCorners } from './plan-corners.ts';
import { loneOutline } from './plan-lone.ts';
import { unitedInParts } from './plan-parts.ts';
import { type Drawing, drawingOf } from './read-graph-drawing.ts';

/** A body of the plan; lengths in nm, tags label its edges (0 is wall). */
export type PlanBody =
  /** What a channel covers between two distances along it, cut square at both. */
  | {
      readonly kind: 'strip';
      readonly channel: number;
      readonly from: number;
      readonly to: number;
      readonly tagFrom: number;
      readonly tagTo: number;
    }
  | { readonly kind: 'chamber'; readonly chamber: number; readonly tag: number }
  | {
      readonly kind: 'disc';
      readonly x: number;
      readonly y: number;
      readonly radius: number;
      readonly tag: number;
    }
  /** The outer corner where one strip ends on another. */
  | {
      readonly kind: 'corner';
      readonly x: number;
      readonly y: number;
      readonly into: Way;
      readonly out: Way;
    };

export interface PlanShape {
  /** One per connected part: outer boundary counter-clockwise, then holes clockwise; nm. */
  readonly shapes: readonly Shape[];
  /** Corners whose fillet had to be smaller than asked. */
  readonly reduced: readonly Reduced[];
}

/**
 * The plan shape, the one source for cells, masks and the screen: the union of `bodies` less `minus` as
 * lines and true arcs, with re-entrant corners between walls rounded to `fillet` (0: left sharp).
 */
export function planShape(
  drawing: Drawing,
  bodies: readonly PlanBody[],
  fillet: number,
  minus: readonly PlanBody[] = [],
): PlanShape {
  const patches: Patch[] = [];
  for (const b of bodies) addPatches(drawing, b, patches);
  const less: Patch[] = [];
  for (const b of minus) addPatches(drawing, b, less);
  const reduced: Reduced[] = [];
  const shapes = unite(patches, less).map((shape) => shape.map((loop) => filletLoop(loop, fillet, reduced)));
  return { shapes, reduced };
}

function addPatches(drawing: Drawing, b: PlanBody, patches: Patch[]): void {
  if (b.kind === 'disc') patches.push(discPatch(b.x, b.y, b.radius, b.tag));
  else if (b.kind === 'chamber') {
    patches.push(polygonPatch(drawing.chip.chambers[b.chamber]!.outline, b.tag));
  } else if (b.kind === 'corner') {
    const corner = cornerPatch(b.x, b.y, b.into, b.out);
    if (corner) patches.push(corner);
  } else addStrips(drawing, b, patches);
}

/** A channel's strips, element by element, with the outer corners at its mitred vertices. */
function addStrips(drawing: Drawing, b: PlanBody & { kind: 'strip' }, patches: Patch[]): void {
  const { elements } = drawing;
  const total = elements.total(b.channel);
  const from = Math.max(0, b.from);
  const to = Math.min(total, b.to);
  const last = elements.first[b.channel + 1]! - 1;
  for (let id = drawing.elementAt(b.channel, from); id <= last; id++) {
    const e = elements.at(id);
    const low = Math.max(e.s0, from);
    const high = Math.min(e.s1, to);
    if (high <= low) {
      if (e.s0 >= to) break;
      continue;
    }
    const starts = low === from;
    const ends = high === to;
    patches.push(
      stripPatch({
        element: e,
        from: low,
        to: high,
        tagFrom: starts ? b.tagFrom : smooth(e.turn0) ? undefined : 0,
        tagTo: ends ? b.tagTo : smooth(e.turn1) ? undefined : 0,
      }),
    );
    if (ends) break;
    if (smooth(e.turn1)) continue;
    const next = elements.curve(id + 1);
    const into = { ux: e.curve.ux, uy: e.curve.uy, half: e.h1 };
    const corner = cornerPatch(e.curve.x1, e.curve.y1, into, { ux: next.ux, uy: next.uy, half: e.h1 });
    if (corner) patches.push(corner);
  }
}

function smooth(turn: number): boolean {
  return Math.abs(turn) < 1e-9;
}

export interface PlanPolygon {
  /** Number of the cavity in Graph.cavity. */
  readonly cavity: number;
  /** Counter-clockwise, whole nm, not closed by repetition. */
  readonly outer: readonly Point[];
  /** Clockwise. */
  readonly holes: readonly (readonly Point[])[];
}

/** One connected part of a layer's fluid, as lines and true arcs. */
export interface PlanCavity {
  /** Number of the cavity in Graph.cavity. */
  readonly cavity: number;
  /** Outer boundary counter-clockwise, then holes clockwise; nm. */
  readonly shape: Shape;
}

export interface CavityOptions {
  /** Round re-entrant corners as fabrication does; a mask is drawn sharp. */
  readonly fillets: boolean;
  /** Whether the holes of ports and vias count as fluid. */
  readonly holes: boolean;
}

export interface PolygonOptions extends CavityOptions {
  /** Furthest that a chord may lie off its arc, nm. */
  readonly chordError: number;
}

/** The fluid of one layer as polygons, cavity by cavity. */
export function planPolygons(
  chip: Chip,
  graph: Graph,
  layer: string,
  options: PolygonOptions,
): PlanPolygon[] {
  return planCavities(chip, graph, layer, options).map(({ cavity, shape }) => {
    const [outer, ...holes] = shape.map((loop) => flatten(loop, options.chordError));
    return { cavity, outer: outer!, holes };
  });
}

/** The fluid of one layer with its arcs, cavity by cavity. */
export function planCavities(chip: Chip, graph: Graph, layer: string, options: CavityOptions): PlanCavity[] {
  const drawing = drawingOf(chip);
  const byCavity = new Map<number, PlanBody[]>();
  const add = (cavity: number, body: PlanBody) => {
    const list = byCavity.get(cavity);
    if (list) list.push(body);
    else byCavity.set(cavity, [body]);
  };
  const chambers = new Map(chip.chambers.map((c, i) => [c.id, i]));
  const vias = new Map(chip.vias.map((v) => [v.id, v]));
  const ports = new Map(chip.ports.map((p) => [p.id, p]));
  const layerIndex = chip.layers.findIndex((l) => l.id === layer);
  for (let c = 0; c < chip.channels.length; c++) {
    if (drawing.layerOf[c] !== layerIndex) continue;
    const to = drawing.elements.total(c);
    add(graph.channelCavity[c]!, { kind: 'strip', channel: c, from: 0, to, tagFrom: 0, tagTo: 0 });
  }
  for (let s = 0; s < graph.sites.length; s++) {
    const site = graph.sites[s]!;
    const cavity = graph.cavity[s]!;
    for (const body of siteCorners(drawing, graph, s, layerIndex)) add(cavity, body);
    for (const id of site.chambers) {
      const chamber = chambers.get(id)!;
      if (chip.chambers[chamber]!.layer === layer) add(cavity, { kind: 'chamber', chamber, tag: 0 });
    }
    if (!options.holes) continue;
    for (const id of site.vias) {
      const v = vias.get(id)!;
      if (v.layers.includes(layer)) add(cavity, disc(v.at, v.diameter / 2));
    }
    for (const id of site.ports) {
      const p = ports.get(id)!;
      if (p.layer === layer && p.diameter > 0) add(cavity, disc(p.at, p.diameter / 2));
    }
  }
  const fillet = options.fillets ? chip.layers[layerIndex]!.fillet : 0;
  const cavities: PlanCavity[] = [];
  for (const [cavity, bodies] of [...byCavity].sort((a, b) => a[0] - b[0])) {
    // a cut would shorten the edges that fillets are fitted to
    const whole =
      fillet === 0 ? unitedInParts(drawing, bodies, (some) => united(drawing, some, 0)) : undefined;
    const shapes = whole ? [whole] : united(drawing, bodies, fillet);
    for (const shape of shapes) cavities.push({ cavity, shape });
  }
  return cavities;
}

function united(drawing: Drawing, bodies: readonly PlanBody[], fillet: number): readonly Shape[] {
  const [only] = bodies;
  const lone = bodies.length === 1 && only!.kind === 'strip' && loneOutline(drawing, only);
  return lone ? [[lone]] : planShape(drawing, bodies, fillet).shapes;
}

function disc(at: Point, radius: number): PlanBody {
  return { kind: 'disc', x: at[0], y: at[1], radius, tag: 0 };
}

/** How many equal chords of an arc lie within `error` of it. */
export function chordsOf(c: Curve, error: number): number {
  const radius = Math.abs(1 / c.curvature);
  const step = 2 * Math.acos(Math.max(-1, 1 - error / radius));
  return Math.max(1, Math.ceil((c.length / radius / step) * (1 - 1e-9)));
}

/** A loop as whole nanometres, arcs cut to chords no further than `error` from them. */
export function flatten(loop: readonly Edge[], error: number): Point[] {
  const points: Point[] = [];
  const push = (x: number, y: number) => {
    const p: Point = [Math.round(x), Math.round(y)];
    const last = points[points.length - 1];
    if (!last || last[0] !== p[0] || last[1] !== p[1]) points.push(p);
  };
  for (let k = 0; k < loop.length; k++) {
    const e = loop[k]!;
    const next = loop[(k + 1) % loop.length]!;
    push(e.x, e.y);
    if (e.bulge === 0) continue;
    const c = curve(e.x, e.y, next.x, next.y, e.bulge);
    const count = chordsOf(c, error);
    for (let i = 1; i < count; i++) push(...pointAt(c, (c.length * i) / count));
  }
  const first = points[0]!;
  const last = points[points.length - 1]!;
  if (points.length > 1 && first[0] === last[0] && first[1] === last[1]) points.pop();
  return points;
}
