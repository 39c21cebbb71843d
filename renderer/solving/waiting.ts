import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { cellKey } from '../../solver/cell/solve-cell.ts';
import type { PlanBox } from './messages.ts';

/** Keys asked for at once, within what a request may carry. */
const MOST_WANTED = 256;

/** What is on screen before what is not, each in drawing order. */
export function seenFirst(waiting: readonly CellSpec[], look: PlanBox | null): readonly CellSpec[] {
  if (!look) return waiting;
  const { left, right, bottom, top } = look;
  const seen = ({ origin: [x, y] }: CellSpec): boolean => x >= left && x <= right && y >= bottom && y <= top;
  return [...waiting.filter(seen), ...waiting.filter((cell) => !seen(cell))];
}

/** Keys of the shapes, each once; a shape that cannot be solved has none. */
export function keysOf(cells: readonly CellSpec[]): string[] {
  const keys = new Set<string>();
  for (const { shape, name } of cells) {
    try {
      keys.add(cellKey(shape, name));
    } catch {
      // the solve itself says why
    }
  }
  return [...keys].slice(0, MOST_WANTED);
}
