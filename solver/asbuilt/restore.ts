import type { Chip, Drive, Port } from '../chip/chip.ts';
import type { Change, ChipEdit } from '../chip/edit.ts';
import type { Result } from '../chip/result.ts';
import { inUnit, unitSize } from '../chip/units.ts';
import { bestUnit } from '../chip/units-format.ts';
import { GRAVITY } from '../lump/drives.ts';
import { emptyMemory, type Memory } from '../memory.ts';
import type { Gradient, Target } from '../network/sensitivity.ts';
import { Problem } from '../problem/problem.ts';
import { type Networked, networkOf, type SolveOptions, solve } from '../solve.ts';
import { boundedLeastSquares } from './least-squares.ts';
import { heldToWays, waysOf } from './ways.ts';

/** A drive as it is to be set. */
export interface Setting {
  readonly port: string;
  readonly from: Drive;
  readonly to: Drive;
  /** What stops it, where it would be set further: its pump, the chip's rating, or that a drive keeps its sign. */
  readonly held: 'pump' | 'rating' | 'sign' | null;
}

export interface Restored {
  /** Drives that change. */
  readonly settings: readonly Setting[];
  /** The chip with them. */
  readonly chip: Chip;
  /** Of that chip, solved afresh. */
  readonly result: Result;
  /** Whether every target is met. */
  readonly met: boolean;
  /** The worst target's deviation over what it allows: at most 1 where all are met; null where one is not known. */
  readonly strain: number | null;
}

export interface RestoreOptions extends SolveOptions {
  /** Ids of the ports whose drives may be set; by default those that drive something or have a pump. */
  readonly set?: readonly string[];
  /** The way that the flow of each target is to run, as `waysOf` gives it; by default as it runs in the chip as it is. */
  readonly ways?: readonly number[];
}

/** Steps of Gauss and Newton; a linear network with targets of flow takes one, with shares three or four. */
const ROUNDS = 20;
/** A target counts at most as sharp as this, or it would drown the others. */
const SHARPEST = 1e-4;
/** What a drive moved by its whole size weighs against a target that is off by all it allows: decides only where targets leave it open. */
const STAY = 1e-2;
/** The same of a port that is open now: sooner is it held at a pressure than another drive changed. */
const STAY_OPEN = 1e-4;
/** A share that changes by less than this where a drive moves by its whole size does not depend on it. */
const NOISE = 1e-6;
/** A relative change of the drives that ends the search. */
const SETTLED = 1e-7;
/** Of full vacuum: no suction goes further. Pa, gauge. */
const VACUUM = -95_000;
/** A drive that would change by less than this of what it is, or of the pressures around, is left as it is. */
const LEAST_CHANGE = 1e-4;
/** Digits in which a drive is set. */
const DIGITS = 5;

/** Ports that a search may set without being told: those that drive something now, or have a pump behind them. */
export const settable = (chip: Chip): string[] =>
  chip.ports
    .filter(({ drive, pump }) => drive.kind !== 'closed' && (imposedBy(drive) !== 0 || pump !== undefined))
    .map(({ id }) => id);

const imposedBy = (drive: Drive): number =>
  drive.kind === 'pressure'
    ? drive.pressure
    : drive.kind === 'flow'
      ? drive.flow
      : drive.kind === 'head'
        ? drive.head
        : 0;

/**
 * The drives that meet the targets best: least squares of what each target is off over what it allows, on the solved
 * network's own dependence on its drives, again and again until nothing changes (shares are ratios, and a thinning
 * fluid answers to its flow). Drives that the targets leave open stay as they are. A drive keeps its kind and its
 * sign, and goes no further than its pump and the chip's rating.
 *
 * @param chip as it was made
 */
