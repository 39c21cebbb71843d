import type { Chip, Limit } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { CellResult, ChannelResult, LimitResult } from '../chip/result.ts';
import type { Lumped } from '../lump/lump.ts';
import type { NetworkSolution } from '../network/spec.ts';
import type { Finding } from '../problem/finding.ts';
import type { Exposure } from './exposure.ts';
import { curveLimit } from './limit-curve.ts';
import { floorLimit } from './limit-floor.ts';
import { lawLimit } from './limit-law.ts';
import { shearLimit } from './limit-shear.ts';

/** Names of the pieces ("feed#1") that carry fluid from one port to another. */
export type Between = (start: string, goal: string) => ReadonlySet<string>;

/** What limits are judged by. */
export interface Evidence {
  readonly chip: Chip;
  readonly graph: Graph;
  readonly lumped: Lumped;
  readonly flow: NetworkSolution;
  readonly channels: readonly ChannelResult[];
  readonly cells: readonly CellResult[];
  /** Found when a limit first asks for it. */
  readonly exposure: () => Exposure;
  readonly between: Between;
}

/** A limit against what was found where it holds; `met` is null only with a finding that says why. */
export interface Judged {
  readonly result: LimitResult;
  readonly findings: readonly Finding[];
}

/** Each limit against what was found where it holds. */
export function limitResults(evidence: Evidence): {
  readonly results: readonly LimitResult[];
  readonly findings: readonly Finding[];
} {
  const judged = evidence.chip.limits.map((limit) => judge(limit, evidence));
  return {
    results: judged.map(({ result }) => result),
    findings: judged.flatMap(({ findings }) => findings),
  };
}

function judge(limit: Limit, evidence: Evidence): Judged {
  if ('shear' in limit) return shearLimit(limit, evidence);
  if ('floor' in limit) return floorLimit(limit, evidence);
  return 'curve' in limit ? curveLimit(limit, evidence) : lawLimit(limit, evidence);
}

/** Why a limit is left open. */
export function notJudged(limit: Limit, where: string, why: string, remedy: string): Finding {
  return {
    kind: 'limit-not-judged',
    severity: 'warn',
    where,
    says: `The limit "${limit.name}" is not judged${where === '' ? '' : ` at ${where}`}: ${why}`,
    do: remedy,
  };
}
