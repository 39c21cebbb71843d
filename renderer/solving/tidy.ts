/** From so many channels on it is worth it: what an answer leaves behind is some 5 kB for each. */
export const LARGE = 10_000;
/** ms after an answer: its words and pictures are made of what the thread told. */
export const TIDIED_AFTER = 300;

/** Gives back the room that an answer to a large chip took beyond what is held. */
export interface Tidying {
  /** To be called when an answer has been told. */
  later(channels: number): void;
}

/**
 * The runtime lets garbage lie for some twenty seconds where nothing new is made: after 50,000 channels a thread held
 * 330 MB of which 60 were in use.
 *
 * @param idle whether nobody waits for an answer just now; one that is on its way will call anew
 * @param collect collects all garbage; undefined where the runtime does not offer it
 */
export function tidying(
  idle: () => boolean,
  after: (work: () => void, ms: number) => void,
  collect: (() => void) | undefined,
): Tidying {
  let newest = 0;
  return {
    later(channels) {
      newest += 1;
      const id = newest;
      if (!collect || channels < LARGE) return;
      after(() => {
        if (id === newest && idle()) collect();
      }, TIDIED_AFTER);
    },
  };
}

/**
 * That of engines which are started with `--expose-gc`, see `main/electron/engine.ts`; undefined in others.
 *
 * @param flavor 'last-resort' gives back more and takes longer
 */
export function collector(flavor: 'regular' | 'last-resort' = 'regular'): (() => void) | undefined {
  const { gc } = globalThis as { gc?: (options: { type: 'major'; flavor: string }) => void };
  return gc && (() => gc({ type: 'major', flavor }));
}
