import type { Drawing } from '../../chip/read-graph-drawing.ts';
import { decayLength, legLength, MERGE_TIGHT, NEAR_END } from './bounds.ts';
import type { Core, Sources } from './sources.ts';
import type { CutOptions } from './spec.ts';
import { widthAt } from './width.ts';

/** Cores grouped into cells-to-be, and per channel in order. */
export interface Clusters {
  /** Cluster (number of its first source) of each source; -1 where the source is not reached. */
  readonly of: Int32Array;
  /** Estimated size of each cluster in widths of channel, by cluster number. */
  readonly size: Float64Array;
  /** Cores of each channel in order of distance. */
  readonly byChannel: readonly (readonly Core[])[];
}

interface Neighbours {
  readonly a: number;
  readonly b: number;
  /** Distance between them, in decay lengths and in widths. */
  readonly apart: number;
  readonly widths: number;
  /** Whether a face at full leg would lie beyond. */
  readonly reached: boolean;
}

/**
 * Sources too close for a face between them become one cluster: the closest first, and looser ones only
 * as long as the cluster stays below the largest size. Straight joints count once a cell's leg reaches them.
 */
export function cluster(drawing: Drawing, found: Sources, options: CutOptions): Clusters {
  const channels = drawing.chip.channels.length;
  const byChannel: Core[][] = Array.from({ length: channels }, () => []);
  for (const core of found.cores) {
    const total = drawing.elements.total(core.channel);
    core.low = Math.min(Math.max(core.low, 0), total);
    core.high = Math.min(Math.max(core.high, 0), total);
    byChannel[core.channel]!.push(core);
  }
  for (const list of byChannel)
    if (list.length > 1) list.sort((p, q) => p.low - q.low || p.high - q.high || p.source - q.source);
  const count = found.weak.length;
  const parent = Int32Array.from({ length: count }, (_, i) => i);
  const root = (i: number): number => {
    while (parent[i] !== i) i = parent[i] = parent[parent[i]!]!;
    return i;
  };
  const active = Uint8Array.from(found.weak, (w) => (w ? 0 : 1));
  const size = sizes(drawing, found);
  const unite = (a: number, b: number, widths: number) => {
    const p = Math.min(a, b);
    const q = Math.max(a, b);
    parent[q] = p;
    size[p]! += size[q]! + widths;
    active[p] = 1;
  };
  const pairs = neighbours(drawing, byChannel);
  pairs.sort((p, q) => p.apart - q.apart);
  for (let changed = true; changed; ) {
    changed = false;
    for (const { a, b, apart, widths, reached } of pairs) {
      const p = root(a);
      const q = root(b);
      if (p === q || (!active[p] && !active[q])) continue;
      const both = active[p] && active[q];
      const fits = size[p]! + size[q]! + widths <= options.largest;
      if (!(both ? apart < MERGE_TIGHT || (apart < options.mergeWithin && fits) : reached)) continue;
      unite(p, q, widths);
      changed = true;
    }
  }
  const of = new Int32Array(count);
  for (let i = 0; i < count; i++) of[i] = active[root(i)] ? root(i) : -1;
  return { of, size, byChannel };
}

function neighbours(drawing: Drawing, byChannel: readonly (readonly Core[])[]): Neighbours[] {
  const pairs: Neighbours[] = [];
  byChannel.forEach((list, channel) => {
    const depth = depthOf(drawing, channel);
    let last = list[0];
    for (let k = 1; k < list.length && last; k++) {
      const core = list[k]!;
      const gap = Math.max(0, core.low - last.high);
      const width = Math.max(widthAt(drawing, channel, last.high), widthAt(drawing, channel, core.low));
      pairs.push({
        a: last.source,
        b: core.source,
        apart: gap / decayLength(width, depth),
        widths: gap / width,
        // A span takes in a channel's end from this far: what goes on there must be in the cell as well.
        reached: gap <= 1.05 * NEAR_END * legLength(width, depth),
      });
      if (core.high > last.high) last = core;
    }
  });
  return pairs;
}

export function depthOf(drawing: Drawing, channel: number): number {
  const { channels, layers } = drawing.chip;
  return channels[channel]!.depth ?? layers[drawing.layerOf[channel]!]!.depth;
}

/** Size of every source alone: lengths of its cores in widths (or, shallow, in thrice the depth), chambers by their walls. */
function sizes(drawing: Drawing, found: Sources): Float64Array {
  const size = new Float64Array(found.weak.length);
  for (const core of found.cores) {
    const width = widthAt(drawing, core.channel, (core.low + core.high) / 2);
    size[core.source]! += 1 + (core.high - core.low) / Math.min(width, 3 * depthOf(drawing, core.channel));
  }
  for (const [source, chambers] of found.chambers) {
    for (const i of chambers) {
      const { outline, layer } = drawing.chip.chambers[i]!;
      const { depth } = drawing.chip.layers.find((l) => l.id === layer)!;
      let around = 0;
      outline.forEach(([x, y], k) => {
        const [x1, y1] = outline[(k + 1) % outline.length]!;
        around += Math.hypot(x1 - x, y1 - y);
      });
      size[source]! += around / (6 * depth);
    }
  }
  return size;
}
