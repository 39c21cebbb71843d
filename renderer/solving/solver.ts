import type { Chip } from '../../solver/chip/chip.ts';
import type { ChipEdit } from '../../solver/chip/edit.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { SolveOptions } from '../../solver/solve.ts';
import { createStore, type Store } from '../state/store.ts';
import type { Answer } from '../verdict/answer.ts';
import type { UnitHabit } from '../words/figure.ts';
import type { KeptCell, News, Order, Outcome, PlacedPicture, PlanBox, Refused } from './messages.ts';
import type { ShownGraph } from './shown-graph.ts';

/** The newest answer and what it is of. */
export interface Solved {
  /** The chip that was answered; null before the first answer. */
  readonly chip: Chip | null;
  readonly result: Result | null;
  /** Why there is no result. */
  readonly problem: Refused | null;
  /** The drawing as the fluid reads it, and the chip it was read from. */
  readonly graph: ShownGraph | null;
  readonly graphChip: Chip | null;
  /** The answer to a newer chip is on its way. */
  readonly busy: boolean;
  /** Junctions that still count as ideal in this result because they are being solved. */
  readonly waiting: number;
}

const NOTHING: Solved = {
  chip: null,
  result: null,
  problem: null,
  graph: null,
  graphChip: null,
  busy: false,
  waiting: 0,
};

/** What would come of what the hand is about to do: to preview accuracy, for the eye alone. */
export interface Live {
  readonly chip: Chip;
  readonly result: Result | null;
  readonly problem: Refused | null;
  readonly graph: ShownGraph | null;
  readonly waiting: number;
}

/** A thread as seen from here; a test may put a function in its place. */
export interface Thread {
  post(order: Order): void;
  listen(listener: (news: News) => void): void;
  end(): void;
}

export interface Solver {
  readonly solved: Store<Solved>;
  /** The five answers of a newer result that is on its way, in its stead; null when it is there. */
  readonly short: Store<readonly Answer[] | null>;
  /** Null while nothing is dragged, and until the first answer to it. */
  readonly live: Store<Live | null>;
  load(chip: Chip, options: SolveOptions): void;
  /** Answers known to hold for the chip just loaded: they stand until it is solved with all its junctions, or edited. */
  presume(answers: readonly Answer[]): void;
  edit(edit: ChipEdit, chip: Chip): void;
  /** The chip as it would be, with the edit that would make it and what is being drawn; null when the hand has let go. */
  drag(would: { readonly edit: ChipEdit; readonly chip: Chip; readonly drawn?: string | null } | null): void;
  /** What would come of an edit. */
  attempt(edit: ChipEdit): Promise<Outcome>;
  /** Results of variants, in order as they come; returns how to stop. */
  sweep(edits: readonly ChipEdit[], each: (index: number, outcome: Outcome) => void): () => void;
  /** What is to be drawn inside a solved junction; null where it is not solved (any more). */
  picture(cell: string, lines: number): Promise<PlacedPicture | null>;
  /** What is on screen: its junctions are solved before the others. */
  look(box: PlanBox): void;
  /** The units in which a person reads figures. */
  speak(units: UnitHabit): void;
  end(): void;
}

/** Where the project keeps solved junctions; what it cannot give only costs time. */
export interface KeptCells {
  get(keys: readonly string[]): Promise<readonly KeptCell[]>;
  put(cell: KeptCell): void;
}
const NOWHERE: KeptCells = { get: () => Promise.resolve([]), put: () => undefined };

