import type { ShapeSolution } from '../../solver/cell/cell.ts';

/** ms without anything going on before solved junctions are handed over, one by one. */
const QUIET = 700;
/** Where more than so many wait, a shorter rest will do: what is not handed over is lost when the page ends. */
const MOST_UNKEPT = 64;
const SHORT_QUIET = 200;

/** Solved junctions on their way to the project: handed over when nobody waits for an answer. */
export interface Keeping {
  later(key: string, solution: ShapeSolution): void;
  clear(): void;
}

/**
 * @param give hands one over
 * @param quiet ms since something was going on; 0 while it is
 */
export function keeping(
  give: (key: string, solution: ShapeSolution) => void,
  quiet: () => number,
  after: (work: () => void, ms: number) => void,
): Keeping {
  const unkept = new Map<string, ShapeSolution>();
  let going = false;
  const keep = (): void => {
    const [oldest] = unkept;
    going = oldest !== undefined;
    if (!oldest) return;
    const wanted = unkept.size > MOST_UNKEPT ? SHORT_QUIET : QUIET;
    if (quiet() < wanted) {
      after(keep, wanted);
      return;
    }
    const [key, solution] = oldest;
    unkept.delete(key);
    give(key, solution);
    after(keep, 0);
  };
  return {
    later(key, solution) {
      unkept.set(key, solution);
      if (!going) after(keep, QUIET);
      going = true;
    },
    clear: () => unkept.clear(),
  };
}
