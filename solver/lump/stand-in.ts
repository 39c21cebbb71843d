import type { CellSpec, Cut } from '../cell/cut/spec.ts';
import type { Graph, Piece } from '../chip/graph.ts';
import { NANOMETRES, type Stretch } from './stretches.ts';

/** Distances along a channel closer than this are one, nm. */
const TOUCH = 1;

/**
 * The centrelines inside cells that are not solved, from their faces to the sites within, so that the
 * network is whole before (or without) them: what an ideal junction would be.
 *
 * @param open the cells to stand in for
 * @returns stretches on the nodes of the cut, and on further ones for sites that lie inside cells
 */
export function standIns(
  graph: Graph,
  cut: Cut,
  open: readonly CellSpec[],
): { readonly stretches: Stretch[]; readonly nodeCount: number } {
  const stretches: Stretch[] = [];
  let nodeCount = cut.nodeCount;
  if (open.length === 0) return { stretches, nodeCount };
  const extra = new Map<number, number>();
  const siteNode = (site: number): number => {
    if (cut.siteNode[site] >= 0) return cut.siteNode[site];
    let node = extra.get(site);
    if (node === undefined) {
      node = nodeCount;
      nodeCount += 1;
      extra.set(site, node);
    }
    return node;
  };
  // Faces by piece, as they divide it; a piece may start or end in the cell itself.
  const faces = new Map<number, { s: number; node: number; name: string }[]>();
  const insides = new Set<string>();
  for (const cell of open) {
    for (const site of cell.sites) insides.add(`${cell.layerIndex} ${site}`);
    for (const face of cell.faces) {
      if (face.piece < 0) continue;
      const list = faces.get(face.piece);
      const entry = { s: face.s, node: face.node, name: cell.name };
      if (list) list.push(entry);
      else faces.set(face.piece, [entry]);
    }
  }
  const ducts = new Map<number, { start: number; stop: number }[]>();
  for (const duct of cut.ducts) {
    const list = ducts.get(duct.piece);
    if (list) list.push(duct);
    else ducts.set(duct.piece, [duct]);
  }
  for (const [index, piece] of graph.pieces.entries()) {
    const own = (faces.get(index) ?? []).sort((a, b) => a.s - b.s);
    const low = piece.start + piece.trim[0];
    const high = piece.stop - piece.trim[1];
    const fromInside = insides.has(`${piece.layerIndex} ${piece.from}`);
    const toInside = insides.has(`${piece.layerIndex} ${piece.to}`);
    if (own.length === 0 && !(fromInside && toInside)) continue;
    const marks = [
      ...(fromInside ? [{ s: low, node: siteNode(piece.from) }] : []),
      ...own.filter(({ s }) => s > low + TOUCH && s < high - TOUCH),
      ...(toInside ? [{ s: high, node: siteNode(piece.to) }] : []),
    ];
    for (let i = 0; i + 1 < marks.length; i += 1) {
      const [a, b] = [marks[i], marks[i + 1]];
      if (a.node === b.node) continue;
      const middle = (a.s + b.s) / 2;
      if ((ducts.get(index) ?? []).some(({ start, stop }) => start < middle && middle < stop)) continue;
      stretches.push({
        piece: index,
        from: a.node,
        to: b.node,
        fromName: '',
        toName: '',
        length: Math.max(b.s - a.s, 1) / NANOMETRES,
        width: [widthAt(piece, a.s), widthAt(piece, b.s)],
        along: [a.s / NANOMETRES, b.s / NANOMETRES],
      });
    }
  }
  return { stretches, nodeCount };
}

/** m */
function widthAt(piece: Piece, s: number): number {
  const low = piece.start + piece.trim[0];
  const high = piece.stop - piece.trim[1];
  const share = high > low ? Math.min(1, Math.max(0, (s - low) / (high - low))) : 0;
  return (piece.width[0] + (piece.width[1] - piece.width[0]) * share) / NANOMETRES;
}
