import type { Desk } from '../state/desk.ts';

export type Reading = typeof import('./from-outside.ts');

let brought: Promise<Reading> | null = null;

/** Begins to bring in what reads descriptions and edits; asked for again where it did not come. */
export function bringReading(): Promise<Reading> {
  brought ??= import('./from-outside.ts').catch((error: unknown) => {
    brought = null;
    throw error;
  });
  return brought;
}

/** Does `work` with it; where it cannot be brought in, because the program is gone, that is said. */
export async function reading(
  desk: Pick<Desk, 'say'>,
  work: (reading: Reading) => void | Promise<void>,
): Promise<void> {
  let there: Reading;
  try {
    there = await bringReading();
  } catch {
    desk.say('The program does not answer; start it again and do this once more.');
    return;
  }
  await work(there);
}
