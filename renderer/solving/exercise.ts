import { PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import { warmUp } from '../../solver/cell/warm-up.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import type { CellMemory } from '../../solver/lump/cells.ts';
import { emptyMemory, type Memory } from '../../solver/memory.ts';
import { type SolveOptions, solveInParts } from '../../solver/solve.ts';
import { verdicts } from '../verdict/verdicts.ts';

/** Answers until the runtime has compiled nearly all that they take; half as many are twice as slow afterwards. */
const ROUNDS = 96;
/** Junctions solved beside them, which takes fewer. */
const CELLS = 64;
/** Beyond this many channels a round is a wait of its own. */
const MOST_CHANNELS = 1000;
/** ms without an order or an answer before a round, and before they go on after one. */
export const IDLE = 1000;

/** An answered chip that nobody asks about just now. */
export interface Answerable {
  readonly chip: Chip;
  readonly options: SolveOptions;
  /** What is known of its junctions; it is only read. */
  readonly cells: CellMemory;
}

/** What an idle solving thread does so that the first edit is answered as fast as the hundredth. */
export interface Exercise {
  /** To be called when a chip is answered; the rounds follow when nothing has gone on for a while. */
  later(): void;
}

/**
 * @param subject what may be answered now; null while there is nothing
 * @param quiet ms since something went on; 0 while it does
 * @param later after all messages that have come
 */
export function exercising(
  subject: () => Answerable | null,
  quiet: () => number,
  later: (work: () => void) => void,
  after: (work: () => void, ms: number) => void,
): Exercise {
  let begun = false;
  let round = 0;
  let memory: Memory | null = null;
  const turn = (): void => {
    const given = subject();
    if (!given || quiet() < IDLE) {
      // an edit is exercise too, and another memory costs a round
      memory = null;
      after(turn, IDLE);
      return;
    }
    const { store, known } = given.cells;
    memory ??= { ...emptyMemory(), cells: { store, known, waiting: [] } };
    if (oneRound(given, memory, round)) {
      round += 1;
      later(turn);
    } else memory = null;
  };
  return {
    later() {
      if (begun) return;
      begun = true;
      after(turn, IDLE);
    },
  };
}

/** A width that was never drawn, then another drive, and so on; false when there is no more to be done. */
function oneRound({ chip, options }: Answerable, memory: Memory, round: number): boolean {
  const { channels, ports } = chip;
  if (round >= ROUNDS || channels.length === 0 || channels.length > MOST_CHANNELS) return false;
  const index = (round * 7) % channels.length;
  const by = 1000 * (1 + Math.floor(round / 2));
  const wider = channels.map((channel, i) =>
    i === index ? { ...channel, width: [channel.width[0] + by, channel.width[1] + by] as const } : channel,
  );
  const variant = round % 2 === 0 ? { ...chip, channels: wider } : { ...chip, ports: [...ports] };
  try {
    const parts = solveInParts(variant, { ...options, haste: true }, memory);
    verdicts({ chip: variant, result: parts.first, trouble: '', waiting: memory.cells.waiting.length });
    parts.whole();
    // what the hand will hold
    if (round < CELLS) warmUp(1, PREVIEW_ACCURACY);
  } catch {
    // such a chip has no answer, and needs none to be fast
    return false;
  }
  return true;
}