export function restoreDrives(
  chip: Chip,
  options: RestoreOptions = {},
  memory: Memory = emptyMemory(),
): Restored {
  if (chip.targets.length === 0) {
    throw new Problem(
      'missing',
      'No target is given, so there is nothing to restore.',
      'targets',
      'Give targets first.',
    );
  }
  const wanted = options.set ?? settable(chip);
  for (const id of wanted) checkSettable(chip, id);
  const ports = chip.ports.flatMap((port, index) => (wanted.includes(port.id) ? [index] : []));
  const ways = options.ways ?? waysOf(chip, solve(chip, options, memory));
  const search = { ...options, ways };
  let best = stateOf(chip, search, memory);
  const first = best;
  for (let round = 0; round < ROUNDS && ports.length > 0; round += 1) {
    const next = stepFrom(best, first, ports, search, memory);
    if (!next) break;
    const moved = next.change;
    best = next.state;
    if (moved < SETTLED) break;
  }
  const settings = ports.flatMap((index): Setting[] => {
    const [before, after] = [chip.ports[index].drive, best.chip.ports[index].drive];
    const moved = Math.abs(best.value[index] - first.value[index]);
    if (moved <= LEAST_CHANGE * scaleOf(first, index)) return [];
    const to = rounded(after);
    return [{ port: chip.ports[index].id, from: before, to, held: heldBy(best, index) }];
  });
  const set = withDrives(chip, new Map(settings.map(({ port, to }) => [port, to])));
  const result = heldToWays(set, solve(set, options, memory), ways);
  const strains = result.targets.map(({ wanted: asked, got }, i) =>
    got === null
      ? null
      : Math.abs(got - Math.abs(asked)) / (Math.max(chip.targets[i].within, SHARPEST) * Math.abs(asked)),
  );
  return {
    settings,
    chip: set,
    result,
    met: result.targets.every(({ met }) => met),
    strain: strains.some((strain) => strain === null) ? null : Math.max(...(strains as number[])),
  };
}

/** The one named edit that sets the drives on a chip, drawn or made. */
export function driveEdit(chip: Chip, settings: readonly Setting[]): ChipEdit {
  const changes = settings.flatMap(({ port: id, to }): Change[] => {
    const port = chip.ports.find((one) => one.id === id);
    return port ? [{ kind: 'put', list: 'ports', id, part: { ...port, drive: to } }] : [];
  });
  return { label: 'set the drives that restore the targets', changes };
}

function checkSettable(chip: Chip, id: string): void {
  const port = chip.ports.find((one) => one.id === id);
  if (!port) throw new Problem('reference', `The chip has no port "${id}".`, id, 'Name a port of the chip.');
  if (port.drive.kind === 'closed') {
    throw new Problem(
      'drive',
      `Port "${id}" is closed: it has no drive to set.`,
      id,
      'Leave it out, or give it a drive.',
    );
  }
}

interface State {
  readonly chip: Chip;
  readonly net: Networked;
  /** Pa or m³/s imposed at each port. */
  readonly value: readonly number[];
  /** What each target is off over what it allows. */
  readonly off: readonly number[];
  /** Their sum of squares. */
  readonly sum: number;
  /** m³/s that enter. */
  readonly entering: number;
}

/** What a search needs: the options of a solve, and the ways that flows are to run. */
interface Search extends SolveOptions {
  readonly ways: readonly number[];
}

/** A flow as its target counts it: what runs the wrong way is less than nothing. */
const counted = (q: number, way: number): number => (way === 0 ? Math.abs(q) : way * q);

function stateOf(chip: Chip, options: Search, memory: Memory): State {
  const net = networkOf(chip, options, memory);
  const { flow, lumped } = net;
  const value = chip.ports.map((_, i) =>
    lumped.portDrive[i] < 0 ? 0 : lumped.spec.drives[lumped.portDrive[i]].value,
  );
  const entering = flow.driveFlow.reduce((sum, q) => sum + Math.max(0, q || 0), 0);
  const off = chip.targets.map((target, i) => {
    const q = counted(flowOf(net, chip, i, options.ways) ?? 0, options.ways[i]);
    const scale = Math.max(target.within, SHARPEST);
    return 'share' in target
      ? ((entering > 0 ? q / entering : 0) / target.share - 1) / scale
      : (q / Math.abs(target.flow) - 1) / scale;
  });
  return { chip, net, value, off, sum: off.reduce((sum, r) => sum + r * r, 0), entering };
}

