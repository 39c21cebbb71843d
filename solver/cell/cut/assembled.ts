import type { Channel, Layer } from '../../chip/chip.ts';
import type { Graph } from '../../chip/graph.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import { assemble, type Ground, type Part } from './assemble.ts';
import type { SpanEnd } from './spans.ts';

/** A ground as it was assembled, with all that went into it. */
interface Assembled {
  readonly ground: Ground;
  readonly origin: readonly [number, number];
  readonly layer: Layer;
  /** Of each span, and of each chamber. */
  readonly channels: readonly Channel[];
  readonly chambers: readonly object[];
  /** Holes as they were: their rims are widened in place. */
  readonly holes: readonly { readonly x: number; readonly y: number; readonly radius: number }[];
  readonly parts: Part[] | undefined;
}

/** Places remembered for each thing that grounds begin with, all forgotten beyond: a long channel begins many. */
const MOST_PLACES = 10_000;
/** Grounds remembered at one place, the newest. */
const MOST_ALIKE = 8;
/** By the channel of the first span, or the first chamber, then by origin. Parts of a chip are never changed in place. */
const kept = new WeakMap<object, Map<number, Assembled[]>>();

/**
 * As `assemble`, remembered: while one channel is edited, the grounds that it has no part in are made of
 * the same channels, cut at the same places, and need no new union.
 */
export function assembleOnce(
  drawing: Drawing,
  graph: Graph,
  ground: Ground,
  origin: readonly [number, number],
): Part[] | undefined {
  const { chip } = drawing;
  const first = ground.spans[0] ? chip.channels[ground.spans[0].channel] : chip.chambers[ground.chambers[0]!];
  if (!first) return assemble(drawing, graph, ground, origin);
  let places = kept.get(first);
  if (!places) {
    places = new Map();
    kept.set(first, places);
  }
  // two origins of one number are told apart below
  const place = 1e6 * origin[0] + origin[1];
  const list = places.get(place) ?? [];
  const known = list.find((one) => same(one, drawing, ground, origin));
  if (known) return known.parts;
  const parts = assemble(drawing, graph, ground, origin);
  if (places.size >= MOST_PLACES) places.clear();
  if (list.length >= MOST_ALIKE) list.shift();
  places.set(place, list);
  list.push({
    ground,
    origin,
    layer: chip.layers[ground.layer]!,
    channels: ground.spans.map(({ channel }) => chip.channels[channel]!),
    chambers: ground.chambers.map((i) => chip.chambers[i]!),
    holes: ground.holes.map(({ x, y, radius }) => ({ x, y, radius })),
    parts,
  });
  return parts;
}

function same(
  one: Assembled,
  { chip }: Drawing,
  { layer, spans, chambers, holes, sites }: Ground,
  origin: readonly [number, number],
): boolean {
  const { ground } = one;
  return (
    one.origin[0] === origin[0] &&
    one.origin[1] === origin[1] &&
    one.layer === chip.layers[layer] &&
    ground.layer === layer &&
    ground.spans.length === spans.length &&
    ground.chambers.length === chambers.length &&
    ground.holes.length === holes.length &&
    ground.sites.length === sites.length &&
    ground.sites.every((site, i) => site === sites[i]) &&
    ground.spans.every(
      ({ channel, low, high }, i) =>
        channel === spans[i]!.channel &&
        one.channels[i] === chip.channels[channel] &&
        sameEnd(low, spans[i]!.low) &&
        sameEnd(high, spans[i]!.high),
    ) &&
    ground.chambers.every(
      (chamber, i) => chamber === chambers[i] && one.chambers[i] === chip.chambers[chamber],
    ) &&
    one.holes.every(
      ({ x, y, radius }, i) =>
        x === holes[i]!.x &&
        y === holes[i]!.y &&
        radius === holes[i]!.radius &&
        ground.holes[i]!.site === holes[i]!.site,
    )
  );
}

const siteOf = (end: SpanEnd): number => (end.kind === 'port' ? end.site : -1);

const sameEnd = (a: SpanEnd, b: SpanEnd): boolean =>
  a.kind === b.kind && a.s === b.s && siteOf(a) === siteOf(b);
