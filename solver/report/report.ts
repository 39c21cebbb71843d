import { DEFAULT_ACCURACY } from '../cell/cell.ts';
import { checkFindings } from '../checks/check.ts';
import { withAccepted } from '../checks/gather.ts';
import type { Chip, Limit } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { ChannelResult, PieceResult, PortResult, Result, RouteResult } from '../chip/result.ts';
import { ductsBetween } from '../exposure/reach.ts';
import type { Fluid } from '../fluid/fluid.ts';
import type { DriveCheck } from '../lump/floating.ts';
import type { Lumped } from '../lump/lump.ts';
import { NANOMETRES } from '../lump/stretches.ts';
import { once } from '../network/once.ts';
import type { Gradient, Target } from '../network/sensitivity.ts';
import type { NetworkSolution } from '../network/spec.ts';
import type { Finding } from '../problem/finding.ts';
import { bandsOf } from './bands.ts';
import { withStrain } from './cell-strain.ts';
import { cellResults, inertiaFindings, inertiaShares } from './cells.ts';
import { closeCalls } from './close-calls.ts';
import { driftOf } from './drift.ts';
import { cellEvidence, stretchEvidence } from './evidence.ts';
import { exposureOf } from './exposure.ts';
import { faultFindings } from './faults.ts';
import { chipNet } from './flow-net.ts';
import { joinedEdges, joinedFlows } from './joined.ts';
import { limitResults } from './limits.ts';
import { lawPieceResult, pieceResult } from './pieces.ts';
import { pumpResults } from './pumps.ts';
import { stillDucts } from './still.ts';
import { targetResults } from './targets.ts';
import { placeBands, routesWithBands, withBands } from './told-bands.ts';

/** A result in two parts: what the five answers are made from, and what tables and plots show besides. */
export interface Reported {
  /**
   * The result but for routes, what is noted of them, and how cells are strained. Where a limit is of routes,
   * routes are in it.
   */
  readonly first: Result;
  /** The whole of it, of the first part or of what was added to that; needs nothing of later solves. */
  complete(first: Result): Result;
}

/**
 * The solved network in the chip's own terms.
 * @param asked relative accuracy that was asked of flows through junctions
 */
