import type { Chip } from '../../chip/chip.ts';
import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Graph, Site } from '../../chip/graph.ts';
import { type Drawing, drawingOf } from '../../chip/read-graph-drawing.ts';
import type { Finding } from '../../problem/finding.ts';
import { assemble, type Ground, type Mouth } from './assemble.ts';
import { BEND_TURN, LARGEST, MERGE, STEP } from './bounds.ts';
import { cluster } from './clusters.ts';
import { findCores, type Hole, type Sources } from './cores.ts';
import { layDucts, Nodes } from './ducts.ts';
import { type Hold, holdsOf } from './holds.ts';
import { barriersOf, laySpans, type Span } from './spans.ts';
import type { CellFace, CellKind, CellSpec, Cut, CutOptions } from './spec.ts';

/**
 * Where cells are: around every junction, corner, tight bend, step of width, steep taper, chamber and
 * hole, with faces far enough out that flow there is developed, closer ones merged into one cell; and the
 * ducts that are left between. What cannot be one cell is left ideal, with a finding that says why.
 */
export function cutCells(chip: Chip, graph: Graph, options: CutOptions = DEFAULTS): Cut {
  const drawing = drawingOf(chip);
  const findings: Finding[] = [];
  const found = findCores(chip, graph, drawing);
  dropPortedJoints(drawing, graph, found);
  const clusters = cluster(drawing, found, options);
  const spans = laySpans(drawing, graph, clusters, options);
  const holds = holdsOf(graph, chip.channels.length);
  const grounds = groundsOf(drawing, graph, found, clusters.of, spans.byChannel, holds);
  const drafts: Draft[] = [];
  const solved = new Set<number>();
  for (const [number, ground] of grounds) {
    const draft = draftOf(drawing, graph, found, clusters.of, number, ground);
    const pierced = spans.pierced.get(number);
    let reason = '';
    if (pierced !== undefined) {
      const id = graph.sites[pierced]!.ports[0];
      reason = `port ${id} sits in its midst without a hole; give port ${id} a diameter`;
    } else if (clusters.size[number]! > options.largest) {
      reason = `it is about ${Math.round(clusters.size[number]!)} channel widths in size, above ${options.largest}; draw its parts further apart`;
    } else {
      const parts = assemble(drawing, graph, ground, draft.origin);
      if (parts) draft.parts.push(...parts);
      else reason = 'another channel comes too close to one of its arms';
    }
    if (reason === '') solved.add(number);
    else findings.push(leftIdeal(draft, reason));
    drafts.push(draft);
  }
  const kept = drafts.filter((d) => solved.has(d.number));
  return finish(drawing, graph, kept, spans.byChannel, solved, findings);
}

const DEFAULTS: CutOptions = { largest: LARGEST, mergeWithin: MERGE };

/** A cell before nodes are numbered. */
interface Draft {
  readonly number: number;
  readonly ground: Ground;
  readonly origin: readonly [number, number];
  readonly kind: CellKind;
  /** Name of the first site inside; '' where there is none. */
  readonly site: string;
  readonly parts: { shape: CellSpec['shape']; mouths: readonly Mouth[] }[];
}

/** A port without a hole where two channels go straight on: a node, no joint to be reached over. */
function dropPortedJoints(drawing: Drawing, graph: Graph, found: Sources): void {
  const barriers = barriersOf(drawing, graph);
  const ported = new Set<number>();
  for (const core of found.cores) {
    if (!found.weak[core.source]) continue;
    if (barriers[core.channel]!.some((b) => b.s >= core.low - TOUCH && b.s <= core.high + TOUCH)) {
      ported.add(core.source);
    }
  }
  if (ported.size === 0) return;
  const kept = found.cores.filter((core) => !ported.has(core.source));
  found.cores.length = 0;
  found.cores.push(...kept);
}

function groundsOf(
  drawing: Drawing,
  graph: Graph,
  found: Sources,
  of: Int32Array,
  byChannel: readonly (readonly Span[])[],
  holds: readonly (readonly Hold[])[],
): Map<number, Ground> {
  interface Draftable extends Ground {
    readonly spans: Span[];
    readonly chambers: number[];
    readonly holes: Hole[];
    readonly sites: number[];
  }
  const grounds = new Map<number, Draftable>();
  byChannel.forEach((list, channel) => {
    for (const span of list) {
      const layer = drawing.layerOf[channel]!;
      const ground = grounds.get(span.cluster) ?? { layer, spans: [], chambers: [], holes: [], sites: [] };
      grounds.set(span.cluster, ground);
      ground.spans.push(span);
      for (const hold of holds[channel]!) {
        // at a port the cell ends on its site; at an end wall the site is inside
        const below = span.high.kind === 'wall' ? TOUCH : -TOUCH;
        const above = span.low.kind === 'wall' ? TOUCH : -TOUCH;
        const inside = hold.low < span.high.s + below && hold.high > span.low.s - above;
        if (inside && !ground.sites.includes(hold.site)) ground.sites.push(hold.site);
      }
    }
  });
  const siteOfChamber = new Map(graph.sites.flatMap((s, i) => s.chambers.map((id) => [id, i] as const)));
  for (const [source, chambers] of found.chambers) {
    const ground = grounds.get(of[source]!);
    if (!ground) continue;
    ground.chambers.push(...chambers);
    for (const i of chambers) {
      const site = siteOfChamber.get(drawing.chip.chambers[i]!.id)!;
      if (!ground.sites.includes(site)) ground.sites.push(site);
    }
  }
  for (const [source, holes] of found.holesOf) {
    const ground = grounds.get(of[source]!);
    for (const k of holes) {
      const hole = found.holes[k]!;
      if (ground && !ground.holes.includes(hole)) ground.holes.push(hole);
    }
  }
  for (const ground of grounds.values()) ground.sites.sort((a, b) => a - b);
  return grounds;
}

