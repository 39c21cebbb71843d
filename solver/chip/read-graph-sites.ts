import type { Chip, Point } from './chip.ts';
import { centroid } from './geometry/area.ts';
import { covers } from './geometry/body.ts';
import { TOUCH } from './geometry/tolerance.ts';
import type { SiteKind } from './graph.ts';
import type { Places } from './read-graph-areas.ts';
import type { Drawing } from './read-graph-drawing.ts';
import type { Links } from './read-graph-links.ts';

/** A stretch of one channel that belongs to one site. */
export interface Hold {
  readonly site: number;
  low: number;
  high: number;
  coreLow: number;
  coreHigh: number;
}

export interface SiteDraft {
  readonly name: string;
  readonly kind: SiteKind;
  readonly at: Point;
  layers: readonly string[];
  readonly chambers: readonly string[];
  readonly ports: readonly string[];
  readonly vias: readonly string[];
  arms: { readonly piece: number; readonly end: 'from' | 'to' }[];
}

/** Most sites have none: they share it. */
const NONE: readonly string[] = [];
/** Until the pieces are known. */
const NO_ARMS: SiteDraft['arms'] = [];

/** Marks of each channel in order of distance: `order` lists mark numbers, channel c from start[c] to start[c+1]. */
interface Ordered {
  readonly start: Int32Array;
  readonly order: Int32Array;
}

function orderMarks(links: Links, channels: number): Ordered {
  const count = links.marks;
  const start = new Int32Array(channels + 1);
  for (let m = 0; m < count; m++) start[links.channel[m]! + 1]!++;
  for (let c = 0; c < channels; c++) start[c + 1]! += start[c]!;
  const order = new Int32Array(count);
  const fill = start.slice();
  for (let m = 0; m < count; m++) order[fill[links.channel[m]!]!++] = m;
  const { low, high } = links;
  for (let c = 0; c < channels; c++) {
    const from = start[c]!;
    const to = start[c + 1]!;
    // nearly in order already for most channels; long lists go to the library's sort
    if (to - from > 32) {
      order.subarray(from, to).sort((p, q) => low[p]! - low[q]! || high[p]! - high[q]! || p - q);
      continue;
    }
    for (let i = from + 1; i < to; i++) {
      const m = order[i]!;
      let j = i - 1;
      while (
        j >= from &&
        (low[order[j]!]! > low[m]! || (low[order[j]!] === low[m] && high[order[j]!]! > high[m]!))
      ) {
        order[j + 1] = order[j]!;
        j--;
      }
      order[j + 1] = m;
    }
  }
  return { start, order };
}

/**
 * Unites nodes whose marks on a channel are one place: closer than the tolerance, or, where the channel
 * goes on through both, closer than half the narrowest channel there, so that the mouths overlap
 * (several crossings at one place). Decided on the nodes as they stand after the first rule, so that
 * the order of channels does not matter.
 */
function uniteNeighbours(drawing: Drawing, links: Links, { start, order }: Ordered): void {
  const { node, low, high } = links;
  const near: number[] = [];
  for (let c = 0; c + 1 < start.length; c++) {
    const end = drawing.elements.total(c) - TOUCH;
    let a = order[start[c]!]!;
    for (let k = start[c]! + 1; k < start[c + 1]!; k++) {
      const b = order[k]!;
      const gap = low[b]! - high[a]!;
      if (gap <= TOUCH) links.unite(node[a]!, node[b]!);
      else if (
        low[a]! > TOUCH &&
        high[b]! < end &&
        gap <= Math.max(links.slim[node[a]!]!, links.slim[node[b]!]!)
      ) {
        near.push(a, b);
      }
      if (high[b]! > high[a]!) a = b;
    }
  }
  const slim = links.slim.slice(0, links.nodes);
  const roots = near.map((mark) => links.root(node[mark]!));
  for (let k = 0; k < near.length; k += 2) {
    const gap = low[near[k + 1]!]! - high[near[k]!]!;
    if (gap <= Math.min(slim[roots[k]!]!, slim[roots[k + 1]!]!)) links.unite(roots[k]!, roots[k + 1]!);
  }
}

