/**
 * What joins what while the drawing is read: nodes (crossings, chambers, holes, ports) and the marks
 * they leave on channels, as an interval of the distance along. Nodes found to be one place are united.
 */
export class Links {
  nodes = 0;
  marks = 0;
  /** Per node: union-find parent. */
  parent: Int32Array;
  /** Smallest and largest half width met at the node, nm. */
  slim: Float64Array;
  stout: Float64Array;
  /** Sum of the places of the node's joins, and how many. */
  x: Float64Array;
  y: Float64Array;
  weight: Int32Array;
  /** Per mark: channel and node, and interval of the distance along. */
  channel: Int32Array;
  node: Int32Array;
  low: Float64Array;
  high: Float64Array;
  /** The place that pieces are measured from, of the few marks where that is not their own edges. */
  readonly #core = new Map<number, number>();
  /** Channels taken on beyond their drawn ends: where to, and how far, nm. */
  readonly head = new Map<number, Extension>();
  readonly tail = new Map<number, Extension>();

  /** `room` is how many nodes are expected; more find place too. */
  constructor(room: number) {
    const nodes = Math.max(room, 16);
    this.parent = new Int32Array(nodes);
    this.slim = new Float64Array(nodes);
    this.stout = new Float64Array(nodes);
    this.x = new Float64Array(nodes);
    this.y = new Float64Array(nodes);
    this.weight = new Int32Array(nodes);
    const marks = 2 * nodes;
    this.channel = new Int32Array(marks);
    this.node = new Int32Array(marks);
    this.low = new Float64Array(marks);
    this.high = new Float64Array(marks);
  }

  addNode(x: number, y: number): number {
    const id = this.nodes++;
    if (id === this.parent.length) this.#growNodes(2 * id);
    this.parent[id] = id;
    this.slim[id] = Infinity;
    this.stout[id] = 0;
    this.x[id] = x;
    this.y[id] = y;
    this.weight[id] = 1;
    return id;
  }

  /** A mark whose pieces start at its edges, or (core given) at a place within, trimmed to its edges. */
  addMark(node: number, channel: number, low: number, high: number, half: number, core?: number): void {
    const id = this.marks++;
    if (id === this.node.length) this.#growMarks(2 * id);
    this.channel[id] = channel;
    this.node[id] = node;
    this.low[id] = low;
    this.high[id] = high;
    if (core !== undefined) this.#core.set(id, core);
    if (half < this.slim[node]!) this.slim[node] = half;
    if (half > this.stout[node]!) this.stout[node] = half;
  }

  #growNodes(size: number): void {
    this.parent = longer(this.parent, new Int32Array(size));
    this.slim = longer(this.slim, new Float64Array(size));
    this.stout = longer(this.stout, new Float64Array(size));
    this.x = longer(this.x, new Float64Array(size));
    this.y = longer(this.y, new Float64Array(size));
    this.weight = longer(this.weight, new Int32Array(size));
  }

  #growMarks(size: number): void {
    this.channel = longer(this.channel, new Int32Array(size));
    this.node = longer(this.node, new Int32Array(size));
    this.low = longer(this.low, new Float64Array(size));
    this.high = longer(this.high, new Float64Array(size));
  }

  /** Where a piece that ends at the lower (or upper) edge of a mark is measured from. */
  coreLow(mark: number): number {
    return this.#core.get(mark) ?? this.low[mark]!;
  }

  coreHigh(mark: number): number {
    return this.#core.get(mark) ?? this.high[mark]!;
  }

  root(node: number): number {
    const { parent } = this;
    while (parent[node] !== node) {
      parent[node] = parent[parent[node]!]!;
      node = parent[node]!;
    }
    return node;
  }

  /** The lower number stays, so that numbering follows the drawing. */
  unite(a: number, b: number): void {
    let p = this.root(a);
    let q = this.root(b);
    if (p === q) return;
    if (q < p) [p, q] = [q, p];
    this.parent[q] = p;
    this.slim[p] = Math.min(this.slim[p]!, this.slim[q]!);
    this.stout[p] = Math.max(this.stout[p]!, this.stout[q]!);
    this.x[p]! += this.x[q]!;
    this.y[p]! += this.y[q]!;
    this.weight[p]! += this.weight[q]!;
  }
}

function longer<A extends Int32Array | Float64Array>(old: A, fresh: A): A {
  fresh.set(old);
  return fresh;
}

export interface Extension {
  readonly x: number;
  readonly y: number;
  readonly length: number;
}