export function report(
  chip: Chip,
  graph: Graph,
  fluid: Fluid,
  lumped: Lumped,
  flow: NetworkSolution,
  drives: DriveCheck,
  depends: (targets: readonly Target[]) => Gradient[] | null,
  asked = DEFAULT_ACCURACY.flow,
): Reported {
  const flows = ductFlows(graph, lumped, flow, drives);
  const pieces = lumped.stretches.map((stretch, index) => {
    const duct = lumped.ducts[index];
    const pFrom = flow.pressure[stretch.from] || 0;
    const pTo = flow.pressure[stretch.to] || 0;
    return lumped.laws
      ? lawPieceResult(stretch, duct, lumped.laws[index], flows[index], pFrom, pTo, fluid.density)
      : pieceResult(stretch, duct, flows[index], pFrom - pTo, lumped.viscosity, fluid.density);
  });
  const channels = byChannel(chip, graph, lumped, pieces);
  const ports = portResults(chip, graph, lumped, flow, drives);
  const total = ports.reduce((sum, port) => sum + Math.max(0, port.flow ?? 0), 0);
  const { cells, findings: cellFindings } = cellResults(chip, lumped, flow);
  const between = (start: string, goal: string): Set<string> =>
    piecesBetween(chip, lumped, flow, start, goal);
  const exposure = once(() => exposureOf(chip, chipNet(chip, graph, fluid, lumped, flow, pieces, cells)));
  const pumps = pumpResults(chip, lumped, flow);
  const drift = driftOf(chip, lumped, flow, fluid.density);
  const limits = limitResults({ chip, graph, lumped, flow, channels, cells, exposure, between });
  const inertia = inertiaShares(lumped, flow, pieces, fluid.density);
  const bands = bandsOf(
    { chip, graph, lumped, flow, pieces, density: fluid.density, inertia, ports, cells, fluid },
    depends,
  );
  const targets = targetResults(chip, ports, channels, total);
  const junctions = junctionsOf(lumped);
  const rough =
    junctions !== 'solved' && graph.sites.some(({ kind }) => kind === 'junction' || kind === 'chamber');
  const stretches = stretchEvidence(lumped, flow, pieces);
  const checks = checkFindings({
    chip,
    graph,
    fluid,
    stretches,
    ports,
    cells: cellEvidence(chip, graph, lumped),
    asked,
  });
  const routed = chip.limits.some(ofRoutes);
  const places = bands && placeBands(cells, lumped.names, bands);
  const routesOf = (ports: readonly PortResult[]): readonly RouteResult[] => {
    const { results, net } = exposure();
    return places ? routesWithBands(chip, results, ports, places, net) : results;
  };
  const findingsWith = (ofRoutes: readonly Finding[]): readonly Finding[] =>
    withAccepted(
      [
        ...graph.findings,
        ...drives.findings,
        ...faultFindings(graph, flow),
        ...unresolvedFindings(lumped, flows),
        ...limits.findings,
        ...closeCalls(chip, { limits: limits.results, targets, bands, rough }),
        ...ofRoutes,
        ...pumps.findings,
        ...(drift?.findings ?? []),
        ...cellFindings,
        ...inertiaFindings(lumped, inertia),
        ...lumped.findings,
        ...idealNote(graph, lumped),
        ...checks,
      ],
      chip.accepted,
    );
  const told = {
    ports,
    channels,
    cells,
    routes: routed ? exposure().results : [],
    targets,
    limits: limits.results,
  };
  const first: Result = {
    format: 'channelwright-result',
    version: 1,
    chip: chip.name,
    status: 'solved',
    junctions,
    fluid: { viscosity: fluid.viscosity, density: fluid.density },
    ...(places ? withBands(chip, told, places, routed ? routesOf : () => []) : told),
    pumps: pumps.pumps,
    ...(drift ? { drift: drift.drift } : {}),
    balance: {
      conservationResidual: flow.conservationResidual,
      powerIn: flow.powerIn,
      dissipation: flow.dissipation,
    },
    ...(bands && { bands: bands.chip }),
    findings: findingsWith(routed ? exposure().findings : []),
  };
  return {
    first,
    complete: (known) => ({
      ...known,
      cells: chip.limits.length > 0 ? withStrain(known.cells, exposure().net, lumped, flow) : known.cells,
      routes: routed ? known.routes : routesOf(known.ports),
      findings: findingsWith(exposure().findings),
    }),
  };
}

/** Whether a limit is judged on routes, or by a cell that may be too large for what they pass. */
const ofRoutes = (limit: Limit): boolean =>
  'law' in limit || 'curve' in limit || limit.cellDiameter !== undefined;

/** Flow of every duct: 0 where it is joined so that nothing can flow, null where too small for its digits. */
function ductFlows(
  graph: Graph,
  lumped: Lumped,
  flow: NetworkSolution,
  drives: DriveCheck,
): (number | null)[] {
  const still = stillDucts(lumped.spec);
  const held = new Uint8Array(lumped.spec.nodeCount);
  for (const fault of flow.faults) {
    if (fault.kind === 'no-flow') for (const node of fault.nodes) held[node] = 1;
  }
  return lumped.stretches.map(({ piece, from }, index) =>
    still[index] === 1 || drives.still.has(graph.cavity[graph.pieces[piece].from]) || held[from] === 1
      ? 0
      : resolved(flow.ductFlow[index], flow.ductUnresolved[index]),
  );
}

/** An exact nought is a coincidence of rounding where fluid could flow: no better resolved than its neighbours. */
function resolved(flow: number, unresolved: number): number | null {
  return unresolved === 1 || flow === 0 || !Number.isFinite(flow) ? null : flow;
}