/**
 * Unites nodes that are one place on some channel, then numbers the sites in drawing order. What each channel
 * holds goes to `take`, channel by channel: kept for all of them it would be most of what a large drawing is.
 */
export function readSites(
  drawing: Drawing,
  links: Links,
  places: Places,
  take: (channel: number, holds: readonly Hold[]) => void,
): { sites: SiteDraft[]; portSite: Int32Array } {
  const { chip, elements } = drawing;
  const channels = chip.channels.length;
  const { start, order } = orderMarks(links, channels);
  uniteNeighbours(drawing, links, { start, order });
  const labels = new Labels(chip, links, places);
  for (let c = 0; c < channels; c++) {
    const length = elements.total(c);
    const list: Hold[] = [];
    const from = links.head.has(c) ? -links.head.get(c)!.length : 0;
    const to = length + (links.tail.get(c)?.length ?? 0);
    if (start[c] === start[c + 1]) list.push(labels.endHold(drawing, c, false));
    for (let k = start[c]!; k < start[c + 1]!; k++) {
      const m = order[k]!;
      const root = links.root(links.node[m]!);
      const site = labels.site(root, chip.channels[c]!.layer);
      const last = list[list.length - 1];
      const gap = last ? links.low[m]! - last.high : Infinity;
      if (last && last.site === site && gap <= Math.max(TOUCH, links.stout[root]!)) {
        last.high = Math.max(last.high, links.high[m]!);
        last.coreLow = Math.min(last.coreLow, links.coreLow(m));
        last.coreHigh = Math.max(last.coreHigh, links.coreHigh(m));
        continue;
      }
      const hold = {
        site,
        low: links.low[m]!,
        high: links.high[m]!,
        coreLow: links.coreLow(m),
        coreHigh: links.coreHigh(m),
      };
      if (!last && hold.low > from + TOUCH && !stub(drawing, links, order, start, c, root, from, hold.low)) {
        list.push(labels.endHold(drawing, c, false));
      }
      list.push(hold);
    }
    const last = list[list.length - 1]!;
    const lastMark = start[c + 1]! - 1;
    const root = lastMark >= start[c]! ? links.root(links.node[order[lastMark]!]!) : -1;
    if (last.high < to - TOUCH && (root < 0 || !stub(drawing, links, order, start, c, root, to, last.high))) {
      list.push(labels.endHold(drawing, c, true));
    }
    take(c, list);
  }
  labels.rest();
  const portSite = Int32Array.from(places.ports, (node) => labels.siteOf[links.root(node)]!);
  return { sites: labels.drafts, portSite };
}

/** An end that overshoots a crossing but stays within the other channel is no dead end. */
function stub(
  drawing: Drawing,
  links: Links,
  order: Int32Array,
  start: Int32Array,
  channel: number,
  root: number,
  end: number,
  hold: number,
): boolean {
  if (Math.abs(end - hold) > 2 * links.stout[root]!) return false;
  const { first, channel: channelOf } = drawing.elements;
  const { curve } = drawing.elements.at(end <= hold ? first[channel]! : first[channel + 1]! - 1);
  const [x, y] = end <= hold ? [curve.x0, curve.y0] : [curve.x1, curve.y1];
  for (const j of drawing.index!.search(x, y, x, y)) {
    const other = channelOf[j]!;
    if (other === channel || drawing.layerOf[other] !== drawing.layerOf[channel]) continue;
    if (!covers(drawing.body(j), x, y)) continue;
    for (let k = start[other]!; k < start[other + 1]!; k++) {
      if (links.root(links.node[order[k]!]!) === root) return true;
    }
  }
  return false;
}

function addLayer(draft: SiteDraft, layer: string): void {
  if (!draft.layers.includes(layer)) draft.layers = [...draft.layers, layer];
}

