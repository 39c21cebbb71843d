import type { CellSolution } from '../cell/cell.ts';
import type { CellSpec, Cut } from '../cell/cut/spec.ts';
import type { Graph } from '../chip/graph.ts';
import type { Finding } from '../problem/finding.ts';
import { standIns } from './stand-in.ts';
import { NANOMETRES, type Stretch } from './stretches.ts';

/** A cell of the drawing with what is known of it. */
export interface PlacedCell {
  readonly spec: CellSpec;
  /** null where it was not solved (yet): it then counts as ideal. */
  readonly solution: CellSolution | null;
}

/** The drawing as ducts and cells between nodes, before any resistance is known. */
export interface Layout {
  readonly nodeCount: number;
  /** What is reported, in path order within each channel. */
  readonly stretches: readonly Stretch[];
  /** Name of each stretch, by its order in its channel: "feed#1". */
  readonly names: readonly string[];
  /** What stands in for cells that are not solved: centrelines from their faces to their sites. */
  readonly inner: readonly Stretch[];
  readonly cells: readonly PlacedCell[];
  /** Node of each port, in the chip's order. */
  readonly portNode: Int32Array;
  readonly findings: readonly Finding[];
}

/**
 * Ideal junctions: every site is one node at one pressure, every piece one stretch. A piece that lies
 * wholly inside a port's hole or a chamber keeps a nanometre, so that its flow stays defined; that is
 * below the rounding of the drawing.
 */
export function idealLayout(graph: Graph): Layout {
  const stretches = graph.pieces.map(
    (piece, index): Stretch => ({
      piece: index,
      from: piece.from,
      to: piece.to,
      fromName: graph.sites[piece.from].name,
      toName: graph.sites[piece.to].name,
      length: Math.max(piece.length, 1) / NANOMETRES,
      width: [piece.width[0] / NANOMETRES, piece.width[1] / NANOMETRES],
      along: [(piece.start + piece.trim[0]) / NANOMETRES, (piece.stop - piece.trim[1]) / NANOMETRES],
    }),
  );
  return {
    nodeCount: graph.sites.length,
    stretches,
    names: namesOf(graph, stretches),
    inner: [],
    cells: [],
    portNode: graph.portSite,
    findings: [],
  };
}

/** Ducts between the faces of cells; cells that are not solved are stood in for by their centrelines. */
export function cellLayout(
  graph: Graph,
  cut: Cut,
  cells: readonly PlacedCell[],
  findings: readonly Finding[],
): Layout {
  const stretches = cut.ducts.map(
    (duct): Stretch => ({
      piece: duct.piece,
      from: duct.from,
      to: duct.to,
      fromName: duct.fromName,
      toName: duct.toName,
      length: Math.max(duct.length, 1) / NANOMETRES,
      width: [duct.width[0] / NANOMETRES, duct.width[1] / NANOMETRES],
      along: [duct.start / NANOMETRES, duct.stop / NANOMETRES],
    }),
  );
  const open = cells.filter(({ solution }) => solution === null).map(({ spec }) => spec);
  const inner = standIns(graph, cut, open);
  return {
    nodeCount: inner.nodeCount,
    stretches,
    names: namesOf(graph, stretches),
    inner: inner.stretches,
    cells,
    portNode: cut.portNode,
    findings: [...cut.findings, ...findings],
  };
}

function namesOf(graph: Graph, stretches: readonly Stretch[]): string[] {
  const count = new Map<string, number>();
  return stretches.map(({ piece }) => {
    const { channel } = graph.pieces[piece];
    const number = (count.get(channel) ?? 0) + 1;
    count.set(channel, number);
    return `${channel}#${number}`;
  });
}
