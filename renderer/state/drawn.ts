import type { Chip } from '../../solver/chip/chip.ts';
import type { Solver } from '../solving/solver.ts';
import type { Project } from './desk.ts';
import { createStore, type PatientStore, type Store } from './store.ts';

/** ms that what takes long to draw waits for the answer to a field's edit, so that the five answers are painted first. */
const ANSWER_FIRST = 60;
/** ms that the rest of the page waits for it: no more than would be seen at the field. */
const SOON = 40;

/**
 * Tells of a project that was held when its answer is there, at the latest `SOON` after the edit; in a turn of its
 * own, after the words of the answer.
 *
 * @returns called for every edit that is held
 */
export function toldWithAnswer(
  project: PatientStore<Project | null>,
  solver: Pick<Solver, 'solved' | 'short'>,
): () => void {
  let owed: ReturnType<typeof setTimeout> | undefined;
  const within = (ms: number): void => {
    clearTimeout(owed);
    owed = setTimeout(() => {
      owed = undefined;
      project.tell();
    }, ms);
  };
  solver.short.subscribe(() => {
    if (owed !== undefined && solver.short.get() !== null) within(0);
  });
  return () => within(SOON);
}

/**
 * The open chip for what takes long to draw. It is the newest, but while an edit waits for its answer the one
 * before: two processors that both draw and solve would do neither soon.
 *
 * @param waits whether an edit made now is one that waits; what the hand holds on the sheet never does
 */
export function drawnChip(
  project: Store<Project | null>,
  solver: Pick<Solver, 'solved'>,
  waits: () => boolean,
): Store<Chip | null> {
  const newest = (): Chip | null => project.get()?.document.chip ?? null;
  const drawn = createStore(newest());
  let owed: ReturnType<typeof setTimeout> | undefined;
  const draw = (): void => {
    clearTimeout(owed);
    owed = undefined;
    drawn.set(newest());
  };
  project.subscribe(() => {
    // that it was kept changes nothing that is drawn
    if (newest() === drawn.get() || owed !== undefined) return;
    // one that was just opened has no answer yet, and nothing before it
    const edited = drawn.get() !== null && newest() !== null && solver.solved.get().chip !== null;
    if (edited && waits()) owed = setTimeout(draw, ANSWER_FIRST);
    else draw();
  });
  let answered = solver.solved.get();
  solver.solved.subscribe(() => {
    const { chip, result } = answered;
    answered = solver.solved.get();
    // that one is on its way is no answer
    if (owed !== undefined && (answered.chip !== chip || answered.result !== result)) draw();
  });
  return drawn;
}

/** Whether the hand is at a field or a cell of a table. */
export const atField = (): boolean => focusIn('input, select, textarea, [role="gridcell"]');

/** The same beside the tables: one that is edited itself shows at once what was put into it. */
export const besideTables = (): boolean => atField() && !focusIn('.ledger *');

const focusIn = (places: string): boolean =>
  typeof document !== 'undefined' && (document.activeElement?.matches(places) ?? false);