/** Names sites as they are first met, channel by channel. */
class Labels {
  readonly drafts: SiteDraft[] = [];
  /** Site of a root node, -1 where it has none yet. */
  readonly siteOf: Int32Array;
  readonly #links: Links;
  readonly #chip: Chip;
  readonly #special = new Map<number, { chambers: number[]; vias: number[]; ports: number[] }>();
  /** The list of each layer alone, which most sites share. */
  readonly #layers = new Map<string, readonly string[]>();
  #junctions = 0;
  #ends = 0;

  constructor(chip: Chip, links: Links, places: Places) {
    this.siteOf = new Int32Array(links.nodes).fill(-1);
    this.#links = links;
    this.#chip = chip;
    for (const kind of ['chambers', 'vias', 'ports'] as const) {
      places[kind].forEach((node, i) => {
        const root = links.root(node);
        const entry = this.#special.get(root) ?? { chambers: [], vias: [], ports: [] };
        this.#special.set(root, entry);
        entry[kind].push(i);
      });
    }
  }

  site(root: number, layer: string): number {
    const known = this.siteOf[root]!;
    if (known >= 0) {
      addLayer(this.drafts[known]!, layer);
      return known;
    }
    const id = this.drafts.length;
    this.siteOf[root] = id;
    const special = this.#special.get(root);
    if (special) this.drafts.push(this.#place(special));
    else {
      const n = this.#links.weight[root]!;
      this.#junctions++;
      this.drafts.push({
        name: `junction:${this.#junctions}`,
        kind: 'junction',
        at: [this.#links.x[root]! / n, this.#links.y[root]! / n],
        layers: this.#alone(layer),
        chambers: NONE,
        ports: NONE,
        vias: NONE,
        arms: NO_ARMS,
      });
    }
    addLayer(this.drafts[id]!, layer);
    return id;
  }

  #alone(layer: string): readonly string[] {
    let list = this.#layers.get(layer);
    if (!list) {
      list = [layer];
      this.#layers.set(layer, list);
    }
    return list;
  }

  #place(special: { chambers: number[]; vias: number[]; ports: number[] }): SiteDraft {
    const chip = this.#chip;
    const chambers = special.chambers.map((i) => chip.chambers[i]!);
    const vias = special.vias.map((i) => chip.vias[i]!);
    const ports = special.ports.map((i) => chip.ports[i]!);
    const layers = new Set<string>();
    for (const c of chambers) layers.add(c.layer);
    for (const v of vias) for (const l of v.layers) layers.add(l);
    for (const p of ports) layers.add(p.layer);
    const ids = {
      layers: [...layers],
      chambers: chambers.map((c) => c.id),
      vias: vias.map((v) => v.id),
      ports: ports.map((p) => p.id),
      arms: NO_ARMS,
    };
    if (chambers.length > 0) {
      const at = centroid(chambers[0]!.outline);
      return { name: `chamber:${ids.chambers[0]}`, kind: 'chamber', at, ...ids };
    }
    if (vias.length > 0) return { name: `via:${ids.vias[0]}`, kind: 'via', at: vias[0]!.at, ...ids };
    return { name: `port:${ids.ports[0]}`, kind: 'port', at: ports[0]!.at, ...ids };
  }

  endHold(drawing: Drawing, channel: number, atEnd: boolean): Hold {
    this.#ends++;
    const { elements } = drawing;
    const c = elements.curve(atEnd ? elements.first[channel + 1]! - 1 : elements.first[channel]!);
    const s = atEnd ? elements.total(channel) : 0;
    const site = this.drafts.length;
    this.drafts.push({
      name: `end:${this.#ends}`,
      kind: 'end',
      at: atEnd ? [c.x1, c.y1] : [c.x0, c.y0],
      layers: this.#alone(this.#chip.channels[channel]!.layer),
      chambers: NONE,
      ports: NONE,
      vias: NONE,
      arms: NO_ARMS,
    });
    return { site, low: s, high: s, coreLow: s, coreHigh: s };
  }

  /** Places that no channel leads to. */
  rest(): void {
    for (const [root, special] of this.#special) {
      if (this.siteOf[root]! >= 0) continue;
      this.siteOf[root] = this.drafts.length;
      this.drafts.push(this.#place(special));
    }
  }
}
