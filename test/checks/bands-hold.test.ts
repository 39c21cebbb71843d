import { beforeAll, describe } from 'vitest';
import { verify } from '../verify/row.ts';
import { bandChip } from './band-chips.ts';
import { apartChip } from './band-chips-apart.ts';
import { bandClaims, type Measured, measureBands } from './band-pairs.ts';

/**
 * Whether bands hold what they say: chips solved as people solve them against the same with junctions solved
 * much finer. The factors of the bands were measured on the first set; the second, of other families and
 * another seed, had no part in that. A few chips of each in every test run; all of them, finer still, in a
 * verification run.
 */
const WHOLE = process.env.CHANNELWRIGHT_VERIFY !== undefined;
const accuracies = WHOLE ? { asked: 0.005, finer: 0.001 } : { asked: 0.02, finer: 0.003 };
const HOUR = 3.6e6;

describe.each([
  ['chips that the factors were measured on', bandChip, WHOLE ? 72 : 12],
  ['chips of other families', apartChip, WHOLE ? 64 : 8],
] as const)('bands hold the true error and are not much wider: %s', (name, chipOf, count) => {
  let measured: Measured;
  beforeAll(() => {
    const chips = Array.from({ length: count }, (_, seed) => chipOf(seed));
    measured = measureBands(chips, accuracies.asked, accuracies.finer);
  }, HOUR);
  for (const [claim, error] of bandClaims(`${count} ${name}`, accuracies, () => measured))
    verify(claim, error);
});
