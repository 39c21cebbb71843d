import type { Making, MakingOfChip, MakingOfPort } from '../chip/result.ts';
import type { Gradient, Target } from '../network/sensitivity.ts';
import { bandOf, widerOf } from './band.ts';
import { type Effects, effectsOf, moved, type Net } from './effects.ts';
import { hasTolerances, type Sources, sourcesOf } from './sources.ts';

/**
 * What the tolerances of making do to flow splits and shear, relative to each figure and to first order, by adjoint
 * solves. null where it is not known: no flow, or not among those reckoned.
 */
export interface Spread {
  /** In the chip's order of ports. */
  readonly ports: readonly (MakingOfPort | null)[];
  /** Of peak wall shear and flow in each reported stretch. */
  readonly stretches: readonly (StretchMaking | null)[];
  /** Of the peak in each cell. */
  readonly cells: readonly (Making | null)[];
  /** The widest of the chip, trickles left aside. */
  readonly chip: MakingOfChip;
}

export interface StretchMaking {
  readonly flow: Making;
  /** Of its flow in all that enters. */
  readonly share: Making;
  readonly shear: Making;
}

/** Stretches times ducts up to which every stretch is reckoned; above, those with the highest shear only. */
const EVERY = 1e5;
const HIGHEST = 32;
/** Ports times ducts beyond which nothing is. */
const MOST_WORK = 4e6;
/** Of all that enters: less than this is a trickle. */
const TRICKLE = 1e-6;
const NOTHING: Making = { worst: 0, likely: 0 };

export interface Spreadable extends Net {
  /** m³/s into the chip at each port, null where not resolved. */
  readonly portFlow: readonly (number | null)[];
  /** Pa at each port. */
  readonly portPressure: readonly number[];
  /** Pa of each reported stretch, null where it has none. */
  readonly peakWallShear: readonly (number | null)[];
  /** Stretches that targets ask about: never left out. */
  readonly wanted?: ReadonlySet<number>;
}

/**
 * @param depends how flows and pressures of the network depend on its parts, as `gradients`
 * @returns null where the chip has no tolerance, or the network has no answer to small changes
 */
export function spreadOf(
  net: Spreadable,
  depends: (targets: readonly Target[]) => Gradient[] | null,
): Spread | null {
  const { chip, lumped, flow, portFlow } = net;
  if (!hasTolerances(chip)) return null;
  const sources = sourcesOf(chip);
  const work = lumped.spec.resistance.length;
  const driven = chip.ports.flatMap((_, port) => {
    const drive = lumped.portDrive[port];
    const q = portFlow[port];
    return drive >= 0 && q !== null && q !== 0 ? [{ port, drive, q }] : [];
  });
  if (sources.all.length === 0 || driven.length === 0 || driven.length * work > MOST_WORK) return null;
  const imposed = driven.filter(({ drive }) => lumped.spec.drives[drive].kind === 'flow');
  const stretches = chosen(net, work);
  const found = depends([
    ...driven.map(({ drive }): Target => ({ of: 'drive', index: drive })),
    ...imposed.map(({ port }): Target => ({ of: 'node', index: lumped.portNode[port] })),
    ...stretches.map((index): Target => ({ of: 'duct', index })),
  ]);
  if (!found) return null;
  const effects = effectsOf(net, sources);
  const count = sources.all.length;
  const moves = found.map((gradient) => moved(net, effects, gradient, count));
  const entering = driven.reduce((sum, { q }) => sum + Math.max(0, q), 0);
  const inflow = new Float64Array(count);
  driven.forEach(({ q }, i) => {
    if (q > 0) for (let s = 0; s < count; s += 1) inflow[s] += moves[i][s] / entering;
  });
  const offered = portBands(net, sources, driven, imposed, moves, inflow);
  const own = moves.slice(driven.length + imposed.length);
  const shears = stretchBands(net, sources, effects, stretches, own, inflow);
  const weighty = driven
    .filter(({ q }) => Math.abs(q) >= TRICKLE * entering)
    .map(({ port }) => offered[port]);
  const widest = (bands: readonly (Making | null | undefined)[]): Making =>
    bands.reduce<Making | null>((a, b) => widerOf(a, b ?? null), null) ?? NOTHING;
  const steady = shears.bands.filter((_, e) => Math.abs(flow.ductFlow[e]) >= TRICKLE * entering);
  return {
    ports: offered,
    stretches: shears.bands,
    cells: shears.cells,
    chip: {
      share: widest(weighty.map((band) => band?.share)),
      flow: widest(weighty.map((band) => band?.flow)),
      shear: widest(steady.map((band) => band?.shear)),
      pressure: widest(weighty.map((band) => band?.pressure)),
    },
  };
}

