import type { TargetResult } from '../../solver/chip/result.ts';
import type { Ref } from '../state/ref.ts';
import { plusMinus } from '../words/band.ts';
import { count, counted, figure } from '../words/figure.ts';
import {
  type Answer,
  type Evidence,
  FIRST,
  type Margin,
  placeName,
  type Run,
  strong,
  unsolved,
} from './answer.ts';

const QUESTION = FIRST;

const nameOf = (target: TargetResult): string =>
  target.port === undefined ? (target.channel ?? '') : placeName(`port:${target.port}`);
const refOf = (target: TargetResult): Ref =>
  target.port !== undefined ? `port:${target.port}` : `channel:${target.channel}`;
const offOf = (target: TargetResult): number =>
  target.got === null ? Number.NaN : target.got / target.wanted - 1;
const percent = (share: number, signed = false): string =>
  figure(share, 'share', { digits: 2, unit: '%', signed });

/** The targets against what they get. */
export function splitAnswer(evidence: Evidence): Answer {
  const { result, chip } = evidence;
  if (!result) return unsolved(QUESTION, evidence);
  const { targets } = result;
  const [only] = targets;
  if (!only)
    return {
      question: QUESTION,
      standing: 'not asked',
      says: ['No target is given.'],
      margin: null,
      culprit: null,
    };
  const within = (target: TargetResult): number => toleranceOf(evidence, target);
  const strain = (target: TargetResult): number => Math.abs(offOf(target)) / within(target);
  const known = targets.filter((target) => target.got !== null);
  const worst = known.length > 0 ? known.reduce((a, b) => (strain(b) > strain(a) ? b : a)) : null;
  const margin = worst && dots(known, worst, Math.max(...targets.map(within)));
  const answer = (standing: Answer['standing'], culprit: TargetResult, says: readonly Run[]): Answer => ({
    question: QUESTION,
    standing,
    says,
    margin,
    culprit: refOf(culprit),
  });

  const missed = known.filter((target) => !target.met);
  if (worst && missed.length > 0) {
    const others = missed.length - 1;
    const tail = others === 0 ? '.' : `; ${counted(others, 'more misses', 'more miss')} as well.`;
    return answer('no', worst, [
      `No: ${nameOf(worst)} is `,
      strong(percent(offOf(worst), true)),
      ` off${plusMinus(worst.band)}, ${percent(within(worst))} is allowed${tail}`,
    ]);
  }
  const lost = targets.find((target) => target.got === null);
  if (lost || !worst)
    return answer('unknown', lost ?? only, [
      `Not known: the flow at ${nameOf(lost ?? only)} is too small to be resolved.`,
    ]);
  // less than a hundredth of a per cent is nothing that anyone can measure
  const off = strong(percent(Math.max(1e-4, Math.abs(offOf(worst)))));
  const made = mostMoved(known, within);
  const all = targets.length === 2 ? 'Both' : `All ${count(targets.length)}`;
  if (made)
    return answer('yes', made, [
      targets.length === 1 ? `Yes: ${nameOf(worst)} is within ` : `${all} ${noun(targets)} within `,
      off,
      `${plusMinus(worst.band)}; making adds ±\u00a0`,
      strong(percent(made.making!.likely)),
      reach(made) > within(made) ? `, ${percent(within(made))} is allowed.` : '.',
    ]);
  if (targets.length === 1)
    return answer('yes', worst, [
      `Yes: ${nameOf(worst)} is within `,
      off,
      `${plusMinus(worst.band)} of its target.`,
    ]);
  const wish = chip.targets.every((target) => 'share' in target) ? 'share' : 'target';
  return answer('yes', worst, [
    `${all} ${noun(targets)} within `,
    off,
    `${plusMinus(worst.band)} of their ${wish}; the worst is ${nameOf(worst)}.`,
  ]);
}

/** How far a target may come to lie off, as likely as the tolerances are. */
const reach = (target: TargetResult): number => Math.abs(offOf(target)) + (target.making?.likely ?? 0);

/** The target that tolerances bring furthest; none where they are not given or move nothing that can be measured. */
function mostMoved(
  known: readonly TargetResult[],
  within: (target: TargetResult) => number,
): TargetResult | null {
  const moved = known.filter((target) => (target.making?.likely ?? 0) > 1e-4);
  if (moved.length === 0) return null;
  return moved.reduce((a, b) => (reach(b) / within(b) > reach(a) / within(a) ? b : a));
}

/** "wells" where all names are one word and a number, else "outlets" or "targets". */
function noun(targets: readonly TargetResult[]): string {
  const stems = new Set(
    targets.map((target) => /^(\p{L}{2,12})[\s_-]*\d+$/u.exec(target.port ?? target.channel ?? '')?.[1]),
  );
  const [stem] = stems;
  if (stems.size === 1 && stem && !['in', 'out', 'port'].includes(stem)) return `${stem}s`;
  return targets.every((target) => target.port !== undefined) ? 'outlets' : 'targets';
}

function toleranceOf({ chip }: Evidence, target: TargetResult): number {
  const found = chip.targets.find((wish) =>
    'port' in wish ? wish.port === target.port : wish.channel === target.channel,
  );
  return found && found.within > 0 ? found.within : 1e-6;
}

const MOST_DOTS = 60;

function dots(known: readonly TargetResult[], worst: TargetResult, tolerance: number): Margin {
  const furthest = Math.max(...known.map((target) => Math.abs(offOf(target))));
  // the track ends at the tolerance, or beyond the furthest dot where one lies outside
  const end = furthest > tolerance ? furthest * 1.08 : tolerance;
  const thin = Math.ceil(known.length / MOST_DOTS);
  const shown = known.filter((target, i) => i % thin === 0 && target !== worst);
  const label = percent(end);
  return {
    kind: 'dots',
    dots: [...shown, worst].map((target) => ({
      at: 0.5 + (0.5 * offOf(target)) / end,
      worst: target === worst,
      out: !target.met,
    })),
    allowed: tolerance / end,
    ends: [`−${label}`, `+${label}`],
  };
}
