import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { Bands, CellResult, PortResult } from '../chip/result.ts';
import type { Fluid } from '../fluid/fluid.ts';
import type { Lumped } from '../lump/lump.ts';
import { NANOMETRES } from '../lump/stretches.ts';
import type { Gradient, Target } from '../network/sensitivity.ts';
import type { NetworkSolution } from '../network/spec.ts';

/** How far the numbers may be off: the chip's worst, and those of each port, null where it takes no flow. */
export interface ErrorBands {
  readonly chip: Bands;
  readonly ports: readonly (NonNullable<PortResult['band']> | null)[];
}

export interface Solved {
  readonly chip: Chip;
  readonly graph: Graph;
  readonly lumped: Lumped;
  readonly flow: NetworkSolution;
  readonly ports: readonly PortResult[];
  readonly cells: readonly CellResult[];
  /** Share by which inertia shifts each cell. */
  readonly inertia: Float64Array;
  readonly fluid: Fluid;
}

/** Ports times ducts beyond which bands would cost more than the answer. */
const MOST_WORK = 2e6;
/** Of the width of what meets at an ideal junction: by how much each arm may be longer or shorter in effect. */
const EXCESS = 0.5;
/** Of all that enters: less than this is a trickle. */
const TRICKLE = 1e-6;
/** Errors below a millionth are round-off, and of no use to anybody. */
const told = (error: number): number => (error < 1e-6 ? 0 : error);
/** Relative error of a centreline that stands in for a cell. */
const STAND_IN = 0.5;

/**
 * The sum of what the solver knows of its own errors, to first order and in the direction that harms most:
 * every duct by its section's error and the excess length of ideal junctions at its ends, every solved cell
 * by its flow error and inertia. Null where the network follows laws of its own, has faults, or is so large
 * that it would take longer than the solve.
 */
export function bandsOf(
  solved: Solved,
  depends: (targets: readonly Target[]) => Gradient[] | null,
): ErrorBands | null {
  const { lumped, flow, ports, cells, inertia, fluid } = solved;
  const drives = ports.flatMap(({ flow: q }, port) =>
    q !== null && q !== 0 && lumped.portDrive[port] >= 0 ? [{ port, drive: lumped.portDrive[port], q }] : [],
  );
  if (drives.length === 0 || drives.length * lumped.spec.resistance.length > MOST_WORK) return null;
  const found = depends(drives.map(({ drive }): Target => ({ of: 'drive', index: drive })));
  if (!found) return null;
  const ducts = ductErrors(solved);
  const blocks = new Float64Array(lumped.spec.blocks.length);
  lumped.cells.forEach(({ solution }, index) => {
    if (solution) blocks[lumped.cellBlock[index]] = solution.flowError + inertia[index];
  });
  const entering = drives.reduce((sum, { q }) => sum + Math.max(0, q), 0);
  const total = sumOf(found.filter((_, i) => drives[i].q > 0));
  const own = ports.map((): NonNullable<PortResult['band']> | null => null);
  found.forEach((gradient, i) => {
    const { port, q } = drives[i];
    let [byFlow, byShare] = [0, 0];
    for (let e = 0; e < ducts.length; e += 1) {
      const share = gradient.byResistance[e] / q;
      byFlow += ducts[e] * Math.abs(share);
      byShare += ducts[e] * Math.abs(share - total.byResistance[e] / entering);
    }
    for (let b = 0; b < blocks.length; b += 1) {
      const share = gradient.byBlock[b] / Math.abs(q);
      byFlow += blocks[b] * share;
      byShare += blocks[b] * (share + total.byBlock[b] / entering);
    }
    own[port] = { flow: told(byFlow), share: told(byShare) };
  });
  // What is not known of the viscosity shifts flows where pressures drive, pressures where flows do.
  const viscosity = fluid.uncertainty ?? 0;
  const driven = lumped.spec.drives.some(({ kind, value }) => kind === 'flow' && value !== 0);
  const offered = own.map((band) => band && { ...band, flow: band.flow + (driven ? 0 : viscosity) });
  // The relative error of a trickle does not speak for the chip.
  const weighty = drives.filter(({ q }) => Math.abs(q) >= TRICKLE * entering).map(({ port }) => port);
  const flowBand = Math.max(0, ...weighty.map((port) => offered[port]!.flow));
  const peaks = Math.max(0, ...cells.map(({ peakError }) => peakError ?? 0));
  const sections = lumped.stretches.reduce((most, _, e) => Math.max(most, lumped.ducts[e].error), 0);
  return {
    ports: offered,
    chip: {
      share: Math.max(0, ...weighty.map((port) => own[port]!.share)),
      flow: flowBand,
      shear: flowBand + Math.max(peaks, sections) + (driven ? viscosity : 0),
      pressure: pressureBand(lumped, flow, ducts, blocks) + (driven ? viscosity : 0),
    },
  };
}

function sumOf(gradients: readonly Gradient[]): Pick<Gradient, 'byResistance' | 'byBlock'> {
  const [first] = gradients;
  const byResistance = new Float64Array(first?.byResistance.length ?? 0);
  const byBlock = new Float64Array(first?.byBlock.length ?? 0);
  for (const gradient of gradients) {
    for (let e = 0; e < byResistance.length; e += 1) byResistance[e] += gradient.byResistance[e];
    for (let b = 0; b < byBlock.length; b += 1) byBlock[b] += gradient.byBlock[b];
  }
  return { byResistance, byBlock };
}

/** Relative error of the resistance of every duct of the network, tubing counted exact. */
function ductErrors({ graph, lumped }: Solved): Float64Array {
  const errors = new Float64Array(lumped.spec.resistance.length);
  const widest = lumped.cells.length === 0 ? widestAt(graph) : null;
  lumped.stretches.forEach(({ piece, length }, e) => {
    const { from, to } = graph.pieces[piece];
    const excess = widest ? widest[from] + widest[to] : 0;
    errors[e] = lumped.ducts[e].error + (EXCESS * excess) / length;
  });
  for (let e = lumped.stretches.length; e < lumped.ducts.length; e += 1) errors[e] = STAND_IN;
  return errors;
}

/** Width of the widest channel at each junction and chamber, m; 0 at other sites. */
function widestAt({ sites, pieces }: Graph): Float64Array {
  return Float64Array.from(sites, ({ kind, arms }) => {
    if (kind !== 'junction' && kind !== 'chamber') return 0;
    let most = 0;
    for (const { piece, end } of arms) most = Math.max(most, pieces[piece].width[end === 'from' ? 0 : 1]);
    return most / NANOMETRES;
  });
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
