import { type Accuracy, PREVIEW_ACCURACY, type ShapeSolution } from '../../solver/cell/cell.ts';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { decodeSolution, encodeSolution } from '../../solver/cell/encode.ts';
import { cellPicture } from '../../solver/cell/picture.ts';
import { cellKey } from '../../solver/cell/solve-cell.ts';
import { memoryStore } from '../../solver/cell/store.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import type { Graph } from '../../solver/chip/graph.ts';
import type { Result } from '../../solver/chip/result.ts';
import { knownSolution, settleWaiting } from '../../solver/lump/cells.ts';
import { emptyMemory } from '../../solver/memory.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { accuracyOf, type SolveOptions, solve } from '../../solver/solve.ts';
import type { Answered, News, Order, Outcome, PlacedPicture, PlanBox, Refused } from './messages.ts';

/** Where junctions are solved beside the solving thread. A new list takes the place of the one before. */
export interface CellHand {
  solve(cells: readonly CellSpec[], accuracy: Accuracy): void;
  /** `put` the finding into memory, then say so by `listener`. */
  /** `left` is how many of the newest list are still to come. */
  listen(listener: (cell: CellSpec, accuracy: Accuracy, found: Found, left: number) => void): void;
}
/** An answer is given anew for a junction that came only after this many times as long as one takes. */
const PATIENCE = 3;
/** Bytes of solved junctions held beside those in use; the project keeps the others. */
const MOST_KEPT = 96e6;
/** Keys asked for at once, within what a request may carry. */
const MOST_WANTED = 256;

export type Found = { readonly key: string; readonly solution: ShapeSolution } | Problem;

/**
 * The solving thread's behaviour, without a thread: orders in, news out. Edits that arrive while one is
 * being solved are taken together, so that it is always the newest chip that is answered. With `hand`
 * an answer never waits for junctions: those not known yet count as ideal, and the answer is given
 * again as they come. While something is dragged, the chip as it would be is answered beside it, its
 * junctions to preview accuracy; nothing of that is kept.
 */
