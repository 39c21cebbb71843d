import type { Chip } from '../../chip/chip.ts';
import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Graph } from '../../chip/graph.ts';
import { type Drawing, drawingOf } from '../../chip/read-graph-drawing.ts';
import type { Finding } from '../../problem/finding.ts';
import type { Mouth, Part } from './assemble.ts';
import { assembleOnce } from './assembled.ts';
import { LARGEST, MERGE } from './bounds.ts';
import { type Clusters, cluster } from './clusters.ts';
import { findCores } from './cores.ts';
import { type Draft, draftOf, leftIdeal, type NamedPart, Names } from './drafts.ts';
import { layDucts, Nodes } from './ducts.ts';
import { groundsOf } from './grounds.ts';
import { holdsOf } from './holds.ts';
import type { Sources } from './sources.ts';
import { barriersOf, laySpans, type Span, type Spans } from './spans.ts';
import type { CellFace, CellSpec, Cut, CutOptions } from './spec.ts';

const DEFAULTS: CutOptions = { largest: LARGEST, mergeWithin: MERGE, leave: new Map() };

/**
 * Where cells are: around every junction, corner, tight bend, step of width, steep taper, chamber and
 * hole, with faces far enough out that flow there is developed, closer ones merged into one cell; and the
 * ducts that are left between. What cannot be one cell is left ideal, with a finding that says why.
 */
export function cutCells(chip: Chip, graph: Graph, options: Partial<CutOptions> = {}): Cut {
  const all = { ...DEFAULTS, ...options };
  const drawing = drawingOf(chip);
  const found = findCores(chip, graph, drawing);
  dropPortedJoints(drawing, graph, found);
  const clusters = cluster(drawing, found, all);
  const spans = laySpans(drawing, graph, clusters, all);
  const holds = holdsOf(graph, chip.channels.length);
  const grounds = groundsOf(drawing, graph, found, clusters.of, spans.byChannel, holds);
  const findings: Finding[] = [];
  const names = new Names();
  const steep = new Set(found.taper.flatMap((taper, source) => (taper ? [clusters.of[source]!] : [])));
  const kept: Kept[] = [];
  for (const [number, ground] of grounds) {
    const draft = draftOf(drawing, graph, number, ground, steep.has(number), names);
    const parts = partsOf(drawing, graph, draft, clusters, spans, all);
    if (typeof parts === 'string') {
      findings.push(leftIdeal(draft, parts));
      continue;
    }
    const named = names.parts(draft, parts, graph);
    const left = named.map((p) => all.leave.get(p.name)).find((reason) => reason !== undefined);
    if (left === undefined) kept.push({ draft, parts: named });
    else findings.push(leftIdeal(draft, left));
  }
  return finish(drawing, graph, kept, spans.byChannel, findings);
}

interface Kept {
  readonly draft: Draft;
  readonly parts: readonly NamedPart[];
}

/** The cell's parts, or why it has to be left ideal. */
function partsOf(
  drawing: Drawing,
  graph: Graph,
  draft: Draft,
  clusters: Clusters,
  spans: Spans,
  { largest }: CutOptions,
): Part[] | string {
  const pierced = spans.pierced.get(draft.number);
  if (pierced !== undefined) {
    const id = graph.sites[pierced]!.ports[0];
    return `port ${id} sits in its midst without a hole; give port ${id} a diameter`;
  }
  const size = clusters.size[draft.number]!;
  if (size > largest) {
    return `it is about ${Math.round(size)} channel widths in size, above ${largest}; draw its parts further apart`;
  }
  return (
    assembleOnce(drawing, graph, draft.ground, draft.origin) ??
    'another channel comes too close to one of its arms'
  );
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

function finish(
  drawing: Drawing,
  graph: Graph,
  kept: readonly Kept[],
  byChannel: readonly (readonly Span[])[],
  findings: readonly Finding[],
): Cut {
  const nodes = new Nodes(graph);
  for (const { draft } of kept) for (const site of draft.ground.sites) nodes.bury(site);
  const pieces = firstPieces(graph, drawing.chip.channels.length);
  const cells: CellSpec[] = [];
  const nameOf = new Map<number, string>();
  for (const { draft, parts } of kept) {
    nameOf.set(draft.number, draft.name);
    for (const { name, kind, shape, mouths } of parts) {
      cells.push({
        name,
        kind,
        sites: draft.ground.sites,
        layerIndex: draft.ground.layer,
        origin: draft.origin,
        shape,
        faces: mouths.map((mouth): CellFace => {
          const { kind: face, s, width, centre, direction } = mouth;
          const piece = pieceAt(graph, pieces, mouth);
          return { kind: face, node: nodes.atMouth(mouth), piece, s, width, centre, direction };
        }),
      });
    }
  }
  const ducts = layDucts(drawing, graph, byChannel, nameOf, nodes);
  const portNode = nodes.ports(drawing.chip, graph);
  const siteNode = nodes.sites();
  return { cells, ducts, nodeCount: nodes.count, portNode, siteNode, findings };
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
  let low = first[mouth.channel]!;
  let high = first[mouth.channel + 1]! - 1;
  if (high < low) return -1;
  // the last piece that starts before the cut; on the cut itself, the one away from the cell
  const beyond = mouth.side > 0 ? TOUCH : -TOUCH;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (graph.pieces[middle]!.start <= mouth.s + beyond) low = middle;
    else high = middle - 1;
  }
  return low;
}