/** What a target is about: the drive of a port, or the piece of a channel that is furthest from what is wanted. */
function askedOf(
  { lumped, flow, graph }: Networked,
  chip: Chip,
  index: number,
  ways: readonly number[],
): Target | null {
  const target = chip.targets[index];
  if ('port' in target) {
    const drive = lumped.portDrive[chip.ports.findIndex(({ id }) => id === target.port)];
    return drive < 0 ? null : { of: 'drive', index: drive };
  }
  const entering = flow.driveFlow.reduce((sum, q) => sum + Math.max(0, q || 0), 0);
  const wanted = 'share' in target ? target.share * entering : Math.abs(target.flow);
  let found: Target | null = null;
  let furthest = -1;
  lumped.stretches.forEach(({ piece }, e) => {
    if (graph.pieces[piece].channel !== target.channel) return;
    const away = Math.abs(counted(flow.ductFlow[e], ways[index]) - wanted);
    if (!(away > furthest)) return;
    furthest = away;
    found = { of: 'duct', index: e };
  });
  return found;
}

function flowOf(net: Networked, chip: Chip, index: number, ways: readonly number[]): number | null {
  const asked = askedOf(net, chip, index, ways);
  if (!asked) return null;
  const q = asked.of === 'drive' ? net.flow.driveFlow[asked.index] : net.flow.ductFlow[asked.index];
  return Number.isFinite(q) ? q : null;
}

function stepFrom(
  state: State,
  first: State,
  ports: readonly number[],
  options: Search,
  memory: Memory,
): { readonly state: State; readonly change: number } | null {
  const { chip, net, value, off, entering } = state;
  const { lumped, flow } = net;
  const asked = chip.targets.map((_, i) => askedOf(net, chip, i, options.ways));
  const inlets = lumped.spec.drives.flatMap((_, d) => (flow.driveFlow[d] > 0 ? [d] : []));
  const known = asked.filter((target): target is Target => target !== null);
  const found = memory.slopes(lumped, flow, [
    ...known,
    ...inlets.map((index): Target => ({ of: 'drive', index })),
  ]);
  if (!found) return null;
  const drives = ports.map((port) => lumped.portDrive[port]);
  const total = drives.map((d) =>
    found.slice(known.length).reduce((sum: number, gradient: Gradient) => sum + gradient.byDrive[d], 0),
  );
  const scale = ports.map((port) => scaleOf(state, port));
  const rows: number[][] = [];
  const right: number[] = [];
  let k = 0;
  asked.forEach((target, i) => {
    if (!target) return;
    const gradient = found[k];
    k += 1;
    const q = flowOf(net, chip, i, options.ways) ?? 0;
    const way = options.ways[i] || Math.sign(q || 1);
    const { within, ...wish } = chip.targets[i];
    const per = 1 / Math.max(within, SHARPEST);
    rows.push(
      drives.map((d, j) => {
        const slope = way * gradient.byDrive[d];
        const change =
          'share' in wish
            ? (slope - ((way * q) / entering) * total[j]) / (entering * wish.share)
            : slope / Math.abs(wish.flow);
        return Math.abs(change * scale[j]) < NOISE ? 0 : per * change * scale[j];
      }),
    );
    right.push(-off[i]);
  });
  if (rows.every((row) => row.every((entry) => entry === 0))) return null;
  // Drives that the targets leave open come back to what they were.
  ports.forEach((port, j) => {
    const stay = first.value[port] === 0 ? STAY_OPEN : STAY;
    rows.push(ports.map((_, i) => (i === j ? stay : 0)));
    right.push((stay * (first.value[port] - value[port])) / scale[j]);
  });
  const bounds = ports.map((port, j) => {
    const [low, high] = boundsOf(first, port);
    return [(low.at - value[port]) / scale[j], (high.at - value[port]) / scale[j]] as const;
  });
  const step = boundedLeastSquares(rows, right, bounds);
  for (let share = 1; share > 1e-3; share /= 2) {
    const next = new Map(
      ports.map((port, j) => [
        chip.ports[port].id,
        driveWith(chip.ports[port].drive, value[port] + share * step[j] * scale[j], net.fluid.density),
      ]),
    );
    const tried = stateOf(withDrives(chip, next), options, memory);
    if (tried.net.flow.faults.length > 0 || !(tried.sum <= state.sum * (1 + 1e-12))) continue;
    const change = Math.max(...step.map((s) => Math.abs(share * s)));
    return { state: tried, change };
  }
  return null;
}

