import type { Element } from './centreline.ts';
import type { Curve } from './curve.ts';

/** Numbers kept per element, in this order. */
export const X0 = 0;
export const Y0 = 1;
export const X1 = 2;
export const Y1 = 3;
export const UX = 4;
export const UY = 5;
export const LENGTH = 6;
export const BULGE = 7;
export const CURVATURE = 8;
export const CX = 9;
export const CY = 10;
export const S0 = 11;
export const S1 = 12;
export const H0 = 13;
export const H1 = 14;
export const TURN0 = 15;
export const TURN1 = 16;
export const STRIDE = 17;

/**
 * The elements of all channels in one packed array: at a hundred thousand channels an object each
 * (with its numbers boxed) costs more time than all the geometry done with them.
 */
export class Elements {
  count = 0;
  /** STRIDE numbers per element: see the names above. */
  data: Float64Array;
  /** Index of the channel in the chip, per element. */
  channel: Int32Array;
  /** First element of each channel, and the total at the end: channels + 1. */
  readonly first: Int32Array;

  /** `room` is how many elements are expected; more find place too. */
  constructor(channels: number, room: number) {
    this.first = new Int32Array(channels + 1);
    this.data = new Float64Array((room + 1) * STRIDE);
    this.channel = new Int32Array(room + 1);
  }

  /** Makes room for one more element of a channel and returns where its numbers go. */
  add(channel: number): number {
    const id = this.count++;
    if (id === this.channel.length) {
      const data = new Float64Array(2 * id * STRIDE);
      data.set(this.data);
      this.data = data;
      const channels = new Int32Array(2 * id);
      channels.set(this.channel);
      this.channel = channels;
    }
    this.channel[id] = channel;
    return id * STRIDE;
  }

  curve(id: number): Curve {
    const d = this.data;
    const k = id * STRIDE;
    return {
      x0: d[k + X0]!,
      y0: d[k + Y0]!,
      x1: d[k + X1]!,
      y1: d[k + Y1]!,
      bulge: d[k + BULGE]!,
      length: d[k + LENGTH]!,
      ux: d[k + UX]!,
      uy: d[k + UY]!,
      curvature: d[k + CURVATURE]!,
      cx: d[k + CX]!,
      cy: d[k + CY]!,
    };
  }

  at(id: number): Element {
    const d = this.data;
    const k = id * STRIDE;
    const channel = this.channel[id]!;
    return {
      channel,
      index: id - this.first[channel]!,
      curve: this.curve(id),
      s0: d[k + S0]!,
      s1: d[k + S1]!,
      h0: d[k + H0]!,
      h1: d[k + H1]!,
      turn0: d[k + TURN0]!,
      turn1: d[k + TURN1]!,
    };
  }

  /** Length of a channel's centreline, nm. */
  total(channel: number): number {
    return this.data[(this.first[channel + 1]! - 1) * STRIDE + S1]!;
  }
}