function portResults(
  chip: Chip,
  graph: Graph,
  lumped: Lumped,
  flow: NetworkSolution,
  drives: DriveCheck,
): PortResult[] {
  const flows = chip.ports.map((_port, index) => {
    const drive = lumped.portDrive[index];
    if (drive < 0 || drives.still.has(graph.cavity[graph.portSite[index]])) return 0;
    return resolved(flow.driveFlow[drive], flow.driveUnresolved[drive]);
  });
  const total = flows.reduce<number>((sum, value) => sum + Math.max(0, value ?? 0), 0);
  return chip.ports.map((port, index) => {
    const value = flows[index];
    // Where nothing moves for want of a pressure field, a port still has what its own drive imposes.
    const solved = flow.pressure[lumped.portNode[index]];
    const imposed = lumped.portDrive[index] < 0 ? 0 : flow.drivePressure[lumped.portDrive[index]];
    const pressure = Number.isFinite(solved) ? solved : imposed;
    return {
      id: port.id,
      pressure: Number.isFinite(pressure) ? pressure : 0,
      flow: value,
      share: value === null || total === 0 ? null : Math.abs(value) / total,
    };
  });
}

function byChannel(
  chip: Chip,
  graph: Graph,
  lumped: Lumped,
  pieces: readonly PieceResult[],
): ChannelResult[] {
  const lists: PieceResult[][] = chip.channels.map(() => []);
  lumped.stretches.forEach((stretch, index) => {
    lists[graph.pieces[stretch.piece].channelIndex].push(pieces[index]);
  });
  return chip.channels.map((channel, index) => ({ id: channel.id, pieces: lists[index] }));
}

function unresolvedFindings(lumped: Lumped, flows: readonly (number | null)[]): Finding[] {
  const names: string[] = [];
  let count = 0;
  lumped.stretches.forEach((_stretch, index) => {
    if (flows[index] !== null) return;
    count += 1;
    if (names.length < 4) names.push(lumped.names[index]);
  });
  if (count === 0) return [];
  const more = count > names.length ? ` and ${count - names.length} more` : '';
  return [
    {
      kind: 'unresolved-flow',
      severity: 'note',
      where: names[0],
      says: `The flow in ${names.join(', ')}${more} is below 1e-9 of what flows through the chip: too small for its digits to mean anything.`,
      do: 'Treat it as no flow, or close the balance of the branches it joins less exactly.',
    },
  ];
}

/** Whether all, none or some of the junctions were solved. */
function junctionsOf({ cells }: Lumped): Result['junctions'] {
  const solved = cells.filter(({ solution }) => solution !== null).length;
  if (solved === 0) return 'ideal';
  return solved === cells.length ? 'solved' : 'mixed';
}

function idealNote(graph: Graph, { cells }: Lumped): Finding[] {
  if (cells.length > 0) return [];
  const junctions = graph.sites.filter((site) => site.kind === 'junction').length;
  if (junctions === 0) return [];
  const first = graph.sites.find((site) => site.kind === 'junction')!;
  return [
    {
      kind: 'ideal-junctions',
      severity: 'note',
      where: first.name,
      says: `${junctions === 1 ? 'The junction is' : `The ${junctions} junctions are`} taken as ideal: one pressure each, channels counted to the crossing of their centrelines.`,
      do: 'Solve the junctions for compact networks, where this can be off by tens of per cent.',
      at: [first.at[0] / NANOMETRES, first.at[1] / NANOMETRES],
    },
  ];
}

/** Names of the pieces that carry fluid from one port to another. */
function piecesBetween(
  chip: Chip,
  lumped: Lumped,
  flow: NetworkSolution,
  start: string,
  goal: string,
): Set<string> {
  const node = (id: string): number => lumped.portNode[chip.ports.findIndex((port) => port.id === id)];
  const { nodes, from, to } = joinedEdges(lumped.spec);
  const found = ductsBetween(nodes, from, to, joinedFlows(flow, from.length), node(start), node(goal));
  const names = new Set<string>();
  lumped.stretches.forEach((_stretch, index) => {
    if (found[index] === 1) names.add(lumped.names[index]);
  });
  return names;
}