/** What a drive is likely to move by, Pa or m³/s. */
function scaleOf({ chip, net, value }: State, port: number): number {
  const { drive } = chip.ports[port];
  if (drive.kind === 'flow') return Math.max(Math.abs(value[port]), net.flow.throughput / 10, 1e-15);
  const most = value.reduce(
    (top, v, i) => (chip.ports[i].drive.kind === 'flow' ? top : Math.max(top, Math.abs(v))),
    0,
  );
  const around = net.flow.pressure.reduce(
    (top, p) => (Number.isFinite(p) ? Math.max(top, Math.abs(p)) : top),
    0,
  );
  return Math.max(Math.abs(value[port]), most / 10, around / 10, 1e-3);
}

interface Bound {
  readonly at: number;
  readonly by: Setting['held'];
}

/** How far a drive may go, Pa or m³/s. */
function boundsOf({ chip, value }: State, port: number): readonly [Bound, Bound] {
  const { drive, pump } = chip.ports[port];
  const sucks = value[port] < 0;
  const most: Bound[] = [];
  if (drive.kind === 'flow') {
    if (pump?.flow !== undefined) most.push({ at: pump.flow, by: 'pump' });
  } else {
    if (pump?.pressure !== undefined) most.push({ at: pump.pressure, by: 'pump' });
    if (chip.rating?.pressure !== undefined && !sucks) most.push({ at: chip.rating.pressure, by: 'rating' });
    if (sucks) most.push({ at: -VACUUM, by: 'pump' });
  }
  // What is beyond already need not come back for the search's sake.
  const far = most.reduce<Bound>((a, b) => (b.at < a.at ? b : a), { at: Number.POSITIVE_INFINITY, by: null });
  const end = { at: Math.max(far.at, Math.abs(value[port])), by: far.by };
  return sucks
    ? [
        { at: -end.at, by: end.by },
        { at: 0, by: 'sign' },
      ]
    : [{ at: 0, by: 'sign' }, end];
}

function heldBy(state: State, port: number): Setting['held'] {
  const value = state.value[port];
  const near = (bound: Bound): boolean => Math.abs(value - bound.at) <= 1e-6 * scaleOf(state, port);
  return boundsOf(state, port).find(near)?.by ?? null;
}

function driveWith(drive: Drive, value: number, density: number): Drive {
  switch (drive.kind) {
    case 'pressure':
      return { kind: 'pressure', pressure: value };
    case 'flow':
      return { kind: 'flow', flow: value };
    case 'head':
      return { kind: 'head', head: value / (density * GRAVITY) };
    case 'closed':
      return drive;
  }
}

/** In as many digits as anybody sets, of the unit that it reads best in. */
function rounded(drive: Drive): Drive {
  const round = (value: number, kind: 'pressure' | 'flow' | 'length'): number => {
    if (value === 0) return 0;
    const unit = bestUnit(value, kind);
    return Number(inUnit(value, unit).toPrecision(DIGITS)) * unitSize(unit);
  };
  switch (drive.kind) {
    case 'pressure':
      return { kind: 'pressure', pressure: round(drive.pressure, 'pressure') };
    case 'flow':
      return { kind: 'flow', flow: round(drive.flow, 'flow') };
    case 'head':
      return { kind: 'head', head: round(drive.head, 'length') };
    case 'closed':
      return drive;
  }
}

function withDrives(chip: Chip, drives: ReadonlyMap<string, Drive>): Chip {
  return {
    ...chip,
    ports: chip.ports.map((port): Port => {
      const drive = drives.get(port.id);
      return drive ? { ...port, drive } : port;
    }),
  };
}
