import type { FlowNet, NetOrder, NetPort } from './flow-net.ts';

/** Figures of every edge that are gathered along paths; Infinity where one is not defined. */
export interface EdgeFigures {
  /** Added up, mean over all paths by their flow. */
  readonly mean: readonly Float64Array[];
  /** Added up along the path that carries most. */
  readonly main: readonly Float64Array[];
  /** Added up, largest and least over the paths that take no branch below a hundredth of its node. */
  readonly most: readonly Float64Array[];
  readonly least: readonly Float64Array[];
  /** Largest on any path. */
  readonly peak: readonly Float64Array[];
}

/** All that goes from one inlet to one outlet. */
export interface Route {
  readonly from: NetPort;
  readonly to: NetPort;
  /** Of what enters at the inlet. */
  readonly share: number;
  /** Of this route's flow, on the path that carries most. */
  readonly mainShare: number;
  /** In the order of the figures asked for. */
  readonly mean: Float64Array;
  readonly main: Float64Array;
  readonly most: Float64Array;
  readonly least: Float64Array;
  readonly peak: Float64Array;
  /** Edge of each peak; −1 where there is none. */
  readonly peakEdge: Int32Array;
}

/** Branches that take less than this share of their node's flow are left out of largest and least sums. */
const FOLLOWED = 0.01;

interface Workspace {
  readonly share: Float64Array;
  readonly best: Float64Array;
  readonly mainEdge: Int32Array;
  /** Per figure, per node. */
  readonly mean: readonly Float64Array[];
  readonly main: readonly Float64Array[];
  readonly most: readonly Float64Array[];
  readonly least: readonly Float64Array[];
  /** What `most` and `least` come to along the path that carries most. */
  readonly mainMost: readonly Float64Array[];
  readonly mainLeast: readonly Float64Array[];
  readonly peak: readonly Float64Array[];
  readonly peakEdge: readonly Int32Array[];
  readonly seen: Uint8Array;
}

function workspaceFor(nodes: number, figures: EdgeFigures): Workspace {
  const arrays = (list: readonly unknown[]): Float64Array[] => list.map(() => new Float64Array(nodes));
  return {
    share: new Float64Array(nodes),
    best: new Float64Array(nodes),
    mainEdge: new Int32Array(nodes),
    mean: arrays(figures.mean),
    main: arrays(figures.main),
    most: arrays(figures.most),
    least: arrays(figures.least),
    mainMost: arrays(figures.most),
    mainLeast: arrays(figures.least),
    peak: arrays(figures.peak),
    peakEdge: figures.peak.map(() => new Int32Array(nodes)),
    seen: new Uint8Array(nodes),
  };
}

/** As `Float64Array.from`, which takes several times as long on lists as short as these. */
function picked(
  list: readonly Float64Array[],
  value: (values: Float64Array, k: number) => number,
): Float64Array {
  const out = new Float64Array(list.length);
  for (let k = 0; k < list.length; k += 1) out[k] = value(list[k], k);
  return out;
}

/** Follows the flow of one inlet after another through a network. */
export class RouteFinder {
  readonly #net: FlowNet;
  readonly #order: NetOrder;
  readonly #figures: EdgeFigures;
  readonly #work: Workspace;
  readonly #outletsAt = new Map<number, NetPort[]>();

  constructor(net: FlowNet, order: NetOrder, figures: EdgeFigures) {
    this.#net = net;
    this.#order = order;
    this.#figures = figures;
    this.#work = workspaceFor(net.nodes, figures);
    for (const outlet of net.outlets) {
      const there = this.#outletsAt.get(outlet.node);
      if (there) there.push(outlet);
      else this.#outletsAt.set(outlet.node, [outlet]);
    }
  }

  /** The routes of one inlet; the work grows with what its flow reaches. */
  from(inlet: NetPort): Route[] {
    const reached = this.#reach(inlet.node);
    this.#follow(inlet.node, reached);
    const routes: Route[] = [];
    const { share, best, mean, main, most, least, mainMost, mainLeast, peak, peakEdge } = this.#work;
    for (const node of reached) {
      for (const to of this.#outletsAt.get(node) ?? []) {
        const part = to.flow / this.#order.out[node];
        if (!(share[node] * part > 0)) continue;
        const at = (list: readonly Float64Array[]): Float64Array => picked(list, (values) => values[node]);
        routes.push({
          from: inlet,
          to,
          share: share[node] * part,
          mainShare: best[node] / share[node],
          mean: picked(mean, (values) => values[node] / share[node]),
          main: at(main),
          most: picked(most, (values, k) => Math.max(values[node], mainMost[k][node])),
          least: picked(least, (values, k) => Math.min(values[node], mainLeast[k][node])),
          peak: at(peak),
          peakEdge: Int32Array.from(peakEdge, (values) => values[node]),
        });
      }
    }
    return routes;
  }

