import type { Graph } from '../../chip/graph.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import { assemble, type Ground, type Part } from './assemble.ts';
import type { SpanEnd } from './spans.ts';

/** Forgotten all together beyond this many grounds. */
const MOST = 20_000;
const kept = new Map<string, Part[] | undefined>();

/** Parts of a chip are never changed in place, so an object stands for what it says. */
const numbers = new WeakMap<object, number>();
let last = 0;
function numberOf(part: object): number {
  let number = numbers.get(part);
  if (number === undefined) {
    last += 1;
    number = last;
    numbers.set(part, number);
  }
  return number;
}

const endKey = (end: SpanEnd): string =>
  end.kind === 'port' ? `p${end.s} ${end.site}` : `${end.kind === 'cut' ? 'c' : 'w'}${end.s}`;

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
  let key = `${numberOf(chip.layers[ground.layer]!)} ${origin[0]} ${origin[1]} ${ground.sites}`;
  for (const { channel, low, high } of ground.spans) {
    key += `|${channel} ${numberOf(chip.channels[channel]!)} ${endKey(low)} ${endKey(high)}`;
  }
  for (const i of ground.chambers) key += `|c${i} ${numberOf(chip.chambers[i]!)}`;
  for (const { x, y, radius, site } of ground.holes) key += `|h${x} ${y} ${radius} ${site}`;
  if (kept.has(key)) return kept.get(key);
  if (kept.size >= MOST) kept.clear();
  const parts = assemble(drawing, graph, ground, origin);
  kept.set(key, parts);
  return parts;
}
