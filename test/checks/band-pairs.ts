import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';
import type { Claim } from '../verify/row.ts';

/** Chips solved as people solve them against the same with junctions solved much finer. */

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

export interface Measured {
  readonly solved: Seen;
  readonly ideal: Seen;
}

const highest = ({ ports }: Result): number => Math.max(...ports.map(({ pressure }) => pressure));
const inChannels = ({ channels }: Result): number =>
  Math.max(...channels.flatMap(({ pieces }) => pieces.map(({ peakWallShear }) => peakWallShear ?? 0)));

/**
 * The largest wall shear of channels as told, and as the refined flow makes it at the same place: shear there goes
 * with the flow. (Channels of an ideal junction reach to its middle, those of a solved one to its faces: where
 * they taper, their largest shears are not those of one place.)
 */
function samePlace(told: Result, refined: Result): [number, number] {
  let most = { shear: 0, flow: 0, other: 0 };
  told.channels.forEach(({ pieces }, c) => {
    for (const { peakWallShear, flow, along } of pieces) {
      // One that lies in a solved junction whole has no flow of its own to compare with.
      if ((peakWallShear ?? 0) <= most.shear || refined.channels[c]!.pieces.length === 0) continue;
      const middle = (along![0] + along![1]) / 2;
      const off = (piece: (typeof pieces)[number]): number =>
        Math.max(piece.along![0] - middle, middle - piece.along![1]);
      const same = refined.channels[c]!.pieces.reduce((a, b) => (off(b) < off(a) ? b : a));
      most = { shear: peakWallShear!, flow: flow!, other: same.flow! };
    }
  });
  return [most.shear, most.shear * Math.abs(most.other / most.flow)];
}
const anywhere = (result: Result): number =>
  Math.max(inChannels(result), ...result.cells.map(({ peakWallShear }) => peakWallShear ?? 0));

function compare(told: Result, refined: Result, peaks: readonly [number, number], seen: Seen): void {
  const add = (pairs: Pairs, got: number, wanted: number, band: number): void => {
    pairs.push([Math.abs(got / wanted - 1), band]);
  };
  told.ports.forEach(({ flow, share, band }, i) => {
    add(seen.flows, flow!, refined.ports[i]!.flow!, band!.flow);
    add(seen.flows, share!, refined.ports[i]!.share!, band!.share);
  });
  add(seen.pressures, highest(told), highest(refined), told.bands!.pressure);
  add(seen.peaks, ...peaks, told.bands!.shear);
}

/** Solves each chip to `asked` and with ideal junctions, and holds both against the same solved to `finer`. */
export function measureBands(chips: readonly Chip[], asked: number, finer: number): Measured {
  const measured = { solved: nothing(), ideal: nothing() };
  for (const chip of chips) {
    const refined = solve(chip, { accuracy: finer });
    const solved = solve(chip, { accuracy: asked });
    compare(solved, refined, [anywhere(solved), anywhere(refined)], measured.solved);
    // What corners of junctions bear is not known before they are solved.
    const ideal = solve(chip, { junctions: 'ideal' });
    compare(ideal, refined, samePlace(ideal, refined), measured.ideal);
  }
  return measured;
}

/** Share of those that lie outside their band. */
const outside = (pairs: Pairs): number =>
  pairs.filter(([off, band]) => off > band + LEAST).length / pairs.length;

/** How many times the band is the true error, in the middle of those that have one. */
function median(pairs: Pairs): number {
  const times = pairs.flatMap(([off, band]) => (off > LEAST ? [band / off] : [])).sort((a, b) => a - b);
  return times[times.length >> 1]!;
}

/** What is claimed of one set of chips, with what measures it once they are solved. */
export function bandClaims(
  chips: string,
  { asked, finer }: { readonly asked: number; readonly finer: number },
  measured: () => Measured,
): (readonly [claim: Claim, error: () => number])[] {
  const cases: [of: string, how: string, pairs: () => Pairs][] = [
    ['flows and shares', `junctions solved to ${asked}`, () => measured().solved.flows],
    ['driving pressure', `junctions solved to ${asked}`, () => measured().solved.pressures],
    ['largest wall shear', `junctions solved to ${asked}`, () => measured().solved.peaks],
    ['flows and shares', 'ideal junctions', () => measured().ideal.flows],
    ['driving pressure', 'ideal junctions', () => measured().ideal.pressures],
    ['wall shear where it is largest in channels', 'ideal junctions', () => measured().ideal.peaks],
  ];
  const source = `the same chips with junctions solved to ${finer}`;
  return cases.flatMap(([of, how, pairs]) => {
    const base = { check: 'band', at: `${chips}, ${how}`, source } as const;
    return [
      [{ ...base, quantity: `${of}: share outside its band`, tolerance: 0.05 }, () => outside(pairs())],
      [{ ...base, quantity: `${of}: band over true error, median`, tolerance: 10 }, () => median(pairs())],
    ] as const;
  });
}
