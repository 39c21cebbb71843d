import { describe, expect, test } from 'vitest';
import {
  align,
  array,
  join,
  mirror,
  offset,
  remove,
  type Shaping,
  split,
  turn,
  widen,
} from '../../renderer/edits/shape.ts';
import { toEdit } from '../../renderer/edits/to-edit.ts';
import { Spatial } from '../../renderer/sheet/spatial.ts';
import type { News } from '../../renderer/solving/messages.ts';
import { createSolver, type Thread } from '../../renderer/solving/solver.ts';
import { solvingThread } from '../../renderer/solving/thread.ts';
import { type Document, done, openDocument, redo, undo } from '../../renderer/state/document.ts';
import { emptyChip } from '../../renderer/testing/chips.ts';
import { FIRST_HABITS, type Scope, TOOL_NAMES, type ToolEvent } from '../../renderer/tools/tool.ts';
import { type Hand, take } from '../../renderer/tools/tools.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { solve } from '../../solver/solve.ts';

/**
 * The page without a screen: hands that do random things with the real tools. Nothing may throw, undo to the
 * start gives the chip to the byte, and what the solving thread answers is what a fresh solve gives.
 */

/** Mulberry32: the same hand for the same seed, everywhere. */
function random(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** A thread within this one: it answers when it is let, all orders that came before taken together. */
function heldThread(): Thread & { readonly letAnswer: () => void } {
  let listener: (news: News) => void = () => undefined;
  const waiting: (() => void)[] = [];
  const order = solvingThread(
    (news) => listener(structuredClone(news)),
    (work) => waiting.push(work),
  );
  return {
    post: (message) => order(structuredClone(message)),
    listen: (next) => {
      listener = next;
    },
    end: () => undefined,
    letAnswer: () => {
      for (let work = waiting.shift(); work; work = waiting.shift()) work();
    },
  };
}

const WIDTH = 76_000_000;
const HEIGHT = 26_000_000;
const EDITS = 200;
const MANY = 30;
/** Parts that one change may make: long serpentines and rows of posts are for the tests of the makers. */
const MOST = 60;
// junctions solved in space are held against fresh ones where they are made; here it is the edits that count
const IDEAL = { junctions: 'ideal' } as const;

class Player {
  readonly next: () => number;
  document: Document = openDocument(emptyChip());
  selection: readonly string[] = [];
  habits = FIRST_HABITS;
  hand: Hand;
  edits = 0;
  readonly thread = heldThread();
  readonly solver = createSolver(this.thread);

  constructor(seed: number) {
    this.next = random(seed);
    this.solver.load(this.document.chip, IDEAL);
    this.hand = take('select', this.scope());
  }

  scope(): Scope {
    const { chip } = this.document;
    return {
      chip,
      spatial: new Spatial(chip),
      layer: 'flow',
      selection: this.selection,
      reach: 400_000,
      grid: 500_000,
      habits: this.habits,
      centre: [WIDTH / 2, HEIGHT / 2],
    };
  }

  pick<T>(list: readonly T[]): T {
    return list[Math.floor(this.next() * list.length)]!;
  }

  place(): readonly [number, number] {
    const { chip } = this.document;
    // half of the time on something that is there
    if (this.next() < 0.5 && chip.channels.length > 0) return this.pick(this.pick(chip.channels).path);
    return [Math.round(this.next() * WIDTH), Math.round(this.next() * HEIGHT)];
  }

  make(alteration: Exclude<Shaping, string>): boolean {
    if ((alteration.put?.length ?? 0) > MOST) return false;
    if (alteration.put?.some((part) => part.kind === 'channel' && part.value.path.length > 24)) return false;
    try {
      const edit = toEdit(this.document.chip, alteration);
      if (edit.changes.length === 0) return false;
      const next = done(this.document, edit);
      this.document = next;
      this.solver.edit(edit, next.chip);
      this.edits += 1;
      return true;
    } catch (error) {
      // a change that makes no chip is refused in words, and nothing has changed
      if (!(error instanceof Problem)) throw error;
      return false;
    }
  }

  event(event: ToolEvent): void {
    const { hand, alter, select, habits, goes } = this.hand.on(event, this.scope());
    this.hand = hand;
    if (habits) this.habits = { ...this.habits, ...habits };
    const made = alter ? this.make(alter) : true;
    if (select && made) this.selection = select;
    if (goes) this.hand = take('select', this.scope());
    this.hand.preview(this.scope());
  }

  gesture(): void {
    const free = this.next() < 0.2;
    const extend = this.next() < 0.2;
    const from = this.place();
    const to = this.place();
    this.event({ kind: 'move', at: from, free });
    this.event({ kind: 'down', at: from, free, extend });
    const way = this.next();
    if (way < 0.5) {
      this.event({ kind: 'move', at: [(from[0] + to[0]) / 2, (from[1] + to[1]) / 2], free, extend });
      this.event({ kind: 'move', at: to, free, extend });
      this.event({ kind: 'up', at: to, free, extend });
    } else this.event({ kind: 'up', at: from, free, extend });
  }

  keys(): void {
    const typed = this.pick([
      '4 mm',
      '7',
      '12 mm, 9 mm',
      '45',
      '120 um',
      '3 kPa',
      '-2',
      'nonsense',
      '0',
      '1e3 mm',
    ]);
    const events: ToolEvent[] = [
      ...[...typed].map((text): ToolEvent => ({ kind: 'type', text })),
      ...(this.next() < 0.3 ? [{ kind: 'next' } as const] : []),
      this.next() < 0.4
        ? {
            kind: 'arrow',
            direction: this.pick([
              [1, 0],
              [0, 1],
              [-1, 0],
              [0, -1],
            ] as const),
            far: this.next() < 0.3,
          }
        : { kind: 'accept' },
      ...(this.next() < 0.3 ? [{ kind: 'rub' } as const] : []),
      ...(this.next() < 0.3 ? [{ kind: 'again' } as const] : []),
    ];
    for (const event of events) this.event(event);
  }

  shape(): void {
    const { chip } = this.document;
    const refs = this.selection;
    const made = this.pick<() => Shaping>([
      () => turn(chip, refs, this.pick([90, 180, 30])),
      () => mirror(chip, refs, this.pick(['upright', 'level'] as const)),
      () => align(chip, refs, this.pick(['left', 'top', 'middle across'] as const)),
      () => array(chip, refs, 2, [1_000_000, 2_000_000]),
      () => offset(chip, refs, 700_000),
      () => split(chip, refs),
      () => join(chip, refs),
      () => (this.next() < 0.4 ? remove(chip, refs) : 'not now'),
      () => widen(chip, refs, 50_000 + Math.round(this.next() * 400_000)),
    ])();
    if (typeof made !== 'string' && chip.channels.length < 400) this.make(made);
  }

  back(): void {
    const moved = this.next() < 0.7 ? undo(this.document) : redo(this.document);
    if (!moved) return;
    this.document = moved.document;
    this.solver.edit(moved.edit, moved.document.chip);
    const { chip } = moved.document;
    const ids = new Set(
      [...chip.channels, ...chip.chambers, ...chip.ports, ...chip.vias].map((part) => part.id),
    );
    this.selection = this.selection.filter((ref) => ids.has(ref.slice(ref.indexOf(':') + 1)));
  }

  /** Heaps of parts over one another make every answer slow and prove nothing more. */
  thin(): void {
    const { channels } = this.document.chip;
    if (channels.length <= MANY) return;
    const refs = channels.filter(() => this.next() < 0.7).map((channel) => `channel:${channel.id}`);
    const made = remove(this.document.chip, refs);
    if (typeof made !== 'string') this.make(made);
    this.selection = [];
  }

  turn(): void {
    this.thin();
    const what = this.next();
    if (what < 0.12) this.hand = take(this.pick(TOOL_NAMES), this.scope());
    else if (what < 0.62) this.gesture();
    else if (what < 0.74) this.keys();
    else if (what < 0.78) this.event({ kind: 'leave' });
    else if (what < 0.92) this.shape();
    else this.back();
  }

  /** The live answer against one from nothing. */
  compare(): void {
    const { chip } = this.document;
    this.thread.letAnswer();
    const live = this.solver.solved.get();
    expect(live.busy).toBe(false);
    expect(live.chip).toBe(chip);
    let fresh: ReturnType<typeof solve>;
    try {
      fresh = solve(chip, IDEAL);
    } catch (error) {
      if (!(error instanceof Problem)) throw error;
      expect(live.problem).toEqual({ what: error.what, where: error.where, remedy: error.remedy });
      return;
    }
    expect(live.problem).toBeNull();
    expect(live.result).toEqual(fresh);
  }
}

describe('random hands', () => {
  test.each(Array.from({ length: 100 }, (_, i) => i + 1))(
    'seed %d: 200 edits, undone to the start',
    (seed) => {
      const player = new Player(seed);
      const start = JSON.stringify(player.document.chip);
      let turns = 0;
      while (player.edits < EDITS) {
        player.turn();
        turns += 1;
        if (turns % 60 === 0) player.compare();
        expect(turns).toBeLessThan(50_000);
      }
      player.compare();
      const end = JSON.stringify(player.document.chip);
      let steps = 0;
      for (let moved = undo(player.document); moved; moved = undo(player.document)) {
        player.document = moved.document;
        steps += 1;
      }
      expect(JSON.stringify(player.document.chip)).toBe(start);
      for (; steps > 0; steps -= 1) player.document = redo(player.document)!.document;
      expect(JSON.stringify(player.document.chip)).toBe(end);
    },
  );
});
