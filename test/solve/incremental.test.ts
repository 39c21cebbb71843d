import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { type ChipEdit, makeEdit } from '../../solver/chip/edit.ts';
import type { Result } from '../../solver/chip/result.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { Session } from '../../solver/session.ts';
import { solve } from '../../solver/solve.ts';
import { random } from '../chip/random-drawing.ts';
import { comb, workEdit } from './random-work.ts';

const SEEDS = 100;
const EDITS = 200;
const IDEAL = { junctions: 'ideal' } as const;

/** A result, or the problem that stands in its way. */
function outcome(work: () => Result): Result | string {
  try {
    return work();
  } catch (error) {
    if (error instanceof Problem) return error.message;
    throw error;
  }
}

/** Flows below this share of the whole keep fewer digits than the comparison asks; they count by it. */
const SMALL = 1e-6;

/**
 * Largest relative difference between two results, field by field; Infinity where they differ in kind.
 * @param total flow that enters the chip, m^3/s
 */
function difference(a: unknown, b: unknown, total: number): number {
  if (typeof a === 'number' && typeof b === 'number') {
    return a === b ? 0 : Math.abs(a - b) / Math.max(Math.abs(a), Math.abs(b));
  }
  if (typeof a !== 'object' || a === null || typeof b !== 'object' || b === null) {
    return a === b ? 0 : Number.POSITIVE_INFINITY;
  }
  const one = a as Record<string, unknown>;
  const two = b as Record<string, unknown>;
  const flow = typeof one.flow === 'number' ? Math.abs(one.flow) : null;
  // At rest every flow is round-off.
  const weight = flow === null ? 1 : total === 0 ? 0 : Math.min(1, flow / (SMALL * total));
  let worst = 0;
  for (const key of new Set([...Object.keys(a), ...Object.keys(b)])) {
    // The balance of a chip is round-off itself, and pressure drops over next to nothing are too: both are held elsewhere.
    if (key === 'balance' || key === 'pressureDrop') continue;
    worst = Math.max(worst, weight * difference(one[key], two[key], total));
  }
  return worst;
}

const totalOf = (result: Result): number =>
  result.ports.reduce((sum, port) => sum + Math.max(0, port.flow ?? 0), 0);

test(`${SEEDS} sequences of ${EDITS} edits: the live result is the fresh one, and undone to the start the chip is the same to the byte`, () => {
  let solved = 0;
  let refused = 0;
  for (let seed = 1; seed <= SEEDS; seed += 1) {
    const next = random(seed);
    const first = comb(3 + (seed % 5));
    const text = writeDescription(first);
    const session = new Session();
    const undo: ChipEdit[] = [];
    let chip: Chip = first;
    for (let step = 0; step < EDITS; step += 1) {
      if (chip.channels.length < 2) break;
      const edit = workEdit(chip, next, step);
      try {
        const made = makeEdit(chip, edit);
        undo.push(made.inverse);
        chip = made.chip;
      } catch (error) {
        if (!(error instanceof Problem)) throw error;
        refused += 1;
        continue;
      }
      const live = outcome(() => session.update(chip, IDEAL));
      const fresh = outcome(() => solve(chip, IDEAL));
      if (typeof fresh === 'string' || typeof live === 'string') {
        expect(live, `seed ${seed}, step ${step}`).toBe(fresh);
        // As a person does, an edit that leaves nothing to solve is mostly taken back.
        if (next() < 0.9) {
          const back = makeEdit(chip, undo.at(-1)!);
          undo.push(back.inverse);
          chip = back.chip;
        }
      } else {
        solved += 1;
        expect(difference(live, fresh, totalOf(fresh)), `seed ${seed}, step ${step}`).toBeLessThanOrEqual(
          1e-9,
        );
      }
    }
    for (const back of undo.reverse()) chip = makeEdit(chip, back).chip;
    expect(writeDescription(chip) === text, `seed ${seed}`).toBe(true);
  }
  // The walk must mostly stay among chips that can be solved, or it would prove little.
  expect(solved).toBeGreaterThan((SEEDS * EDITS) / 2);
  expect(refused).toBeLessThan((SEEDS * EDITS) / 4);
}, 300_000);
