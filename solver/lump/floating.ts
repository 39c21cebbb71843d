import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { Finding } from '../problem/finding.ts';
import { Problem } from '../problem/problem.ts';
import { driveOf } from './drives.ts';

export interface DriveCheck {
  readonly findings: readonly Finding[];
  /** Cavities in which nothing flows, by number. */
  readonly still: ReadonlySet<number>;
}

interface Part {
  readonly flows: string[];
  readonly pressures: string[];
  readonly closed: string[];
  sum: number;
  /** Least and most of the pressures, Pa. */
  low: number;
  high: number;
}

/** Pressures that differ by less than this share of themselves are equal but for rounding. */
const EQUAL = 1e-12;

/**
 * Parts of the drawing whose pressure nothing fixes, in plain words, before anything is solved:
 * a part that only flows drive cannot be solved (Problem), a part that nothing drives stands still
 * (a finding), and so does one whose drives all hold the same pressure. Two pressures at one place
 * without tubing between contradict each other (Problem).
 */
export function checkDrives(chip: Chip, graph: Graph, density: number): DriveCheck {
  twoPressuresAtOnePlace(chip, graph);
  const parts = new Map<number, Part>();
  chip.ports.forEach((port, index) => {
    const cavity = graph.cavity[graph.portSite[index]!]!;
    let part = parts.get(cavity);
    if (!part) {
      part = {
        flows: [],
        pressures: [],
        closed: [],
        sum: 0,
        low: Number.POSITIVE_INFINITY,
        high: Number.NEGATIVE_INFINITY,
      };
      parts.set(cavity, part);
    }
    const drive = driveOf(port, 1, density);
    if (!drive) part.closed.push(port.id);
    else if (drive.kind === 'flow') {
      part.flows.push(port.id);
      part.sum += drive.value;
    } else {
      part.pressures.push(port.id);
      part.low = Math.min(part.low, drive.value);
      part.high = Math.max(part.high, drive.value);
    }
  });
  for (const part of parts.values()) {
    if (part.pressures.length > 0 || part.flows.length === 0) continue;
    throw new Problem(
      'reference-pressure',
      `${list(part.flows)} ${part.flows.length === 1 ? 'imposes a flow' : 'impose flows'}, but no port of the same cavity has a pressure or a head, so the pressures there are not determined${part.sum === 0 ? '' : ' and the fluid has nowhere to go'}.`,
      `port ${part.flows[0]!}`,
      part.closed.length > 0
        ? `Give one port of that cavity a pressure, for example ${part.closed[0]!} at 0 Pa.`
        : 'Give one port of that cavity a pressure (0 Pa for an open outlet).',
    );
  }
  return standingParts(chip, graph, parts);
}

/** Whether something makes the fluid of this part move. */
function moves(part: Part, chip: Chip): boolean {
  if (part.high - part.low > EQUAL * Math.max(Math.abs(part.high), Math.abs(part.low))) return true;
  return part.flows.some((id) => {
    const { drive } = chip.ports.find((port) => port.id === id)!;
    return drive.kind === 'flow' && drive.flow !== 0;
  });
}

function twoPressuresAtOnePlace(chip: Chip, graph: Graph): void {
  const seen = new Map<number, string>();
  chip.ports.forEach((port, index) => {
    if (port.drive.kind === 'flow' || port.drive.kind === 'closed' || port.tubing.length > 0) return;
    const site = graph.portSite[index]!;
    const other = seen.get(site);
    if (other !== undefined) {
      throw new Problem(
        'drive',
        `Ports ${other} and ${port.id} both impose a pressure on the same place of the chip, with nothing between them.`,
        `port ${port.id}`,
        'Move one of the two ports away, give it tubing, or drive it otherwise.',
      );
    }
    seen.set(site, port.id);
  });
}

/** A finding for every cavity that no port drives, or whose drives cancel. */
function standingParts(chip: Chip, graph: Graph, parts: ReadonlyMap<number, Part>): DriveCheck {
  const moving = new Map<number, boolean>();
  for (const [cavity, part] of parts) moving.set(cavity, moves(part, chip));
  const members = new Map<number, Set<string>>();
  for (const piece of graph.pieces) {
    const cavity = graph.cavity[piece.from];
    if (moving.get(cavity) === true) continue;
    const ids = members.get(cavity);
    if (ids) ids.add(piece.channel);
    else members.set(cavity, new Set([piece.channel]));
  }
  const findings: Finding[] = [];
  for (const [cavity, ids] of members) {
    findings.push(standingFinding([...ids], parts.get(cavity)));
  }
  return { findings, still: new Set(members.keys()) };
}

function standingFinding(names: readonly string[], part: Part | undefined): Finding {
  const is = names.length === 1 ? 'is' : 'are';
  if (part && part.pressures.length > 0) {
    return {
      kind: 'at-rest',
      severity: 'warn',
      where: names[0],
      says: `Nothing flows in ${list(names)}: ${part.pressures.length === 1 ? `${part.pressures[0]} is the only port that is open` : `${list(part.pressures)} all hold the same pressure`}.`,
      do: 'Give one of its ports another pressure, or a flow.',
    };
  }
  const closed = part && part.closed.length > 0 ? ` (${list(part.closed)} closed)` : '';
  return {
    kind: 'unconnected',
    severity: 'warn',
    where: names[0],
    says: `${list(names)} ${is} not connected to any driven port${closed}: nothing flows there.`,
    do: 'Join it to the rest, open a port there, or delete it.',
  };
}

/** "a", "a and b", "a, b and c", "a, b and 7 others". */
function list(names: readonly string[]): string {
  if (names.length === 1) return names[0]!;
  if (names.length <= 4) return `${names.slice(0, -1).join(', ')} and ${names.at(-1)!}`;
  return `${names.slice(0, 2).join(', ')} and ${names.length - 2} others`;
}
