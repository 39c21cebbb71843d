/** Where cells are put and how far they reach: every bound in one place, with its reason. */

/** A corner that turns less (10 degrees) costs less than a hundredth of a width of duct. */
export const BEND_TURN = (10 * Math.PI) / 180;

/**
 * A bend rounder than this many widths (radius of the centreline) is a duct: its resistance differs from
 * that of its centreline by (w/R)^2/12, 0.5 % at 4 (flow between two arcs, mean of 1/r).
 */
export const BEND_RADIUS = 4;

/** A step of width below this share is none. */
export const STEP = 0.01;

/** Walls that close in faster than this (half width per length) are no lubricated duct: error about its square. */
export const TAPER_SLOPE = 0.1;

/**
 * Slowest disturbances beyond a junction: the lateral pressure mode exp(-pi x/w) of a shallow channel, and
 * exp(-4.2124 x/h) between walls a gap h apart (Papkovich-Fadle; H.K. Moffatt, J. Fluid Mech. 18, 1964).
 * A face stands where the slower of the two has fallen to 2 %; its effect on the port matrix is the square.
 */
const FALL = Math.log(50);
export function legLength(width: number, depth: number): number {
  return FALL * decayLength(width, depth);
}

/** Distance in which the slowest disturbance falls by e. */
export function decayLength(width: number, depth: number): number {
  return Math.max(width / Math.PI, depth / 4.2124);
}

/**
 * Two places closer than this many decay lengths (1.5 widths of a shallow channel, where what the one
 * sends reaches the other at 1 %) are one cell; further apart, the cut between them stands in the middle.
 */
export const MERGE = 4.7;

/** A cell that would grow too large may be cut between places down to this many decay lengths apart. */
export const MERGE_TIGHT = 1.6;

/**
 * Size of the largest cell, in widths of channel. A culture floor of 134 widths takes some 4,600 triangles
 * (measured); the solver's own bound on memory has the last word.
 */
export const LARGEST = 200;

/** A face is left out where the channel ends so soon (in legs) beyond it. */
export const NEAR_END = 1.2;
