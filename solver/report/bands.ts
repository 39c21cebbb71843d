import type { Bands, CellResult, PieceResult, PortResult } from '../chip/result.ts';
import type { Fluid } from '../fluid/fluid.ts';
import type { Lumped } from '../lump/lump.ts';
import { depthMismatch } from '../lump/stretches.ts';
import type { Gradient, Target } from '../network/sensitivity.ts';
import type { NetworkSolution } from '../network/spec.ts';
import { blockErrors, ductErrors, type Parts } from './part-errors.ts';

/**
 * How far the numbers may be off: the chip's worst, and those of each port, piece (in the order of stretches)
 * and cell, null where it takes no flow. Pieces and cells of large chips have none of their own.
 */
export interface ErrorBands {
  readonly chip: Bands;
  readonly ports: readonly (NonNullable<PortResult['band']> | null)[];
  readonly pieces: readonly (NonNullable<PieceResult['band']> | null)[];
  readonly cells: readonly (NonNullable<CellResult['band']> | null)[];
  /** Relative error of the resistance of every duct. */
  readonly ducts: Float64Array;
}

export interface Solved extends Parts {
  readonly ports: readonly PortResult[];
  readonly cells: readonly CellResult[];
  readonly fluid: Fluid;
}

/** Ports times ducts beyond which bands would cost more than the answer. */
const MOST_WORK = 2e6;
/** Stretches beyond which pieces have the chip's worst band in place of their own. */
const MOST_PIECES = 64;
/** Of all that enters: less than this is a trickle. */
const TRICKLE = 1e-6;
/** Errors below a millionth are round-off, and of no use to anybody. */
const told = (error: number): number => (error < 1e-6 ? 0 : error);

/**
 * The sum of what the solver knows of its own errors, to first order and in the direction that harms most
 * (`part-errors.ts`): every duct by its section, its entrance, a soft roof left out and ideal junctions and
 * bends, every solved cell by its flow error and inertia. Null where the network follows laws of its own, has
 * faults, or is so large that it would take longer than the solve.
 */
export function bandsOf(
  solved: Solved,
  depends: (targets: readonly Target[]) => Gradient[] | null,
): ErrorBands | null {
  const { lumped, flow, ports, pieces, cells, fluid } = solved;
  const drives = ports.flatMap(({ flow: q }, port) =>
    q !== null && q !== 0 && lumped.portDrive[port] >= 0 ? [{ port, drive: lumped.portDrive[port], q }] : [],
  );
  if (drives.length === 0 || drives.length * lumped.spec.resistance.length > MOST_WORK) return null;
  const { stretches } = lumped;
  const streams = stretches.flatMap((_, e) => {
    const q = pieces[e].flow;
    return stretches.length <= MOST_PIECES && q !== null && q !== 0 ? [{ e, q }] : [];
  });
  const all = depends([
    ...drives.map(({ drive }): Target => ({ of: 'drive', index: drive })),
    ...streams.map(({ e }): Target => ({ of: 'duct', index: e })),
  ]);
  if (!all) return null;
  const found = all.slice(0, drives.length);
  const ducts = ductErrors(solved);
  const blocks = blockErrors(solved);
  const entering = drives.reduce((sum, { q }) => sum + Math.max(0, q), 0);
  const whole = {
    byResistance: new Float64Array(ducts.length),
    weight: new Float64Array(found[0].weight.length),
  };
  found.forEach((gradient, i) => {
    if (drives[i].q <= 0) return;
    const { byResistance, weight } = gradient;
    for (const [sum, own] of [
      [whole.byResistance, byResistance],
      [whole.weight, weight],
    ] as const)
      for (let k = 0; k < sum.length; k += 1) sum[k] += own[k] / entering;
  });
  const own = ports.map((): NonNullable<PortResult['band']> | null => null);
  const pairs = blockPairs(lumped);
  const powers = blockPowers(pairs, flow.pressure);
  const known: Known = { lumped, flow, ducts, blocks, pairs, powers, whole };
  found.forEach((gradient, i) => {
    const { port, q } = drives[i];
    own[port] = bandOf(known, gradient.weight, q, -1);
  });
  // What is not known of the viscosity shifts flows where pressures drive, pressures where flows do.
  const viscosity = fluid.uncertainty ?? 0;
  const driven = lumped.spec.drives.some(({ kind, value }) => kind === 'flow' && value !== 0);
  const offered = own.map((band) => band && { ...band, flow: band.flow + (driven ? 0 : viscosity) });
  // The relative error of a trickle does not speak for the chip.
  const weighty = drives.filter(({ q }) => Math.abs(q) >= TRICKLE * entering).map(({ port }) => port);
  const flowBand = Math.max(0, ...weighty.map((port) => offered[port]!.flow));
  const ofPieces = stretches.map((): NonNullable<PieceResult['band']> | null => null);
  streams.forEach(({ e, q }, i) => {
    const gradient = all[drives.length + i];
    const { flow: own, share } = bandOf(known, gradient.weight, q, e);
    ofPieces[e] = {
      flow: own + (driven ? 0 : viscosity),
      share,
      // What drives by pressure leaves the shear as it is, whatever the viscosity.
      shear: own + lumped.ducts[e].error + (driven ? viscosity : 0),
    };
  });
  const peaks = Math.max(0, ...cells.map(({ peakError }) => peakError ?? 0));
  const sections = lumped.stretches.reduce((most, _, e) => Math.max(most, lumped.ducts[e].error), 0);
  return {
    ports: offered,
    pieces: ofPieces,
    cells: cellBands(solved, ofPieces),
    ducts,
    chip: {
      share: Math.max(0, ...weighty.map((port) => own[port]!.share)),
      flow: flowBand,
      shear: flowBand + Math.max(peaks, sections) + (driven ? viscosity : 0),
      pressure: pressureBand(lumped, flow, ducts, blockErrors(solved, true)) + (driven ? viscosity : 0),
    },
  };
}

