import { Problem } from '../../../solver/problem/problem.ts';
import { Loops } from './loops.ts';

/** What a reader found in a mask file: loops by the name of the layer they lie on, and where copies of the chip are. */
export interface ReadMask {
  /** Loops in nm as the chip is drawn, by layer; polygons where the format has no arcs. */
  readonly loops: ReadonlyMap<string, Loops>;
  /** By how much each copy of the chip is moved, nm. */
  readonly shifts: readonly (readonly [number, number])[];
  /** Furthest that curves in the file lie off the arcs given here, nm. */
  readonly offArc: number;
}

/** Loops by layer, as they are found. */
export class LoopsByLayer {
  readonly map = new Map<string, Loops>();

  /** @param room points that are expected at most */
  of(layer: string, room: number): Loops {
    let loops = this.map.get(layer);
    if (!loops) {
      loops = new Loops(Math.ceil(room) + 64);
      this.map.set(layer, loops);
    }
    return loops;
  }
}

export function unreadable(what: string): Problem {
  return new Problem(
    'output',
    `The mask could not be read back: ${what}. Nothing was written.`,
    '',
    'This is a fault of the program; keep the chip so that it can be found.',
  );
}
