import type { CellFace, CellSpec } from '../cell/cut/spec.ts';
import type { Graph, Piece } from '../chip/graph.ts';

/** A stretch of centreline inside a solved cell, between two of its places. */
export interface InnerStretch {
  readonly piece: number;
  /** Places: faces first, in their order, then the sites inside. */
  readonly from: number;
  readonly to: number;
  /** m */
  readonly length: number;
  readonly width: readonly [number, number];
}

const NM = 1e9;
/** Distances along a channel closer than this are one, nm. */
const TOUCH = 1;

/**
 * The centrelines inside a cell, from its faces to the sites within, as a channel's width acts there. A rim is
 * the nearest site itself.
 */
export function insideOf(
  graph: Graph,
  spec: CellSpec,
): { readonly places: number; readonly stretches: readonly InnerStretch[] } {
  const place = new Map<number, number>();
  let places = spec.faces.length;
  for (const site of spec.sites) {
    place.set(site, places);
    places += 1;
  }
  const faces = new Map<number, { readonly s: number; readonly at: number }[]>();
  const stretches: InnerStretch[] = [];
  spec.faces.forEach((face, at) => {
    if (face.piece >= 0) faces.set(face.piece, [...(faces.get(face.piece) ?? []), { s: face.s, at }]);
    else if (spec.sites.length > 0) {
      stretches.push({
        piece: -1,
        from: at,
        to: place.get(nearestSite(graph, spec, face))!,
        length: 0,
        width: [0, 0],
      });
    }
  });
  const pieces = new Set(faces.keys());
  for (const site of spec.sites) for (const { piece } of graph.sites[site].arms) pieces.add(piece);
  for (const index of pieces) {
    const piece = graph.pieces[index];
    if (piece.layerIndex !== spec.layerIndex) continue;
    const [low, high] = [piece.start + piece.trim[0], piece.stop - piece.trim[1]];
    const first = place.get(piece.from);
    const last = place.get(piece.to);
    const marks = (faces.get(index) ?? []).sort((a, b) => a.s - b.s);
    if (first !== undefined) marks.unshift({ s: low, at: first });
    if (last !== undefined) marks.push({ s: high, at: last });
    // Inside and outside take turns along the piece; what begins at a site begins inside, and so does a bend.
    for (let i = 0; i + 1 < marks.length; i += 2) {
      const [a, b] = [marks[i], marks[i + 1]];
      if (a.at === b.at) continue;
      const length = Math.max(b.s - a.s, TOUCH) / NM;
      stretches.push({
        piece: index,
        from: a.at,
        to: b.at,
        length,
        width: [widthAt(piece, a.s), widthAt(piece, b.s)],
      });
    }
  }
  return { places, stretches };
}

function nearestSite(graph: Graph, { sites }: CellSpec, { centre }: CellFace): number {
  const away = (site: number): number =>
    Math.hypot(graph.sites[site].at[0] - centre[0], graph.sites[site].at[1] - centre[1]);
  return sites.reduce((best, site) => (away(site) < away(best) ? site : best));
}

/** m */
function widthAt(piece: Piece, s: number): number {
  const low = piece.start + piece.trim[0];
  const high = piece.stop - piece.trim[1];
  const share = high > low ? Math.min(1, Math.max(0, (s - low) / (high - low))) : 0;
  return (piece.width[0] + (piece.width[1] - piece.width[0]) * share) / NM;
}

/** How flows given at a cell's faces part among the centrelines inside: by their resistances, some of which may be 0. */
export interface InnerFlows {
  /** @param into m³/s into the cell at each face @returns flow of each stretch from its first to its second place */
  of(into: ArrayLike<number>): Float64Array;
}

/** Few places, often a tree: dense elimination. What does not balance is taken up at the last place of its part. */
export function innerFlows(
  places: number,
  stretches: readonly InnerStretch[],
  resistance: ArrayLike<number>,
): InnerFlows {
  let most = 0;
  for (let e = 0; e < stretches.length; e += 1) most = Math.max(most, resistance[e]);
  const conductance = stretches.map((_, e) => 1 / Math.max(resistance[e], 1e-9 * most, 1e-300));
  const n = places;
  const a = new Float64Array(n * n);
  stretches.forEach(({ from, to }, e) => {
    a[from * n + from] += conductance[e];
    a[to * n + to] += conductance[e];
    a[from * n + to] -= conductance[e];
    a[to * n + from] -= conductance[e];
  });
  const scale = conductance.reduce((sum, g) => sum + g, 0);
  const lost = new Uint8Array(n);
  // Cholesky without exchange of rows; a part's last pivot is nought, and holds its pressure at nought.
  for (let k = 0; k < n; k += 1) {
    const pivot = a[k * n + k];
    if (!(pivot > 1e-13 * scale)) {
      lost[k] = 1;
      continue;
    }
    for (let i = k + 1; i < n; i += 1) {
      const factor = a[i * n + k] / pivot;
      if (factor === 0) continue;
      for (let j = k + 1; j < n; j += 1) a[i * n + j] -= factor * a[k * n + j];
      a[i * n + k] = factor;
    }
  }
  return {
    of(into) {
      const p = new Float64Array(n);
      for (let i = 0; i < into.length; i += 1) p[i] = into[i];
      for (let k = 0; k < n; k += 1) {
        if (lost[k] === 1) continue;
        for (let i = k + 1; i < n; i += 1) p[i] -= a[i * n + k] * p[k];
      }
      for (let k = n - 1; k >= 0; k -= 1) {
        if (lost[k] === 1) {
          p[k] = 0;
          continue;
        }
        let sum = p[k];
        for (let j = k + 1; j < n; j += 1) sum -= a[k * n + j] * p[j];
        p[k] = sum / a[k * n + k];
      }
      return Float64Array.from(stretches, ({ from, to }, e) => conductance[e] * (p[from] - p[to]));
    },
  };
}