/** Stretches whose shear is reckoned, ascending. */
function chosen({ lumped, flow, peakWallShear, wanted }: Spreadable, work: number): number[] {
  const flowing = lumped.stretches.flatMap((_, e) =>
    flow.ductUnresolved[e] === 0 && flow.ductFlow[e] !== 0 ? [e] : [],
  );
  if (flowing.length * work <= EVERY) return flowing;
  const high = [...flowing]
    .sort((a, b) => (peakWallShear[b] ?? 0) - (peakWallShear[a] ?? 0))
    .slice(0, HIGHEST);
  const kept = new Set([...high, ...flowing.filter((e) => wanted?.has(e))]);
  return flowing.filter((e) => kept.has(e));
}

function portBands(
  { chip, lumped, portPressure }: Spreadable,
  { all }: Sources,
  driven: readonly { readonly port: number; readonly drive: number; readonly q: number }[],
  imposed: readonly { readonly port: number }[],
  moves: readonly Float64Array[],
  inflow: Float64Array,
): (MakingOfPort | null)[] {
  const bands = chip.ports.map((): MakingOfPort | null => null);
  driven.forEach(({ port, q }, i) => {
    const by = moves[i];
    bands[port] = {
      flow: bandOf((s) => by[s] / q, all),
      share: bandOf((s) => by[s] / q - inflow[s], all),
    };
  });
  imposed.forEach(({ port }, i) => {
    const pressure = Math.abs(portPressure[port]);
    if (!(pressure > 0) || lumped.portNode[port] < 0) return;
    const by = moves[driven.length + i];
    bands[port] = { ...bands[port]!, pressure: bandOf((s) => by[s] / pressure, all) };
  });
  return bands;
}

function stretchBands(
  { lumped, flow, peakWallShear }: Spreadable,
  { all }: Sources,
  effects: Effects,
  stretches: readonly number[],
  moves: readonly Float64Array[],
  inflow: Float64Array,
): { readonly bands: Spread['stretches']; readonly cells: Spread['cells'] } {
  const bands = lumped.stretches.map((): StretchMaking | null => null);
  const own = new Map<number, Float64Array>();
  stretches.forEach((e, i) => {
    const q = flow.ductFlow[e];
    const by = moves[i];
    const factor = effects.shearByFlow[e] / q;
    const byShear = by.map((change) => change * factor);
    effects.shear.add(e, byShear, 1);
    own.set(e, byShear);
    bands[e] = {
      flow: bandOf((s) => by[s] / q, all),
      share: bandOf((s) => by[s] / q - inflow[s], all),
      shear: peakWallShear[e] === null ? NOTHING : bandOf((s) => byShear[s], all),
    };
  });
  return { bands, cells: cellBands(lumped, flow, all, own) };
}

/** A cell's peak goes with the shear in the channels around it, each as far as it carries what goes through. */
function cellBands(
  lumped: Net['lumped'],
  flow: Net['flow'],
  all: Sources['all'],
  own: ReadonlyMap<number, Float64Array>,
): Spread['cells'] {
  const ducts = new Map<number, number[]>();
  lumped.stretches.forEach(({ from, to }, e) => {
    for (const node of [from, to]) ducts.set(node, [...(ducts.get(node) ?? []), e]);
  });
  return lumped.cells.map(({ spec, solution }) => {
    if (!solution) return null;
    const by = new Float64Array(all.length);
    let carried = 0;
    for (const face of spec.faces) {
      const e = ducts.get(face.node)?.find((index) => lumped.stretches[index].piece === face.piece);
      const theirs = e === undefined ? undefined : own.get(e);
      if (e === undefined || !theirs) continue;
      const q = Math.abs(flow.ductFlow[e]);
      carried += q;
      for (let s = 0; s < by.length; s += 1) by[s] += q * theirs[s];
    }
    return carried > 0 ? bandOf((s) => by[s] / carried, all) : null;
  });
}