/** What the bands of all flows are made from. */
interface Known {
  readonly lumped: Lumped;
  readonly flow: NetworkSolution;
  /** Relative errors of ducts and blocks. */
  readonly ducts: Float64Array;
  readonly blocks: Float64Array;
  readonly pairs: BlockPairs;
  readonly powers: Float64Array;
  /** Of all that enters. */
  readonly whole: Pick<Gradient, 'byResistance' | 'weight'>;
}

/** Of a flow q of these weights, and of its share of all that enters; of a duct's own flow, which one that is. */
function bandOf(
  { lumped, flow, ducts, blocks, pairs, powers, whole }: Known,
  weight: Float64Array,
  q: number,
  duct: number,
): { readonly flow: number; readonly share: number } {
  const { ductFrom, ductTo } = lumped.spec;
  const { ductFlow } = flow;
  const ofAll = whole.weight;
  const byAll = whole.byResistance;
  let flowOff = 0;
  let shareOff = 0;
  for (let e = 0; e < ducts.length; e += 1) {
    const drop = weight[ductFrom[e]] - weight[ductTo[e]] - (e === duct ? 1 : 0);
    const by = (drop * ductFlow[e]) / q;
    flowOff += ducts[e] * Math.abs(by);
    shareOff += ducts[e] * Math.abs(by - byAll[e]);
  }
  // Where a cell's matrix A is off by no more than a share of its energy, |λ·δA·p| ≤ share √(λ·A·λ) √(p·A·p).
  const { start, a, b, conductance } = pairs;
  for (let block = 0; block < blocks.length; block += 1) {
    let ofFlow = 0;
    let ofShare = 0;
    for (let k = start[block]; k < start[block + 1]; k += 1) {
      const drop = (weight[a[k]] - weight[b[k]]) / q;
      const rest = drop - (ofAll[a[k]] - ofAll[b[k]]);
      ofFlow += conductance[k] * drop * drop;
      ofShare += conductance[k] * rest * rest;
    }
    const size = blocks[block] * Math.sqrt(powers[block]);
    flowOff += size * Math.sqrt(Math.max(0, ofFlow));
    shareOff += size * Math.sqrt(Math.max(0, ofShare));
  }
  return { flow: told(flowOff), share: told(shareOff) };
}

/** Of the peak of each cell: as far off as the flow around it that is off by most, and by its own error. */
function cellBands(
  { chip, graph, cells, lumped }: Solved,
  pieces: ErrorBands['pieces'],
): (NonNullable<CellResult['band']> | null)[] {
  const { names, ducts } = lumped;
  const around = new Map(names.map((name, e) => [name, pieces[e] && pieces[e].shear - ducts[e].error]));
  return cells.map(({ faces, peakWallShear, peakError = 0 }, i) => {
    const known = faces.flatMap((name) => around.get(name) ?? []);
    if (peakWallShear === null || known.length === 0) return null;
    // Shear goes with a square of the depth where resistance goes with its cube.
    const depths = (2 / 3) * depthMismatch(chip, graph, lumped.cells[i].spec);
    return { shear: Math.max(...known) + peakError + depths };
  });
}

/** Every block as conductances between each two of its nodes a and b, one block after the other; blocks + 1 starts. */
interface BlockPairs {
  readonly start: Int32Array;
  readonly a: Int32Array;
  readonly b: Int32Array;
  readonly conductance: Float64Array;
}

function blockPairs({ spec }: Lumped): BlockPairs {
  const start = new Int32Array(spec.blocks.length + 1);
  spec.blocks.forEach(({ nodes }, block) => {
    start[block + 1] = start[block] + (nodes.length * (nodes.length - 1)) / 2;
  });
  const count = start[spec.blocks.length];
  const [a, b, conductance] = [new Int32Array(count), new Int32Array(count), new Float64Array(count)];
  let k = 0;
  for (const { nodes, matrix } of spec.blocks) {
    const n = nodes.length;
    for (let i = 1; i < n; i += 1) {
      for (let j = 0; j < i; j += 1, k += 1) {
        a[k] = nodes[i];
        b[k] = nodes[j];
        conductance[k] = -matrix[i * n + j];
      }
    }
  }
  return { start, a, b, conductance };
}

/** x·A·x of every block, by the values of x at its nodes. */
function blockPowers({ start, a, b, conductance }: BlockPairs, x: Float64Array): Float64Array {
  const powers = new Float64Array(start.length - 1);
  for (let block = 0; block < powers.length; block += 1) {
    let sum = 0;
    for (let k = start[block]; k < start[block + 1]; k += 1) {
      const drop = x[a[k]] - x[b[k]];
      sum += conductance[k] * drop * drop;
    }
    powers[block] = Math.max(0, sum);
  }
  return powers;
}

/** Error of the power that drives the flow: of the pressure, where one flow is given. */
function pressureBand(
  { spec }: Lumped,
  { ductFlow, blockFlow, pressure, dissipation }: NetworkSolution,
  ducts: Float64Array,
  blocks: Float64Array,
): number {
  if (!(dissipation > 0)) return 0;
  let off = 0;
  for (let e = 0; e < ducts.length; e += 1) off += ducts[e] * spec.resistance[e] * ductFlow[e] ** 2;
  spec.blocks.forEach(({ nodes }, b) => {
    let power = 0;
    nodes.forEach((node, face) => {
      power += pressure[node] * blockFlow[b][face];
    });
    off += blocks[b] * Math.abs(power);
  });
  return told(off / dissipation);
}
