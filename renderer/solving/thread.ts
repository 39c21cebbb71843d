import { PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import type { CellSpec } from '../../solver/cell/cut/spec.ts';
import { decodeSolution, encodeSolution } from '../../solver/cell/encode.ts';
import { cellPicture } from '../../solver/cell/picture.ts';
import { memoryStore } from '../../solver/cell/store.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit, type ChipEdit } from '../../solver/chip/edit.ts';
import type { Graph } from '../../solver/chip/graph.ts';
import type { Result } from '../../solver/chip/result.ts';
import { knownSolution, lackingCells, settleWaiting } from '../../solver/lump/cells.ts';
import { emptyMemory } from '../../solver/memory.ts';
import { Problem } from '../../solver/problem/problem.ts';
import {
  accuracyOf,
  type SolvedInParts,
  type SolveOptions,
  solve,
  solveInParts,
} from '../../solver/solve.ts';
import { verdicts } from '../verdict/verdicts.ts';
import { showIn } from '../words/figure.ts';
import { atHand } from './at-hand.ts';
import type { CellHand } from './cell-hand.ts';
import { exercising } from './exercise.ts';
import { keeping } from './keep.ts';
import type { Answered, News, Order, Outcome, PlacedPicture, PlanBox, Refused } from './messages.ts';
import { refused } from './refusal.ts';
import { shownGraph } from './shown-graph.ts';
import { collector, tidying } from './tidy.ts';
import { keysOf, seenFirst } from './waiting.ts';

/** An answer is given anew for a junction that came only after this many times as long as one takes. */
const PATIENCE = 3;
/** ms that the hand rests before what it holds is solved as it would be once let go. */
const REST = 25;
/** ms that what was let go of waits for its junctions, and how few these must be; its preview is shown meanwhile. */
const AWAITED = 250;
const MOST_AWAITED = 2;
/** ms that junction threads stand still for an edit, unless its answers are painted before. */
const HELD = 150;
/** Bytes of solved junctions held beside those in use; the project keeps the others. */
const MOST_KEPT = 96e6;

/** An answer, and what it was made of. */
interface Fresh {
  readonly graph: Graph | null;
  /** What could be told of it at once, and the rest, or why there is none. */
  readonly parts: SolvedInParts | Refused;
  readonly waiting: readonly CellSpec[];
  readonly began: number;
}

/**
 * The solving thread's behaviour, without a thread: orders in, news out. Edits that arrive while one is
 * being solved are taken together, so that it is always the newest chip that is answered. With `hand`
 * an answer never waits for junctions: those not known yet count as ideal, and the answer is given
 * again as they come. While something is dragged, the chip as it would be is answered beside it, its
 * junctions to preview accuracy; nothing of that is kept. Where the hand rests, they are solved as they
 * would be once it lets go.
 */
export function solvingThread(
  tell: (news: News) => void,
  later: (work: () => void) => void,
  hand: CellHand | null = null,
  after: (work: () => void, ms: number) => void = (work, ms) => setTimeout(work, ms),
  held = atHand(),
): (order: Order) => void {
  let memory = emptyMemory(memoryStore(MOST_KEPT));
  let chip: Chip | null = null;
  let options: SolveOptions = {};
  let newest = 0;
  /** The work is asked for; which of the two chips is to be answered. */
  let asked = false;
  let due = false;
  let dragDue = false;
  /** The chip as it would be, and what it would be made from by which edit. */
  let drag: {
    readonly id: number;
    readonly chip: Chip;
    readonly base: Chip;
    readonly edit: ChipEdit;
  } | null = null;
  let sent: Graph | null = null;
  /**
   * The newest answer where it was told in short and not yet asked for as a whole; and whether its junctions wait
   * for that, since their threads would take what it needs to be painted.
   */
  let rest: { readonly id: number; readonly fresh: Fresh; readonly handsOn: boolean } | null = null;
  /** The newest edit came of no hand that waits for its junctions. */
  let unheld = false;
  /** The edit that is answered once its junctions are there; 0 where none is. */
  let awaiting = 0;
  let look: PlanBox | null = null;
  /** What pictures are drawn of: the chip answered last. */
  let last: { readonly chip: Chip; readonly result: Result } | null = null;
  /** The newest chip has no result, whatever its junctions are. */
  let stuck = false;
  /** Whether the chip is no longer the one that was opened. */
  let edited = false;
  /** Whether the last answer was the newest chip's own, with all that was known of its junctions then. */
  let settled = false;
  /** ms: when the last answer was ready, and how long it took. */
  let ready = 0;
  let took = 0;
  /** ms: when the last order came. */
  let ordered = 0;
  const quiet = (): number => (drag || asked ? 0 : performance.now() - Math.max(ordered, ready));
  const unkept = keeping(
    (key, solution) => tell({ kind: 'keep', cell: { key, bytes: encodeSolution(solution) } }),
    quiet,
    after,
  );
  // without threads for junctions an answer waits for them, and how it is compiled does not matter
  const exercise = hand
    ? exercising(() => chip && { chip, options, cells: memory.cells }, quiet, later, after)
    : null;
  const tidy = tidying(() => !drag && !asked, after, collector('last-resort'));
  /** Keys the project was asked for, and answers of it that are still to come. */
  const wanted = new Set<string>();
  let open = 0;
  const cancelled = new Set<number>();

  const outcomeOf = (result: () => Result): Outcome => {
    try {
      return { ok: true, result: result() };
    } catch (error) {
      return { ok: false, problem: refused(error) };
    }
  };
  const solved = (which: Chip, haste = hand !== null): Outcome =>
    outcomeOf(() => solve(which, { ...options, haste }, memory));
  const inParts = (which: Chip, preview: boolean): SolvedInParts | Refused => {
    try {
      return solveInParts(which, { ...options, haste: hand !== null, preview }, memory);
    } catch (error) {
      return refused(error);
    }
  };

  /**
   * The project is asked for what it kept, once for each junction. Of a chip that was just opened nothing is
   * solved before it has answered; after an edit it rarely has what is new, and is not waited for.
   */
  const handOn = (waiting: readonly CellSpec[]): void => {
    if (!hand) return;
    const fresh = keysOf(waiting).filter((key) => !wanted.has(key));
    if (fresh.length > 0) {
      for (const key of fresh) wanted.add(key);
      open += 1;
      tell({ kind: 'want', keys: fresh });
    }
    // Anew each time: one that came may have been a copy of others.
    if (open === 0 || edited) hand.solve(seenFirst(waiting, look), accuracyOf(options));
  };

  /** Solves a chip in haste; with what its junctions still wait for. */
  const answerTo = (which: Chip, preview: boolean): Fresh => {
    const began = performance.now();
    // a chip that cannot be solved gets no further than the one before it: its junctions are not wanted
    memory.cells.waiting = [];
    const parts = inParts(which, preview);
    stuck = !('first' in parts);
    let graph: Graph | null = null;
    try {
      graph = memory.graph(which);
    } catch {
      // the outcome says why there is none
    }
    last = 'first' in parts ? { chip: which, result: parts.first } : null;
    settled = !preview;
    ready = performance.now();
    took = ready - began;
    return { graph, parts, waiting: stuck ? [] : memory.cells.waiting, began };
  };
  const whole = ({ graph, parts, waiting }: Fresh): Answered => {
    const outcome = 'first' in parts ? outcomeOf(parts.whole) : { ok: false as const, problem: parts };
    const known = graph && graph === sent;
    sent = graph;
    return { graph: known ? 'same' : graph && shownGraph(graph), outcome, waiting: waiting.length };
  };
  /** The answer in short, which is soon there and soon shown; the whole of it is sent when it is asked for. */
  const tellShort = (which: Chip, fresh: Fresh): void => {
    const { parts, waiting, began } = fresh;
    const problem = 'first' in parts ? null : parts;
    rest = { id: newest, fresh, handsOn: unheld };
    const answers = verdicts({
      chip: which,
      result: 'first' in parts ? parts.first : null,
      trouble: problem ? `${problem.what} ${problem.remedy}` : '',
      waiting: waiting.length,
    });
    const { timeOrigin } = performance;
    const times = { began: timeOrigin + began, ready: timeOrigin + performance.now() };
    tell({ kind: 'short', id: newest, answers, waiting: waiting.length, times });
  };
  const answer = (): void => {
    asked = false;
    if (!chip) return;
    if (due && awaiting === 0) {
      due = false;
      const fresh = answerTo(chip, false);
      tellShort(chip, fresh);
      if (!unheld) handOn(fresh.waiting);
      unheld = false;
      if (!stuck && fresh.waiting.length === 0) exercise?.later();
    }
    if (!dragDue || !drag) return;
    dragDue = false;
    const { id } = drag;
    if (hand) beforehand(drag.chip, (cells) => held.solve(cells, memory.cells));
    const fresh = answerTo(drag.chip, true);
    const { waiting } = fresh;
    tell({ kind: 'dragged', id, ...whole(fresh) });
    hand?.solve(waiting, PREVIEW_ACCURACY);
    if (hand && waiting.length === 0 && !stuck)
      after(() => solveAhead(id), Math.max(0, REST - performance.now() + ordered));
  };
  /** Something done about a chip's junctions before it is answered; what is wrong with it the answer says. */
  const beforehand = (which: Chip, work: (cells: readonly CellSpec[]) => void): void => {
    try {
      work(memory.cut(which).cells);
    } catch {
      // the answer meets it again
    }
  };
  /** What would be asked for if the hand let go here, where it still is. */
  const solveAhead = (id: number): void => {
    if (drag?.id === id && !asked) handOver(drag.chip, true);
  };
  /** What a chip that the hand holds, or held, still lacks to full accuracy. */
  const handOver = (which: Chip, ahead: boolean): number => {
    if (!hand) return 0;
    const accuracy = accuracyOf(options);
    let count = 0;
    beforehand(which, (cells) => {
      const lacking = lackingCells(cells, accuracy, memory.cells);
      count = lacking.length;
      if (ahead || count > 0) hand.solve(seenFirst(lacking, look), accuracy, ahead);
    });
    return count;
  };
  /** Answers an edit when its junctions have come, or have taken too long. */
  const soonWithJunctions = (id: number): void => {
    awaiting = id;
    after(() => {
      if (awaiting === id) soon();
    }, AWAITED);
  };
  const work = (): void => {
    if (asked) return;
    asked = true;
    later(answer);
  };
  const soon = (): void => {
    due = true;
    awaiting = 0;
    work();
  };
  const dragSoon = (): void => {
    dragDue = true;
    work();
  };
  hand?.listen((cell, accuracy, found, left) => {
    settleWaiting(cell, accuracy, found, memory.cells);
    if (!(found instanceof Problem) && accuracy.flow <= accuracyOf(options).flow) {
      unkept.later(found.key, found.solution);
    }
    settled = false;
    if (stuck) return;
    // what is held is shown to preview accuracy, and that it has been
    if (drag && accuracy !== PREVIEW_ACCURACY) return;
    if (awaiting > 0 && left > 0) return;
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
    tell({ kind: 'swept', id, index, outcome: solved(variants[index]!, false) });
    later(() => sweep(id, variants, index + 1));
  };

  return (order) => {
    ordered = performance.now();
    switch (order.kind) {
      case 'picture':
        return tell({ kind: 'pictured', id: order.id, picture: pictureOf(order.cell, order.lines) });
      case 'look':
        look = order.box;
        return;
      case 'speak':
        showIn(order.units);
        return;
      case 'rest': {
        // a newer answer may have taken its place, or have been asked for already
        if (!rest) return;
        const { id, fresh, handsOn } = rest;
        rest = null;
        tell({ kind: 'solved', id, ...whole(fresh) });
        if (chip) tidy.later(chip.channels.length);
        hand?.hold(0);
        if (handsOn && !drag) handOn(fresh.waiting);
        return;
      }
      case 'kept':
        open -= 1;
        for (const { key, bytes } of order.cells) {
          const solution = decodeSolution(bytes);
          if (solution) memory.cells.store.put(key, solution);
        }
        // nothing was kept, and what is new is being solved already
        if (order.cells.length === 0 && edited) return;
        return soon();
      case 'load':
        memory = emptyMemory(memoryStore(MOST_KEPT));
        wanted.clear();
        unkept.clear();
        open = 0;
        edited = false;
        chip = order.chip;
        options = order.options;
        newest = order.id;
        sent = null;
        rest = null;
        last = null;
        drag = null;
        unheld = false;
        return soon();
      case 'drag': {
        if (!chip) return;
        if (order.edit) {
          try {
            const { id, edit } = order;
            if (!drag) held.begin();
            drag = { id, chip: applyEdit(chip, edit), base: chip, edit };
            // the hand went on: what was begun ahead of it would take the processor from its preview
            hand?.solve([], PREVIEW_ACCURACY);
            dragSoon();
          } catch {
            // there it could not stay: the answer before it stands
          }
          return;
        }
        if (!drag) return;
        drag = null;
        // what was answered last may be what was held, or without junctions that came meanwhile
        if (awaiting === 0 && (!settled || memory.cells.waiting.length > 0)) soon();
        return;
      }
      case 'edit': {
        if (!chip) return;
        unheld = !drag;
        // on two processors what they do would be taken from the answer and its frame
        if (unheld) hand?.hold(HELD);
        // what the hand lets go of was read and cut already
        newest = order.id;
        edited = true;
        if (drag?.base !== chip || !sameChanges(drag.edit, order.edit)) {
          chip = applyEdit(chip, order.edit);
          return soon();
        }
        chip = drag.chip;
        // its junctions take longer than an answer without them, which would be worse than the preview on screen
        const lacking = handOver(chip, false);
        return lacking > 0 && lacking <= MOST_AWAITED ? soonWithJunctions(order.id) : soon();
      }
      case 'try': {
        if (!chip) return;
        let outcome: Outcome;
        try {
          outcome = solved(applyEdit(chip, order.edit));
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

const sameChanges = (a: ChipEdit, b: ChipEdit): boolean =>
  JSON.stringify(a.changes) === JSON.stringify(b.changes);
