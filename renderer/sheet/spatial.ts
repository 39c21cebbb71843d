import Flatbush from 'flatbush';
import type { Chip } from '../../solver/chip/chip.ts';
import { type Box, boxOf, inside } from '../geometry/path.ts';
import { distance, nearestOnSegment, type Xy } from '../geometry/vector.ts';
import type { Part } from '../state/ref.ts';

/** What lies under a place, and which of its pieces. */
export interface Hit {
  readonly kind: Part;
  readonly id: string;
  /** Index of the part in its list of the chip. */
  readonly index: number;
  /** Channels, chambers and keep-outs: the vertex within reach, else -1. */
  readonly vertex: number;
  /** Channels, chambers and keep-outs: the segment nearest, from its first vertex, else -1. */
  readonly segment: number;
  /** The place itself, on the centreline or at the centre. */
  readonly at: Xy;
  /** nm, from the pointer to the edge of the body; 0 inside. */
  readonly away: number;
}

/**
 * Where everything of one chip lies: an index over channel segments, chambers, holes and keep-outs, built once
 * for a chip and asked for hits, boxes and neighbours.
 */
export class Spatial {
  readonly chip: Chip;
  private readonly tree: Flatbush;
  /** kind, index in its list, segment: three numbers per entry. */
  private readonly entries: Int32Array;

  constructor(chip: Chip) {
    this.chip = chip;
    const keepOuts = chip.keepOuts ?? [];
    let count = chip.chambers.length + chip.vias.length + chip.ports.length + keepOuts.length;
    for (const channel of chip.channels) count += channel.path.length - 1;
    this.tree = new Flatbush(Math.max(1, count));
    this.entries = new Int32Array(3 * Math.max(1, count));
    let n = 0;
    const enter = (kind: number, index: number, segment: number, box: Box): void => {
      this.entries.set([kind, index, segment], 3 * n);
      n += 1;
      this.tree.add(box.left, box.bottom, box.right, box.top);
    };
    chip.channels.forEach((channel, i) => {
      const half = Math.max(...channel.width) / 2;
      for (let s = 0; s + 1 < channel.path.length; s += 1) {
        const [ax, ay] = channel.path[s]!;
        const [bx, by] = channel.path[s + 1]!;
        enter(0, i, s, {
          left: Math.min(ax, bx) - half,
          right: Math.max(ax, bx) + half,
          bottom: Math.min(ay, by) - half,
          top: Math.max(ay, by) + half,
        });
      }
    });
    chip.chambers.forEach((chamber, i) => {
      enter(1, i, -1, boxOf(chamber.outline) ?? { left: 0, right: 0, bottom: 0, top: 0 });
    });
    chip.vias.forEach((via, i) => {
      enter(2, i, -1, boxOf([via.at], via.diameter / 2)!);
    });
    chip.ports.forEach((port, i) => {
      enter(3, i, -1, boxOf([port.at], port.diameter / 2)!);
    });
    keepOuts.forEach((keepOut, i) => {
      enter(4, i, -1, boxOf(keepOut.outline)!);
    });
    if (n === 0) {
      this.entries[0] = -1;
      this.tree.add(0, 0, 0, 0);
    }
    this.tree.finish();
  }

  /** The nearest thing within `reach` nm: ports and vias before channels, channels before chambers and those before keep-outs. */
  hit(p: Xy, reach: number): Hit | null {
    let best: Hit | null = null;
    let order = Number.POSITIVE_INFINITY;
    for (const entry of this.tree.search(p[0] - reach, p[1] - reach, p[0] + reach, p[1] + reach)) {
      const found = this.measure(entry, p, reach);
      if (!found || found.away > reach) continue;
      const rank = { port: 0, via: 0, channel: 1, chamber: 2, 'keep-out': 3 }[found.kind];
      // inside several bodies: the one whose middle is nearest
      const value = rank * 4 * reach + found.away + 1e-3 * Math.min(reach, distance(p, found.at));
      if (value < order) {
        order = value;
        best = found;
      }
    }
    return best;
  }

  /** Indices of the channels whose boxes meet `box`, each once, in the order of the chip. */
  channelsIn(box: Box): number[] {
    const seen = new Set<number>();
    for (const entry of this.tree.search(box.left, box.bottom, box.right, box.top))
      if (this.entries[3 * entry] === 0) seen.add(this.entries[3 * entry + 1]!);
    return [...seen].sort((a, b) => a - b);
  }

  /** How many straight runs of channels, chambers and holes have boxes that meet `box`. */
  runsIn(box: Box): number {
    return this.tree.search(box.left, box.bottom, box.right, box.top).length;
  }

