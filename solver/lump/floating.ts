import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { Finding } from '../problem/finding.ts';
import { Problem } from '../problem/problem.ts';

/**
 * Parts of the drawing whose pressure nothing fixes, in plain words, before anything is solved:
 * a part that only flows drive cannot be solved (Problem), a part that nothing drives stands still
 * (a finding). Two pressures at one place without tubing between contradict each other (Problem).
 */
export function checkDrives(chip: Chip, graph: Graph): Finding[] {
  twoPressuresAtOnePlace(chip, graph);
  const parts = new Map<number, { flows: string[]; pressures: string[]; closed: string[]; sum: number }>();
  chip.ports.forEach((port, index) => {
    const cavity = graph.cavity[graph.portSite[index]!]!;
    let part = parts.get(cavity);
    if (!part) {
      part = { flows: [], pressures: [], closed: [], sum: 0 };
      parts.set(cavity, part);
    }
    if (port.drive.kind === 'flow') {
      part.flows.push(port.id);
      part.sum += port.drive.flow;
    } else if (port.drive.kind === 'closed') part.closed.push(port.id);
    else part.pressures.push(port.id);
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
  return standingParts(graph, parts);
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

/** A finding for every cavity that no port drives. */
function standingParts(
  graph: Graph,
  parts: ReadonlyMap<number, { flows: string[]; pressures: string[]; closed: string[] }>,
): Finding[] {
  const members = new Map<number, Set<string>>();
  for (const piece of graph.pieces) {
    const cavity = graph.cavity[piece.from]!;
    const part = parts.get(cavity);
    if (part && (part.pressures.length > 0 || part.flows.length > 0)) continue;
    const ids = members.get(cavity);
    if (ids) ids.add(piece.channel);
    else members.set(cavity, new Set([piece.channel]));
  }
  const findings: Finding[] = [];
  for (const [cavity, ids] of members) {
    const closed = parts.get(cavity)?.closed ?? [];
    const names = [...ids];
    findings.push({
      kind: 'unconnected',
      severity: 'warn',
      where: names[0]!,
      says: `${list(names)} ${names.length === 1 ? 'is' : 'are'} not connected to any driven port${closed.length > 0 ? ` (${list(closed)} closed)` : ''}: nothing flows there.`,
      do: 'Join it to the rest, open a port there, or delete it.',
    });
  }
  return findings;
}

/** "a", "a and b", "a, b and c", "a, b and 7 others". */
function list(names: readonly string[]): string {
  if (names.length === 1) return names[0]!;
  if (names.length <= 4) return `${names.slice(0, -1).join(', ')} and ${names.at(-1)!}`;
  return `${names.slice(0, 2).join(', ')} and ${names.length - 2} others`;
}
