import type { Drawing } from '../../chip/read-graph-drawing.ts';

/** Mask width of a channel at a distance along it, nm. */
export function widthAt(drawing: Drawing, channel: number, s: number): number {
  const [w0, w1] = drawing.chip.channels[channel]!.width;
  const t = s / drawing.elements.total(channel);
  return w0 + (w1 - w0) * Math.min(Math.max(t, 0), 1);
}
