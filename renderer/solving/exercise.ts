import { PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import { warmUp } from '../../solver/cell/warm-up.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import type { CellMemory } from '../../solver/lump/cells.ts';
import { emptyMemory } from '../../solver/memory.ts';
import { type SolveOptions, solveInParts } from '../../solver/solve.ts';
import { verdicts } from '../verdict/verdicts.ts';

/** Answers until the runtime has compiled most of what they take. */
const ROUNDS = 16;
/** Beyond this many channels a round is a wait of its own. */
const MOST_CHANNELS = 1000;

/**
 * Answers variants of a chip that nobody asked about, so that the first edit is answered as fast as the
 * hundredth. To be called while idle, a round at a time; false when there is no more to be done. Nothing of
 * it is kept but what is known of junctions, which it only reads.
 */
export function exercise(chip: Chip, options: SolveOptions, { store, known }: CellMemory): () => boolean {
  const memory = { ...emptyMemory(), cells: { store, known, waiting: [] } };
  let round = 0;
  return () => {
    const { channels, ports } = chip;
    if (round >= ROUNDS || channels.length === 0 || channels.length > MOST_CHANNELS) return false;
    // a width that was never drawn, then another drive
    const index = (round * 7) % channels.length;
    const wider = channels.map((channel, i) =>
      i === index
        ? { ...channel, width: [channel.width[0] + 1000, channel.width[1] + 1000] as const }
        : channel,
    );
    const variant = round % 2 === 0 ? { ...chip, channels: wider } : { ...chip, ports: [...ports] };
    round += 1;
    try {
      const parts = solveInParts(variant, { ...options, haste: true }, memory);
      verdicts({ chip: variant, result: parts.first, trouble: '', waiting: memory.cells.waiting.length });
      parts.whole();
      // what the hand will hold
      warmUp(1, PREVIEW_ACCURACY);
    } catch {
      // such a chip has no answer, and needs none to be fast
      return false;
    }
    return round < ROUNDS;
  };
}
