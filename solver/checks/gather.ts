import type { Acceptance } from '../chip/making.ts';
import type { Finding } from '../problem/finding.ts';
import type { FindingKind } from './kinds.ts';

/** What a check hands in: `off` says how far beyond its threshold it is, 1 at it, to put the worst first. */
export interface Found extends Finding {
  readonly kind: FindingKind;
  readonly off: number;
}

/** Of one kind no more are listed one by one: a thousand channels too narrow have one cause. */
const MOST = 40;

/** Findings of the checks, of each kind the worst first. */
export class Gathered {
  readonly #kinds = new Map<FindingKind, Found[]>();

  add(found: Found): void {
    const list = this.#kinds.get(found.kind);
    if (list) list.push(found);
    else this.#kinds.set(found.kind, [found]);
  }

  list(): Finding[] {
    const all: Finding[] = [];
    for (const found of this.#kinds.values()) {
      found.sort((a, b) => b.off - a.off);
      const more = found.length - MOST;
      found.slice(0, MOST).forEach(({ off: _off, ...finding }, i) => {
        const last = i === MOST - 1 && more > 0;
        all.push(
          last ? { ...finding, says: `${finding.says} The same holds of ${more} more, less so.` } : finding,
        );
      });
    }
    return all;
  }
}

/** Severities from the gravest. */
const GRAVITY = { stop: 0, warn: 1, note: 2 } as const;

export const byGravity = (findings: readonly Finding[]): Finding[] =>
  [...findings].sort((a, b) => GRAVITY[a.severity] - GRAVITY[b.severity]);

/** The findings, those that the designer accepts marked with the reason. */
export function withAccepted(
  findings: readonly Finding[],
  accepted: readonly Acceptance[] | undefined,
): readonly Finding[] {
  if (!accepted) return findings;
  const reasons = new Map(accepted.map(({ kind, where, reason }) => [`${kind} ${where}`, reason]));
  return findings.map((finding) => {
    const reason = reasons.get(`${finding.kind} ${finding.where}`);
    return reason === undefined ? finding : { ...finding, accepted: reason };
  });
}