export function solvingThread(
  tell: (news: News) => void,
  later: (work: () => void) => void,
  hand: CellHand | null = null,
): (order: Order) => void {
  let memory = emptyMemory(memoryStore(MOST_KEPT));
  let chip: Chip | null = null;
  let options: SolveOptions = {};
  let newest = 0;
  /** The work is asked for; which of the two chips is to be answered. */
  let asked = false;
  let due = false;
  let dragDue = false;
  let drag: { readonly id: number; readonly chip: Chip } | null = null;
  let sent: Graph | null = null;
  let look: PlanBox | null = null;
  /** What pictures are drawn of: the chip answered last. */
  let last: { readonly chip: Chip; readonly result: Result } | null = null;
  /** The newest chip has no result, whatever its junctions are. */
  let stuck = false;
  /** ms: when the last answer was ready, and how long it took. */
  let ready = 0;
  let took = 0;
  /** Keys the project was asked for, and answers of it that are still to come. */
  const wanted = new Set<string>();
  let open = 0;
  const cancelled = new Set<number>();

  const outcomeOf = (which: Chip, haste = hand !== null, preview = false): Outcome => {
    try {
      return { ok: true, result: solve(which, { ...options, haste, preview }, memory) };
    } catch (error) {
      return { ok: false, problem: refused(error) };
    }
  };

  /** What is on screen before what is not, each in drawing order. */
  const seenFirst = (waiting: readonly CellSpec[]): readonly CellSpec[] => {
    if (!look) return waiting;
    const { left, right, bottom, top } = look;
    const seen = ({ origin: [x, y] }: CellSpec): boolean =>
      x >= left && x <= right && y >= bottom && y <= top;
    return [...waiting.filter(seen), ...waiting.filter((cell) => !seen(cell))];
  };

  /** First the project is asked for what it kept, then what it has not is solved. */
  const handOn = (waiting: readonly CellSpec[]): void => {
    if (!hand) return;
    const fresh = keysOf(waiting).filter((key) => !wanted.has(key));
    if (fresh.length > 0) {
      for (const key of fresh) wanted.add(key);
      open += 1;
      tell({ kind: 'want', keys: fresh });
    }
    // Anew each time: one that came may have been a copy of others.
    if (open === 0) hand.solve(seenFirst(waiting), accuracyOf(options));
  };

  /** Solves a chip in haste and sends it; what its junctions still wait for. */
  const send = (which: Chip, preview: boolean, news: (answer: Answered) => News): readonly CellSpec[] => {
    const began = performance.now();
    // a chip that cannot be solved gets no further than the one before it: its junctions are not wanted
    memory.cells.waiting = [];
    const outcome = outcomeOf(which, hand !== null, preview);
    let graph: Graph | null = null;
    try {
      graph = memory.graph(which);
    } catch {
      // the outcome says why there is none
    }
    last = outcome.ok ? { chip: which, result: outcome.result } : null;
    stuck = !outcome.ok;
    const waiting = outcome.ok ? memory.cells.waiting : [];
    tell(news({ graph: graph && graph === sent ? 'same' : graph, outcome, waiting: waiting.length }));
    sent = graph;
    ready = performance.now();
    took = ready - began;
    return waiting;
  };
  const answer = (): void => {
    asked = false;
    if (!chip) return;
    if (due) {
      due = false;
      handOn(send(chip, false, (answered) => ({ kind: 'solved', id: newest, ...answered })));
    }
    if (!dragDue || !drag) return;
    dragDue = false;
    const { id } = drag;
    const waiting = send(drag.chip, true, (answered) => ({ kind: 'dragged', id, ...answered }));
    hand?.solve(waiting, PREVIEW_ACCURACY);
  };
  const work = (): void => {
    if (asked) return;
    asked = true;
    later(answer);
  };
  const soon = (): void => {
    due = true;
    work();
  };
  const dragSoon = (): void => {
    dragDue = true;
    work();
  };
  hand?.listen((cell, accuracy, found, left) => {
    settleWaiting(cell, accuracy, found, memory.cells);
    if (!(found instanceof Problem) && accuracy.flow <= accuracyOf(options).flow) {
      tell({ kind: 'keep', cell: { key: found.key, bytes: encodeSolution(found.solution) } });
    }
    if (stuck) return;
    // answers to a large chip are not given for every single junction, but always for the last
    if (left > 0 && performance.now() - ready < PATIENCE * took) return;
    if (drag) dragSoon();
    else soon();
  });
  const pictureOf = (name: string, lines: number): PlacedPicture | null => {
    const pressures = last?.result.cells.find(({ id }) => id === name)?.pressures;
    if (!last || !pressures) return null;
    const spec = memory.cut(last.chip).cells.find((cell) => cell.name === name);
    const solution = spec && knownSolution(spec, memory.cells);
    const picture = solution && cellPicture(solution, pressures, lines);
    return picture ? { ...picture, origin: spec.origin } : null;
  };

  const sweep = (id: number, variants: readonly Chip[], index: number): void => {
    if (index >= variants.length || cancelled.delete(id)) return;
    tell({ kind: 'swept', id, index, outcome: outcomeOf(variants[index]!, false) });
    later(() => sweep(id, variants, index + 1));
  };

  return (order) => {
    switch (order.kind) {
      case 'picture':
        return tell({ kind: 'pictured', id: order.id, picture: pictureOf(order.cell, order.lines) });
      case 'look':
        look = order.box;
        return;
      case 'kept':
        open -= 1;
        for (const { key, bytes } of order.cells) {
          const solution = decodeSolution(bytes);
          if (solution) memory.cells.store.put(key, solution);
        }
        return soon();
      case 'load':
        memory = emptyMemory(memoryStore(MOST_KEPT));
        wanted.clear();
        open = 0;
        chip = order.chip;
        options = order.options;
        newest = order.id;
        sent = null;
        last = null;
        drag = null;
        return soon();
      case 'drag': {
        if (!chip) return;
        if (order.edit) {
          try {
            drag = { id: order.id, chip: applyEdit(chip, order.edit) };
            dragSoon();
          } catch {
            // there it could not stay: the answer before it stands
          }
          return;
        }
        if (!drag) return;
        drag = null;
        // junctions that came meanwhile were not put into the chip's own answer
        return soon();
      }
      case 'edit':
        if (!chip) return;
        chip = applyEdit(chip, order.edit);
        newest = order.id;
        return soon();
      case 'try': {
        if (!chip) return;
        let outcome: Outcome;
        try {
          outcome = outcomeOf(applyEdit(chip, order.edit));
        } catch (error) {
          outcome = { ok: false, problem: refused(error) };
        }
        return tell({ kind: 'tried', id: order.id, outcome });
      }
      case 'sweep': {
        if (!chip) return;
        const base = chip;
        return later(() =>
          sweep(
            order.id,
            order.edits.map((edit) => applyEdit(base, edit)),
            0,
          ),
        );
      }
      case 'cancel':
        cancelled.add(order.id);
    }
  };
}

/** Keys of the shapes, each once; a shape that cannot be solved has none. */
function keysOf(cells: readonly CellSpec[]): string[] {
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

function refused(error: unknown): Refused {
  if (error instanceof Problem) return { what: error.what, where: error.where, remedy: error.remedy };
  return {
    what: 'The solver stopped at something it was not made for.',
    where: '',
    remedy: 'Undo the last change; the chip itself is kept.',
  };
}