/** @param painted calls when the next frame is on screen */
export function createSolver(
  thread: Thread,
  kept: KeptCells = NOWHERE,
  painted: (then: () => void) => void = nextPaint,
): Solver {
  const solved = createStore<Solved>(NOTHING);
  const short = createStore<readonly Answer[] | null>(null);
  const live = createStore<Live | null>(null);
  /** Chips as they would be, by number; empty when the hand has let go. */
  const dragged = new Map<number, { readonly chip: Chip; readonly drawn?: string | null }>();
  let graph: ShownGraph | null = null;
  /** Chips asked about and not yet answered, by number. */
  const asked = new Map<number, Chip>();
  const tries = new Map<number, (outcome: Outcome) => void>();
  const pictures = new Map<number, (picture: PlacedPicture | null) => void>();
  const sweeps = new Map<number, (index: number, outcome: Outcome) => void>();
  let last = 0;
  const next = (): number => {
    last += 1;
    return last;
  };
  let newest = 0;
  /** Whether `short` is what was presumed. */
  let presumed = false;

  thread.listen((news) => {
    if (news.kind === 'tried') {
      tries.get(news.id)?.(news.outcome);
      tries.delete(news.id);
      return;
    }
    if (news.kind === 'pictured') {
      pictures.get(news.id)?.(news.picture);
      pictures.delete(news.id);
      return;
    }
    if (news.kind === 'short') {
      if (!presumed && (asked.has(news.id) || news.id === newest)) short.set(news.answers);
      painted(() => thread.post({ kind: 'rest' }));
      return;
    }
    if (news.kind === 'want') {
      void kept.get(news.keys).then((cells) => thread.post({ kind: 'kept', cells }));
      return;
    }
    if (news.kind === 'keep') {
      kept.put(news.cell);
      return;
    }
    if (news.kind === 'swept') {
      sweeps.get(news.id)?.(news.index, news.outcome);
      return;
    }
    // One thread reads one drawing after the other, whichever chip it is of.
    if (news.graph !== 'same') graph = news.graph;
    if (news.kind === 'dragged') {
      const would = dragged.get(news.id);
      for (const id of dragged.keys()) if (id < news.id) dragged.delete(id);
      if (!would) return;
      const { result, problem } = told(news.outcome);
      live.set({
        chip: would.chip,
        graph,
        waiting: news.waiting,
        problem,
        result: result && withoutOpenEnd(result, would.drawn),
      });
      return;
    }
    // The same chip is answered again as its junctions come.
    const chip = asked.get(news.id) ?? (news.id === newest ? solved.get().chip : null);
    if (!chip) return;
    for (const id of [...asked.keys()]) if (id <= news.id) asked.delete(id);
    const busy = news.id !== newest;
    presumed &&= news.outcome.ok && news.waiting > 0;
    if (!presumed) short.set(null);
    solved.set({
      chip,
      ...told(news.outcome),
      graph,
      graphChip: graph === null ? null : chip,
      busy,
      waiting: news.waiting,
    });
    // what the hand let go of is answered: the preview has had its time
    if (!busy && dragged.size === 0) live.set(null);
  });

  return {
    solved,
    short,
    live,
    load(chip, options) {
      const id = next();
      newest = id;
      asked.clear();
      asked.set(id, chip);
      dragged.clear();
      live.set(null);
      presumed = false;
      short.set(null);
      solved.set({ ...NOTHING, busy: true });
      thread.post({ kind: 'load', id, chip, options });
    },
    presume(answers) {
      const { chip, busy, waiting } = solved.get();
      // it came before
      if (chip && !busy && waiting === 0) return;
      presumed = true;
      short.set(answers);
    },
    edit(edit, chip) {
      const id = next();
      newest = id;
      presumed = false;
      asked.set(id, chip);
      solved.patch({ busy: true });
      thread.post({ kind: 'edit', id, edit });
    },
    drag(would) {
      if (would) {
        const id = next();
        dragged.set(id, would);
        thread.post({ kind: 'drag', id, edit: would.edit });
      } else if (dragged.size > 0) {
        dragged.clear();
        thread.post({ kind: 'drag', id: next(), edit: null });
        // let go without a change
        if (!solved.get().busy) live.set(null);
      }
    },
    attempt(edit) {
      const id = next();
      return new Promise((resolve) => {
        tries.set(id, resolve);
        thread.post({ kind: 'try', id, edit });
      });
    },
    sweep(edits, each) {
      const id = next();
      sweeps.set(id, each);
      thread.post({ kind: 'sweep', id, edits });
      return () => {
        if (sweeps.delete(id)) thread.post({ kind: 'cancel', id });
      };
    },
    picture(cell, lines) {
      const id = next();
      return new Promise((resolve) => {
        pictures.set(id, resolve);
        thread.post({ kind: 'picture', id, cell, lines });
      });
    },
    look: (box) => thread.post({ kind: 'look', box }),
    speak: (units) => thread.post({ kind: 'speak', units }),
    end: () => thread.end(),
  };
}

/** The end of a channel that is being drawn is where the hand is: that it leads nowhere yet is no finding. */
function withoutOpenEnd(result: Result, drawn: string | null | undefined): Result {
  if (!drawn) return result;
  const findings = result.findings.filter(
    ({ kind, where }) => kind !== 'dead-end' || where.replace(/#\d+$/, '') !== drawn,
  );
  return { ...result, findings };
}

const told = (outcome: Outcome): { readonly result: Result | null; readonly problem: Refused | null } =>
  outcome.ok ? { result: outcome.result, problem: null } : { result: null, problem: outcome.problem };

/** ms after which a page that paints nothing, because nobody sees it, goes on all the same. */
const UNSEEN = 100;

/** When the next frame is painted; at once where there are no frames. */
function nextPaint(then: () => void): void {
  if (typeof requestAnimationFrame === 'undefined') {
    then();
    return;
  }
  let done = false;
  const once = (): void => {
    if (done) return;
    done = true;
    then();
  };
  const unseen = setTimeout(once, UNSEEN);
  requestAnimationFrame(() => {
    clearTimeout(unseen);
    // a message comes after the frame that is being made
    const { port1, port2 } = new MessageChannel();
    port1.onmessage = once;
    port2.postMessage(null);
  });
}

/** The real thread; it begins with the first order, or when it is told to: beside a page that is being drawn it would hold that up. */
export function workerThread(): Thread & { begin(): void } {
  const listeners: ((news: News) => void)[] = [];
  let worker: Worker | null = null;
  const begun = (): Worker => {
    if (worker) return worker;
    worker = new Worker(new URL('./worker.ts', import.meta.url), { type: 'module', name: 'solver' });
    worker.addEventListener('message', (event: MessageEvent<News>) => {
      for (const listener of listeners) listener(event.data);
    });
    return worker;
  };
  return {
    post: (order) => begun().postMessage(order),
    listen: (listener) => void listeners.push(listener),
    end: () => worker?.terminate(),
    begin: () => void begun(),
  };
}
