import type { Accuracy, CellSolution, ShapeSolution } from '../cell/cell.ts';
import type { CellSpec } from '../cell/cut/spec.ts';
import type { CellShape } from '../cell/shape.ts';
import { cellKey, solveCell } from '../cell/solve-cell.ts';
import { type CellStore, memoryStore, serves } from '../cell/store.ts';
import type { Finding } from '../problem/finding.ts';
import { Problem } from '../problem/problem.ts';
import type { PlacedCell } from './layout.ts';
import { NANOMETRES } from './stretches.ts';

/** Solved shapes, and which drawn shape is a copy of which; kept between solves. */
export interface CellMemory {
  readonly store: CellStore;
  /** By the text of the shape as drawn: its solution, or why it has none. */
  readonly known: Map<string, { readonly asked: Accuracy; readonly found: CellSolution | Problem }>;
  /** Cells that a solve in haste left for later, in drawing order. */
  waiting: CellSpec[];
}

/** `known` is cleared when it grows beyond what a day's editing needs to remember. */
const MOST_KNOWN = 20_000;

export function cellMemory(store: CellStore = memoryStore()): CellMemory {
  return { store, known: new Map(), waiting: [] };
}

/**
 * The cells of a drawing with their solutions. A cell that cannot be solved counts as ideal, with a
 * finding that says why.
 *
 * @param haste take only what is known already; what is not is left in `memory.waiting`
 */
export function placeCells(
  specs: readonly CellSpec[],
  accuracy: Accuracy,
  haste: boolean,
  memory: CellMemory,
): { readonly cells: PlacedCell[]; readonly findings: Finding[] } {
  if (memory.known.size > MOST_KNOWN) memory.known.clear();
  memory.waiting = [];
  const findings: Finding[] = [];
  const cells = specs.map((spec): PlacedCell => {
    const found = solutionOf(spec, accuracy, haste, memory);
    if (found === null) memory.waiting.push(spec);
    if (!(found instanceof Problem)) return { spec, solution: found };
    findings.push(idealFinding(spec, found));
    return { spec, solution: null };
  });
  return { cells, findings };
}

/** What memory holds of a cell, however accurate; null where it was not solved. */
export function knownSolution(spec: CellSpec, memory: CellMemory): CellSolution | null {
  const known = memory.known.get(textOf(spec.shape));
  return known && !(known.found instanceof Problem) ? known.found : null;
}

/** Cells that memory holds no such accurate solution of, shapes met several times once. */
export function lackingCells(
  specs: readonly CellSpec[],
  accuracy: Accuracy,
  memory: CellMemory,
): readonly CellSpec[] {
  const seen = new Set<string>();
  return specs.filter(({ shape, name }) => {
    const known = memory.known.get(textOf(shape));
    if (known && (known.found instanceof Problem || asAccurate(known.asked, accuracy))) return false;
    try {
      const key = cellKey(shape, name);
      if (seen.has(key)) return false;
      seen.add(key);
      const kept = memory.store.get(key);
      return !kept || !serves(kept, accuracy);
    } catch (error) {
      // it has no solution: the solve says why
      if (error instanceof Problem) return false;
      throw error;
    }
  });
}

/** Solves one waiting cell into memory. */
export function solveWaiting(spec: CellSpec, accuracy: Accuracy, memory: CellMemory): void {
  solutionOf(spec, accuracy, false, memory);
}

/** Takes what was found elsewhere for a waiting cell: its canonical solution, or why it has none. */
export function settleWaiting(
  spec: CellSpec,
  accuracy: Accuracy,
  found: { readonly key: string; readonly solution: ShapeSolution } | Problem,
  memory: CellMemory,
): void {
  if (found instanceof Problem) memory.known.set(textOf(spec.shape), { asked: accuracy, found });
  else memory.store.put(found.key, found.solution);
}

function solutionOf(
  spec: CellSpec,
  accuracy: Accuracy,
  haste: boolean,
  memory: CellMemory,
): CellSolution | Problem | null {
  const text = textOf(spec.shape);
  const known = memory.known.get(text);
  if (known && asAccurate(known.asked, accuracy)) return known.found;
  let found: CellSolution | Problem;
  try {
    if (haste) {
      const kept = memory.store.get(cellKey(spec.shape, spec.name));
      if (!kept || !serves(kept, accuracy)) return null;
    }
    found = solveCell(spec.shape, accuracy, memory.store, spec.name);
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    found = error;
  }
  memory.known.set(text, { asked: accuracy, found });
  return found;
}

const asAccurate = (known: Accuracy, asked: Accuracy): boolean =>
  known.flow <= asked.flow && (known.peak ?? 1) <= (asked.peak ?? 1);

const texts = new WeakMap<CellShape, string>();

/** A shape that an edit left alone is the same object, and its text is made once. */
function textOf(shape: CellShape): string {
  let text = texts.get(shape);
  if (text === undefined) {
    text = madeText(shape);
    texts.set(shape, text);
  }
  return text;
}

/** Local coordinates to a hundredth of a nanometre: what an edit elsewhere leaves alone reads the same. */
function madeText(shape: CellShape): string {
  const unit = NANOMETRES * 100;
  let text = `${Math.round(shape.depth * unit)} ${JSON.stringify(shape.profile)}`;
  for (const loop of shape.loops) {
    text += '|';
    for (const { x, y, bulge, tag } of loop) {
      text += `${Math.round(x * unit)},${Math.round(y * unit)},${bulge === 0 ? 0 : bulge.toPrecision(9)},${tag};`;
    }
  }
  return text;
}

function idealFinding(spec: CellSpec, problem: Problem): Finding {
  return {
    kind: 'cell-ideal',
    severity: 'warn',
    where: spec.name,
    says: `${problem.what} So ${spec.name} counts as an ideal junction.`,
    do: problem.remedy,
    at: [spec.origin[0] / NANOMETRES, spec.origin[1] / NANOMETRES],
  };
}
