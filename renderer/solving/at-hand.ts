import { PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { faceWidths } from '../../solver/cell/equivalent.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import { type CellMemory, lackingCells, solveWaiting } from '../../solver/lump/cells.ts';

/** Beyond so many unlike junctions at once other threads are faster than this one alone. */
const MOST_CELLS = 2;
/** Area over the square of the narrowest face, in which the cost goes: a cross has about 6. */
const MOST_AREA = 24;
/** ms; what takes longer keeps the thread from what the hand does next. */
const MOST_TIME = 80;
/** How often it is then left to the threads before it is tried again: the first time code has to be compiled. */
const LEFT = 8;

/**
 * Junctions of what the hand holds, solved to preview accuracy right here, where that is sooner done than handed
 * to a thread and answered twice. What turns out slow is left to the threads for a while, or until the hand takes hold
 * anew.
 */
export interface AtHand {
  /** The hand takes hold of something. */
  begin(): void;
  /** Solves what is missing, or nothing. */
  solve(cells: readonly CellSpec[], memory: CellMemory): void;
}

export function atHand(clock: () => number = () => performance.now()): AtHand {
  let left = 0;
  return {
    begin() {
      left = 0;
    },
    solve(cells, memory) {
      const lacking = lackingCells(cells, PREVIEW_ACCURACY, memory);
      if (lacking.length > MOST_CELLS || lacking.some(({ shape }) => relativeArea(shape) > MOST_AREA)) return;
      if (lacking.length === 0) return;
      if (left > 0) {
        left -= 1;
        return;
      }
      const began = clock();
      for (const cell of lacking) solveWaiting(cell, PREVIEW_ACCURACY, memory);
      if (clock() - began > MOST_TIME) left = LEFT;
    },
  };
}

/** Area of a shape over the square of its narrowest face; arcs count as their chords. */
function relativeArea(shape: CellShape): number {
  let area = 0;
  for (const loop of shape.loops) {
    let before = loop.at(-1)!;
    for (const corner of loop) {
      area += (before.x * corner.y - corner.x * before.y) / 2;
      before = corner;
    }
  }
  return Math.abs(area) / Math.min(...faceWidths(shape)) ** 2;
}