  /** Edges of the path that carries most, from the inlet that was followed last. */
  mainPath(to: NetPort): number[] {
    const path: number[] = [];
    for (let v = to.node; this.#work.mainEdge[v] >= 0; v = this.#net.tail[path[path.length - 1]]) {
      path.push(this.#work.mainEdge[v]);
    }
    return path.reverse();
  }

  /** Nodes that an inlet's flow reaches, in the order of the flow. */
  #reach(node: number): number[] {
    const { start, edge, rank, against } = this.#order;
    const { seen } = this.#work;
    const reached = [node];
    seen[node] = 1;
    for (let i = 0; i < reached.length; i += 1) {
      for (let k = start[reached[i]]; k < start[reached[i] + 1]; k += 1) {
        const next = this.#net.head[edge[k]];
        if (against[edge[k]] === 1 || seen[next] === 1) continue;
        seen[next] = 1;
        reached.push(next);
      }
    }
    for (const v of reached) seen[v] = 0;
    return reached.sort((a, b) => rank[a] - rank[b]);
  }

  #follow(origin: number, reached: readonly number[]): void {
    const { start, edge, out, against } = this.#order;
    const { head, flow } = this.#net;
    const figures = this.#figures;
    const work = this.#work;
    const { share, best, mainEdge, mean, main, most, least, mainMost, mainLeast, peak, peakEdge } = work;
    for (const v of reached) {
      share[v] = 0;
      best[v] = 0;
      mainEdge[v] = -1;
      for (const values of mean) values[v] = 0;
      for (const values of most) values[v] = Number.NEGATIVE_INFINITY;
      for (const values of least) values[v] = Number.POSITIVE_INFINITY;
      for (const values of peak) values[v] = Number.NEGATIVE_INFINITY;
      for (const values of peakEdge) values[v] = -1;
    }
    share[origin] = 1;
    best[origin] = 1;
    for (const list of [main, most, least, mainMost, mainLeast])
      for (const values of list) values[origin] = 0;
    for (const v of reached) {
      for (let k = start[v]; k < start[v + 1]; k += 1) {
        const e = edge[k];
        if (against[e] === 1) continue;
        const w = head[e];
        const part = flow[e] / out[v];
        const carried = share[v] * part;
        if (!(carried > 0)) continue;
        share[w] += carried;
        for (let i = 0; i < mean.length; i += 1) {
          mean[i][w] += part * mean[i][v] + carried * figures.mean[i][e];
        }
        for (let i = 0; i < peak.length; i += 1) {
          const here = figures.peak[i][e];
          const own = here > peak[i][v];
          const value = own ? here : peak[i][v];
          if (value > peak[i][w]) {
            peak[i][w] = value;
            peakEdge[i][w] = own ? e : peakEdge[i][v];
          }
        }
        if (part >= FOLLOWED) {
          for (let i = 0; i < most.length; i += 1) {
            // Nowhere followed so far: not to be added to, least of all what is not defined.
            if (most[i][v] >= 0) most[i][w] = Math.max(most[i][w], most[i][v] + figures.most[i][e]);
          }
          for (let i = 0; i < least.length; i += 1) {
            least[i][w] = Math.min(least[i][w], least[i][v] + figures.least[i][e]);
          }
        }
        if (best[v] * part <= best[w]) continue;
        best[w] = best[v] * part;
        mainEdge[w] = e;
        for (let i = 0; i < main.length; i += 1) main[i][w] = main[i][v] + figures.main[i][e];
        for (let i = 0; i < most.length; i += 1) mainMost[i][w] = mainMost[i][v] + figures.most[i][e];
        for (let i = 0; i < least.length; i += 1) mainLeast[i][w] = mainLeast[i][v] + figures.least[i][e];
      }
    }
  }
}
