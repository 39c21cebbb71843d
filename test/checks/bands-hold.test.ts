import { beforeAll, describe } from 'vitest';
import type { Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';
import { verify } from '../verify/row.ts';
import { bandChip } from './band-chips.ts';

/**
 * Whether bands hold what they say: chips solved as people solve them against the same with junctions solved
 * much finer. A dozen chips in every test run; all seventy-two, finer still, in a verification run.
 */
const WHOLE = process.env.CHANNELWRIGHT_VERIFY !== undefined;
const CHIPS = WHOLE ? 72 : 12;
const [ASKED, REFINED] = WHOLE ? [0.005, 0.001] : [0.02, 0.003];
const HOUR = 3.6e6;

/** Errors below this are those of the refined solve as much as of the other, and told as none. */
const LEAST = 1e-6;

/** True relative errors with the band that was told for each. */
type Pairs = [off: number, band: number][];
interface Seen {
  readonly flows: Pairs;
  readonly pressures: Pairs;
  readonly peaks: Pairs;
}
const nothing = (): Seen => ({ flows: [], pressures: [], peaks: [] });

const highest = ({ ports }: Result): number => Math.max(...ports.map(({ pressure }) => pressure));
const inChannels = ({ channels }: Result): number =>
  Math.max(...channels.flatMap(({ pieces }) => pieces.map(({ peakWallShear }) => peakWallShear ?? 0)));
const anywhere = (result: Result): number =>
  Math.max(inChannels(result), ...result.cells.map(({ peakWallShear }) => peakWallShear ?? 0));

function compare(told: Result, refined: Result, peak: (result: Result) => number, seen: Seen): void {
  const add = (pairs: Pairs, got: number, wanted: number, band: number): void => {
    pairs.push([Math.abs(got / wanted - 1), band]);
  };
  told.ports.forEach(({ flow, share, band }, i) => {
    add(seen.flows, flow!, refined.ports[i]!.flow!, band!.flow);
    add(seen.flows, share!, refined.ports[i]!.share!, band!.share);
  });
  add(seen.pressures, highest(told), highest(refined), told.bands!.pressure);
  add(seen.peaks, peak(told), peak(refined), told.bands!.shear);
}

/** Share of those that lie outside their band. */
const outside = (pairs: Pairs): number =>
  pairs.filter(([off, band]) => off > band + LEAST).length / pairs.length;

/** How many times the band is the true error, in the middle of those that have one. */
function median(pairs: Pairs): number {
  const times = pairs.flatMap(([off, band]) => (off > LEAST ? [band / off] : [])).sort((a, b) => a - b);
  return times[times.length >> 1]!;
}

describe('bands hold the true error and are not much wider', () => {
  const solved = nothing();
  const ideal = nothing();
  beforeAll(() => {
    for (let seed = 0; seed < CHIPS; seed += 1) {
      const chip = bandChip(seed);
      const refined = solve(chip, { accuracy: REFINED });
      compare(solve(chip, { accuracy: ASKED }), refined, anywhere, solved);
      // What corners of junctions bear is not known before they are solved.
      compare(solve(chip, { junctions: 'ideal' }), refined, inChannels, ideal);
    }
  }, HOUR);

  const cases: [of: string, how: string, pairs: Pairs][] = [
    ['flows and shares', `junctions solved to ${ASKED}`, solved.flows],
    ['largest wall shear', `junctions solved to ${ASKED}`, solved.peaks],
    ['flows and shares', 'ideal junctions', ideal.flows],
    ['driving pressure', 'ideal junctions', ideal.pressures],
    ['largest wall shear in channels', 'ideal junctions', ideal.peaks],
  ];
  const source = `the same chips with junctions solved to ${REFINED}`;
  for (const [of, how, pairs] of cases) {
    const at = `${CHIPS} chips, ${how}`;
    verify({ quantity: `${of}: share outside its band`, check: 'band', at, source, tolerance: 0.05 }, () =>
      outside(pairs),
    );
    verify(
      { quantity: `${of}: band over true error, median`, check: 'band', at, source, tolerance: 10 },
      () => median(pairs),
    );
  }
});
