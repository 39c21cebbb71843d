import { appendFileSync, mkdirSync } from 'node:fs';
import { join, relative } from 'node:path';
import { expect, test } from 'vitest';

/** What a row of the verification table claims, beside the error that the run found. */
export interface Claim {
  /** The reported quantity, in words: "resistance of a rectangle". */
  readonly quantity: string;
  readonly check: 'exact' | 'published' | 'package' | 'manufactured' | 'order' | 'invariant' | 'band';
  /** The case: "h/W = 0.5". */
  readonly at: string;
  /** The source of the reference value, with 'from memory' where it was not re-read. */
  readonly source: string;
  /** What the error must not exceed (relative, unless `quantity` says otherwise). */
  readonly tolerance: number;
}

/** A claim with the error that its check found (null where that was not a number) and the file it ran in. */
export interface Row extends Claim {
  readonly error: number | null;
  readonly file: string;
}

const folder = process.env.CHANNELWRIGHT_VERIFY;
/** In a verification run some checks take many more cases than in the daily tests. */
const patience = folder ? { timeout: 1_200_000 } : {};

/**
 * A test that is also a row of the verification table: runs `measure`, which returns the error
 * (a magnitude), asserts it against the tolerance and, in a verification run, records both.
 */
export function verify(claim: Claim, measure: () => number | Promise<number>): void {
  test(`${claim.quantity}, ${claim.at} (${claim.check}: ${claim.source})`, patience, async () => {
    const error = await measure();
    if (folder) {
      mkdirSync(folder, { recursive: true });
      const row: Row = {
        ...claim,
        error: Number.isFinite(error) ? Math.abs(error) : null,
        file: relative(process.cwd(), expect.getState().testPath ?? ''),
      };
      appendFileSync(join(folder, `rows-${process.pid}.jsonl`), `${JSON.stringify(row)}\n`);
    }
    expect(Number.isFinite(error), `${claim.quantity}: the error is ${error}`).toBe(true);
    expect(Math.abs(error)).toBeLessThanOrEqual(claim.tolerance);
  });
}
