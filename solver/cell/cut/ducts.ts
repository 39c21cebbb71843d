import type { Chip } from '../../chip/chip.ts';
import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Graph } from '../../chip/graph.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import type { Mouth } from './assemble.ts';
import type { Hole } from './sources.ts';
import type { Span } from './spans.ts';
import type { DuctSpec } from './spec.ts';
import { widthAt } from './width.ts';

/** Numbers the places at one pressure: sites outside cells, cuts, holes inside cells. */
export class Nodes {
  count = 0;
  readonly #graph: Graph;
  readonly #site: Int32Array;
  readonly #buried: Uint8Array;
  /** Of each channel, by whole picometres along it. */
  readonly #cut = new Map<number, Map<number, number>>();
  readonly #hole = new Map<string, number>();

  constructor(graph: Graph) {
    this.#graph = graph;
    this.#site = new Int32Array(graph.sites.length).fill(-1);
    this.#buried = new Uint8Array(graph.sites.length);
  }

  /** The site lies inside a cell: no node of its own, unless it is the rim of its hole. */
  bury(site: number): void {
    const { kind } = this.#graph.sites[site]!;
    if (kind !== 'port' && kind !== 'via') this.#buried[site] = 1;
  }

  atSite(site: number): number {
    if (this.#site[site]! < 0) this.#site[site] = this.count++;
    return this.#site[site]!;
  }

  atCut(channel: number, s: number): number {
    // whole picometres: the same cut reckoned from both sides
    let cuts = this.#cut.get(channel);
    if (!cuts) {
      cuts = new Map();
      this.#cut.set(channel, cuts);
    }
    return this.#named(cuts, Math.round(s * 1000));
  }

  atHole(hole: Pick<Hole, 'x' | 'y' | 'site'>): number {
    if (!this.#buried[hole.site]) return this.atSite(hole.site);
    return this.#named(this.#hole, `${hole.site} ${hole.x} ${hole.y}`);
  }

  atMouth(mouth: Mouth): number {
    if (mouth.hole) return this.atHole(mouth.hole);
    return mouth.kind === 'end' ? this.atSite(mouth.site) : this.atCut(mouth.channel, mouth.s);
  }

  #named<K>(map: Map<K, number>, key: K): number {
    let node = map.get(key);
    if (node === undefined) {
      node = this.count++;
      map.set(key, node);
    }
    return node;
  }

  ports(chip: Chip, graph: Graph): Int32Array {
    return Int32Array.from(chip.ports, (p, i) => {
      const site = graph.portSite[i]!;
      return p.diameter > 0 ? this.atHole({ x: p.at[0], y: p.at[1], site }) : this.atSite(site);
    });
  }

  /** Node of each site, -1 where it lies inside a cell; numbers those not met yet. */
  sites(): Int32Array {
    for (let i = 0; i < this.#site.length; i++) if (!this.#buried[i]) this.atSite(i);
    return this.#site;
  }
}

/** What the cells (names by cluster) leave of every piece, in path order. */
export function layDucts(
  drawing: Drawing,
  graph: Graph,
  byChannel: readonly (readonly Span[])[],
  nameOf: ReadonlyMap<number, string>,
  nodes: Nodes,
): DuctSpec[] {
  const ducts: DuctSpec[] = [];
  let channel = -1;
  let first = 0;
  graph.pieces.forEach((p, piece) => {
    const c = p.channelIndex;
    const spans = byChannel[c]!;
    if (c !== channel) first = 0;
    channel = c;
    const end = p.stop - p.trim[1];
    let s = p.start + p.trim[0];
    let from: number | undefined;
    let fromName = graph.sites[p.from]!.name;
    const lay = (stop: number, to: () => number, toName: string) => {
      if (stop - s <= TOUCH) return;
      ducts.push({
        piece,
        from: from ?? nodes.atSite(p.from),
        to: to(),
        fromName,
        toName,
        start: s,
        stop,
        length: stop - s,
        width: [widthAt(drawing, c, s), widthAt(drawing, c, stop)],
      });
    };
    // spans behind this piece are behind all that follow
    while (first < spans.length && top(spans[first]!) <= s) first++;
    for (let k = first; k < spans.length && bottom(spans[k]!) < end; k++) {
      const span = spans[k]!;
      const name = nameOf.get(span.cluster);
      if (name === undefined) continue;
      const low = bottom(span);
      lay(Math.min(low, end), () => nodes.atCut(c, low), name);
      s = top(span);
      from = span.high.kind === 'cut' ? nodes.atCut(c, s) : undefined;
      fromName = name;
    }
    lay(end, () => nodes.atSite(p.to), graph.sites[p.to]!.name);
  });
  return ducts;
}

/** Where a span ends; an end that was taken on to another centreline lies inside the cell with all that. */
function bottom(span: Span): number {
  return span.low.kind === 'wall' ? -Infinity : span.low.s;
}

function top(span: Span): number {
  return span.high.kind === 'wall' ? Infinity : span.high.s;
}