  /** Parts that lie wholly within `box` (`whole`) or touch it, as kind and id. */
  partsIn(box: Box, wholly: boolean): { readonly kind: Part; readonly id: string }[] {
    const found = new Map<string, { kind: Part; id: string }>();
    for (const entry of this.tree.search(box.left, box.bottom, box.right, box.top)) {
      const part = this.partAt(entry);
      if (part && !found.has(`${part.kind}:${part.id}`)) found.set(`${part.kind}:${part.id}`, part);
    }
    return [...found.values()].filter((part) => !wholly || this.isWithin(part, box));
  }

  /** Every centreline segment within `reach` of p, as channel index and segment. */
  segmentsNear(p: Xy, reach: number): { readonly channel: number; readonly segment: number }[] {
    const out: { channel: number; segment: number }[] = [];
    for (const entry of this.tree.search(p[0] - reach, p[1] - reach, p[0] + reach, p[1] + reach)) {
      if (this.entries[3 * entry] !== 0) continue;
      out.push({ channel: this.entries[3 * entry + 1]!, segment: this.entries[3 * entry + 2]! });
    }
    return out;
  }

  private partAt(entry: number): { kind: Part; id: string } | null {
    const index = this.entries[3 * entry + 1]!;
    const { chip } = this;
    switch (this.entries[3 * entry]) {
      case 0:
        return { kind: 'channel', id: chip.channels[index]!.id };
      case 1:
        return { kind: 'chamber', id: chip.chambers[index]!.id };
      case 2:
        return { kind: 'via', id: chip.vias[index]!.id };
      case 3:
        return { kind: 'port', id: chip.ports[index]!.id };
      case 4:
        return { kind: 'keep-out', id: chip.keepOuts![index]!.id };
      default:
        return null;
    }
  }

  private isWithin(part: { kind: Part; id: string }, box: Box): boolean {
    const within = ([x, y]: Xy): boolean =>
      x >= box.left && x <= box.right && y >= box.bottom && y <= box.top;
    const { chip } = this;
    if (part.kind === 'channel') return chip.channels.find((c) => c.id === part.id)!.path.every(within);
    if (part.kind === 'chamber') return chip.chambers.find((c) => c.id === part.id)!.outline.every(within);
    if (part.kind === 'keep-out') return chip.keepOuts!.find((k) => k.id === part.id)!.outline.every(within);
    if (part.kind === 'via') return within(chip.vias.find((v) => v.id === part.id)!.at);
    return within(chip.ports.find((q) => q.id === part.id)!.at);
  }

  private measure(entry: number, p: Xy, reach: number): Hit | null {
    const index = this.entries[3 * entry + 1]!;
    const segment = this.entries[3 * entry + 2]!;
    const part = this.partAt(entry);
    if (!part) return null;
    const { chip } = this;
    if (part.kind === 'channel') {
      const { path, width } = chip.channels[index]!;
      const near = nearestOnSegment(p, path[segment]!, path[segment + 1]!);
      const away = Math.max(0, distance(p, near.at) - Math.max(...width) / 2);
      const first = distance(p, path[segment]!);
      const second = distance(p, path[segment + 1]!);
      const vertex = Math.min(first, second) > reach ? -1 : first <= second ? segment : segment + 1;
      return { ...part, index, segment, vertex, at: near.at, away };
    }
    if (part.kind === 'chamber' || part.kind === 'keep-out') {
      const { outline } = part.kind === 'chamber' ? chip.chambers[index]! : chip.keepOuts![index]!;
      let best = { away: Number.POSITIVE_INFINITY, segment: -1, at: p };
      let vertex = -1;
      outline.forEach((a, i) => {
        const near = nearestOnSegment(p, a, outline[(i + 1) % outline.length]!);
        const away = distance(p, near.at);
        if (away < best.away) best = { away, segment: i, at: near.at };
        if (distance(p, a) <= reach && (vertex < 0 || distance(p, a) < distance(p, outline[vertex]!)))
          vertex = i;
      });
      const within = inside(p, outline);
      return {
        ...part,
        index,
        vertex,
        segment: best.away <= reach ? best.segment : -1,
        at: best.at,
        away: within ? 0 : best.away,
      };
    }
    const round = part.kind === 'via' ? chip.vias[index]! : chip.ports[index]!;
    const away = Math.max(0, distance(p, round.at) - round.diameter / 2);
    return { ...part, index, vertex: -1, segment: -1, at: round.at, away };
  }
}
