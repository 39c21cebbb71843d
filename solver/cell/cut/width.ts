import type { Drawing } from '../../chip/read-graph-drawing.ts';

/** Mask width of a channel at a distance along it, nm. */
export function widthAt(drawing: Drawing, channel: number, s: number): number {
  // taken apart by index: asked for so often that an iterator each time is felt
  const { width } = drawing.chip.channels[channel]!;
  const w0 = width[0];
  const t = s / drawing.elements.total(channel);
  return w0 + (width[1] - w0) * Math.min(Math.max(t, 0), 1);
}
