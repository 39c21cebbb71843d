/**
 * What joins what while the drawing is read: nodes (crossings, chambers, holes, ports) and the marks
 * they leave on channels, as an interval of the distance along. Nodes found to be one place are united.
 */
export class Links {
  /** Union-find over nodes. */
  readonly parent: number[] = [];
  /** Smallest and largest half width met at the node, nm. */
  readonly slim: number[] = [];
  readonly stout: number[] = [];
  /** Sum of the places of the node's joins, and how many. */
  readonly x: number[] = [];
  readonly y: number[] = [];
  readonly weight: number[] = [];
  /** Per mark: channel, interval of the distance along, the part of it that pieces are measured from, node. */
  readonly channel: number[] = [];
  readonly low: number[] = [];
  readonly high: number[] = [];
  readonly coreLow: number[] = [];
  readonly coreHigh: number[] = [];
  readonly node: number[] = [];
  /** Channels taken on beyond their drawn ends: where to, and how far, nm. */
  readonly head = new Map<number, Extension>();
  readonly tail = new Map<number, Extension>();

  addNode(x: number, y: number): number {
    const id = this.parent.length;
    this.parent.push(id);
    this.slim.push(Infinity);
    this.stout.push(0);
    this.x.push(x);
    this.y.push(y);
    this.weight.push(1);
    return id;
  }

  /** A mark whose pieces start at its edges, or (core given) at a place within, trimmed to its edges. */
  addMark(node: number, channel: number, low: number, high: number, half: number, core?: number): void {
    this.channel.push(channel);
    this.low.push(low);
    this.high.push(high);
    this.coreLow.push(core ?? low);
    this.coreHigh.push(core ?? high);
    this.node.push(node);
    if (half < this.slim[node]!) this.slim[node] = half;
    if (half > this.stout[node]!) this.stout[node] = half;
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

export interface Extension {
  readonly x: number;
  readonly y: number;
  readonly length: number;
}
