import type { Channel, Chip } from '../../solver/chip/chip.ts';
import { placeAlong } from '../geometry/path.ts';
import type { Xy } from '../geometry/vector.ts';
import { SHADES } from '../look/ramp.ts';
import type { ShownGraph } from '../solving/shown-graph.ts';
import { placeOn, type Shown, valueOn } from './overlay.ts';

/** A stretch of channel that is drawn in one colour. */
export interface Stretch {
  readonly channel: Channel;
  readonly channelIndex: number;
  readonly path: readonly Xy[];
  /** At both ends, nm. */
  readonly width: readonly [number, number];
  readonly bendRadius: number;
  /** Along the channel, nm, where it begins and ends. */
  readonly start: number;
  readonly stop: number;
}

/** The chip as stretches; what has not changed since `before` is taken over from there. */
export interface Scene {
  readonly chip: Chip;
  readonly graph: ShownGraph | null;
  readonly stretches: readonly Stretch[];
  /** First stretch of each channel, in the order of the chip, with one entry more at the end. */
  readonly first: Int32Array;
}

/**
 * Cuts each channel where the fluid divides. `graph` may be of an older chip: channels that are the same
 * object in both keep their cuts, all others are one stretch until they are read anew.
 */
export function makeScene(chip: Chip, graph: ShownGraph | null, graphChip: Chip | null): Scene {
  const cuts = new Map<Channel, { start: number; stop: number; number: number }[]>();
  if (graph && graphChip)
    for (const piece of graph.pieces) {
      const channel = graphChip.channels[piece.channelIndex]!;
      const list = cuts.get(channel) ?? [];
      list.push({ start: piece.start, stop: piece.stop, number: piece.number });
      cuts.set(channel, list);
    }
  const stretches: Stretch[] = [];
  const first = new Int32Array(chip.channels.length + 1);
  chip.channels.forEach((channel, channelIndex) => {
    first[channelIndex] = stretches.length;
    const total = straightLength(channel.path);
    const list = cuts.get(channel);
    if (!list || list.length <= 1) {
      stretches.push({
        channel,
        channelIndex,
        path: channel.path,
        width: channel.width,
        bendRadius: channel.bendRadius,
        start: 0,
        stop: total,
      });
      return;
    }
    list.sort((a, b) => a.number - b.number);
    list.forEach((cut, i) => {
      // neighbours share their place, so that no sliver is left between them
      const start = i === 0 ? 0 : cut.start;
      const stop = i === list.length - 1 ? total : list[i + 1]!.start;
      stretches.push({
        channel,
        channelIndex,
        path: part(channel.path, start, stop),
        width: [widthAt(channel, start / total), widthAt(channel, stop / total)],
        bendRadius: channel.bendRadius,
        start,
        stop,
      });
    });
  });
  first[chip.channels.length] = stretches.length;
  return { chip, graph, stretches, first };
}

const widthAt = ({ width }: Channel, share: number): number => width[0] + (width[1] - width[0]) * share;

function straightLength(path: readonly Xy[]): number {
  let total = 0;
  for (let i = 1; i < path.length; i += 1)
    total += Math.hypot(path[i]![0] - path[i - 1]![0], path[i]![1] - path[i - 1]![1]);
  return total;
}

function part(path: readonly Xy[], start: number, stop: number): Xy[] {
  const out: Xy[] = [placeAlong(path, start)];
  let along = 0;
  for (let i = 1; i < path.length; i += 1) {
    along += Math.hypot(path[i]![0] - path[i - 1]![0], path[i]![1] - path[i - 1]![1]);
    if (along > start && along < stop) out.push(path[i]!);
  }
  out.push(placeAlong(path, stop));
  return out;
}

/** Shade of each stretch, 0 to `SHADES` - 1; -1 where it has no value. */
export function shadesOf(scene: Scene, overlay: Shown): Int16Array {
  const out = new Int16Array(scene.stretches.length).fill(-1);
  scene.stretches.forEach((stretch, i) => {
    const value = valueOn(overlay, stretch.channel.id, stretch.start, stretch.stop);
    if (value === null) return;
    out[i] = Math.round(placeOn(overlay, value) * (SHADES - 1));
  });
  return out;
}

/** Shade of each chamber, in the order of the chip; -1 where it has no value. */
export const chamberShades = (chip: Chip, overlay: Shown): readonly number[] =>
  chip.chambers.map(({ id }) => {
    const value = overlay.chambers.get(id);
    return value === undefined ? -1 : Math.round(placeOn(overlay, value) * (SHADES - 1));
  });
