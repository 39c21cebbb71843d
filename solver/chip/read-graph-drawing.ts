import Flatbush from 'flatbush';
import type { Finding } from '../problem/finding.ts';
import type { Chip } from './chip.ts';
import { type Body, body } from './geometry/body.ts';
import { type Centreline, centreline } from './geometry/centreline.ts';
import { TOUCH } from './geometry/tolerance.ts';

/** The channels of a chip as bodies in the plan, with an index over them. */
export interface Drawing {
  readonly chip: Chip;
  readonly lines: readonly Centreline[];
  /** Layer index of each channel. */
  readonly layerOf: Int32Array;
  /** All elements of all channels, channel by channel. */
  readonly bodies: readonly Body[];
  /** First body of each channel, and the total at the end: channels + 1. */
  readonly first: Int32Array;
  /** Over the boxes of `bodies`; absent where there are none. */
  readonly index: Flatbush | undefined;
}

export function layerNumbers(chip: Chip): Map<string, number> {
  return new Map(chip.layers.map((layer, i) => [layer.id, i]));
}

export function readDrawing(chip: Chip, findings: Finding[]): Drawing {
  const numbers = layerNumbers(chip);
  const count = chip.channels.length;
  const lines: Centreline[] = [];
  const layerOf = new Int32Array(count);
  const first = new Int32Array(count + 1);
  const bodies: Body[] = [];
  for (let i = 0; i < count; i++) {
    const channel = chip.channels[i]!;
    const centre = centreline(channel, i, findings);
    lines.push(centre);
    layerOf[i] = numbers.get(channel.layer)!;
    for (const e of centre.elements) bodies.push(body(e));
    first[i + 1] = bodies.length;
  }
  let index: Flatbush | undefined;
  if (bodies.length > 0) {
    index = new Flatbush(bodies.length);
    for (const b of bodies) index.add(b.minX - TOUCH, b.minY - TOUCH, b.maxX + TOUCH, b.maxY + TOUCH);
    index.finish();
  }
  return { chip, lines, layerOf, bodies, first, index };
}

/** Place on a channel's centreline at a distance along it. */
export function elementAt(drawing: Drawing, channel: number, s: number): Body {
  let low = drawing.first[channel]!;
  let high = drawing.first[channel + 1]! - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (drawing.bodies[middle]!.element.s1 < s) low = middle + 1;
    else high = middle;
  }
  return drawing.bodies[low]!;
}