function draftOf(
  drawing: Drawing,
  graph: Graph,
  found: Sources,
  of: Int32Array,
  number: number,
  ground: Ground,
): Draft {
  const sites = ground.sites.map((i) => graph.sites[i]!).filter((s) => s.kind !== 'end');
  const first = ground.spans[0]!;
  const at = sites[0]?.at ?? drawing.placeAt(first.channel, (first.core[0] + first.core[1]) / 2);
  const steep = found.taper.some((taper, source) => taper && of[source] === number);
  return {
    number,
    ground,
    origin: [Math.round(at[0]), Math.round(at[1])],
    kind: sites.length > 0 ? siteKind(graph, sites) : steep ? 'step' : 'bend',
    site: sites[0]?.name ?? '',
    parts: [],
  };
}

function siteKind(graph: Graph, sites: readonly Site[]): CellKind {
  for (const kind of ['chamber', 'via'] as const) if (sites.some((s) => s.kind === kind)) return kind;
  if (sites.some((s) => s.kind === 'junction' && s.arms.length !== 2)) return 'junction';
  if (sites.some((s) => s.kind === 'port')) return 'port';
  const [a, b] = sites[0]!.arms.map(({ piece, end }) => {
    const p = graph.pieces[piece]!;
    const k = end === 'from' ? 0 : p.path.length - 1;
    const n = end === 'from' ? 1 : k - 1;
    const dx = p.path[n]!.x - p.path[k]!.x;
    const dy = p.path[n]!.y - p.path[k]!.y;
    return { width: p.width[end === 'from' ? 0 : 1], dx, dy };
  });
  if (!a || !b) return 'junction';
  if (Math.abs(a.width - b.width) > STEP * Math.max(a.width, b.width)) return 'step';
  const turn = Math.abs(Math.atan2(a.dx * b.dy - a.dy * b.dx, -(a.dx * b.dx + a.dy * b.dy)));
  return turn > BEND_TURN ? 'bend' : 'junction';
}

function leftIdeal(draft: Draft, reason: string): Finding {
  const [why, remedy] = reason.split('; ');
  const name = draft.site || 'a bend';
  return {
    kind: 'cell-ideal',
    severity: 'warn',
    where: draft.site,
    says: `The flow in ${name} was not solved in three dimensions, because ${why}; it counts as an ideal junction.`,
    do: remedy
      ? `${remedy[0]!.toUpperCase()}${remedy.slice(1)}.`
      : 'Leave more room between the channels there.',
    at: [draft.origin[0] * 1e-9, draft.origin[1] * 1e-9],
  };
}

function finish(
  drawing: Drawing,
  graph: Graph,
  drafts: readonly Draft[],
  byChannel: readonly (readonly Span[])[],
  solved: ReadonlySet<number>,
  findings: readonly Finding[],
): Cut {
  const nodes = new Nodes(graph);
  for (const d of drafts) for (const site of d.ground.sites) nodes.bury(site);
  const pieces = firstPieces(graph, drawing.chip.channels.length);
  const named = new Map<string, number>();
  const counts = { bend: 0, step: 0 };
  const cells: CellSpec[] = [];
  const nameOf = new Map<number, string>();
  for (const d of drafts) {
    const plain = d.kind === 'step' ? 'step' : 'bend';
    if (d.site === '') counts[plain]++;
    const base = d.site || `${plain}:${counts[plain]}`;
    nameOf.set(d.number, base);
    for (const part of d.parts) {
      const copies = (named.get(base) ?? 0) + 1;
      named.set(base, copies);
      cells.push({
        name: copies === 1 ? base : `${base}.${copies}`,
        kind: d.kind,
        sites: d.ground.sites,
        layerIndex: d.ground.layer,
        origin: d.origin,
        shape: part.shape,
        faces: part.mouths.map((mouth): CellFace => {
          const { kind, s, width, centre, direction } = mouth;
          return {
            kind,
            node: nodes.atMouth(mouth),
            piece: pieceAt(graph, pieces, mouth),
            s,
            width,
            centre,
            direction,
          };
        }),
      });
    }
  }
  const ducts = layDucts(drawing, graph, byChannel, solved, nameOf, nodes);
  return {
    cells,
    ducts,
    nodeCount: nodes.count,
    portNode: nodes.ports(drawing.chip, graph),
    siteNode: nodes.sites(),
    findings,
  };
}

/** First piece of each channel; channels + 1. */
function firstPieces(graph: Graph, channels: number): Int32Array {
  const first = new Int32Array(channels + 1);
  for (const p of graph.pieces) first[p.channelIndex + 1]!++;
  for (let c = 0; c < channels; c++) first[c + 1]! += first[c]!;
  return first;
}

/** The piece that goes on from a cut, on the side away from the cell. */
function pieceAt(graph: Graph, first: Int32Array, mouth: Mouth): number {
  if (mouth.kind === 'rim') return -1;
  const inside = (k: number) => {
    const p = graph.pieces[k]!;
    return p.start - TOUCH <= mouth.s && mouth.s <= p.stop + TOUCH;
  };
  let found = -1;
  for (let k = first[mouth.channel]!; k < first[mouth.channel + 1]!; k++) {
    if (inside(k) && (found < 0 || mouth.side > 0)) found = k;
  }
  return found;
}
