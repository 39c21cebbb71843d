import type { AsBuilt } from '../../solver/asbuilt/as-built.ts';
import type { Restored, Setting } from '../../solver/asbuilt/restore.ts';
import type { Chip, Drive } from '../../solver/chip/chip.ts';
import type { Making, TargetResult } from '../../solver/chip/result.ts';
import { inUnit } from '../../solver/chip/units.ts';
import { type Answer, strong } from '../verdict/answer.ts';
import { count, counted, figure } from '../words/figure.ts';

const percent = (share: number, digits = 2): string => figure(share, 'share', { unit: '%', digits });

/** "13.87 ± 0.15 %": a share with what making leaves open of it. */
export function shareWith(share: number | null, making: Making | undefined): string {
  if (share === null) return '–';
  if (!making || making.likely === 0) return figure(share, 'share', { unit: '%' });
  const off = share * making.likely;
  const [value, open] = [inUnit(share, '%'), inUnit(off, '%')];
  // Two digits of what is open, and the share to the same place.
  const decimals = Math.min(4, Math.max(0, 1 - Math.floor(Math.log10(open))));
  return `${value.toFixed(decimals)} ± ${open.toFixed(decimals)} %`;
}

export function driveWords(drive: Drive): string {
  switch (drive.kind) {
    case 'pressure':
      return drive.pressure === 0 ? 'open' : figure(drive.pressure, 'pressure', { digits: 5 });
    case 'flow':
      return figure(drive.flow, 'flow', { digits: 5 });
    case 'head':
      return `${figure(drive.head, 'length', { digits: 5 })} above the chip`;
    case 'closed':
      return 'closed';
  }
}

const HELD = {
  pump: 'as far as its pump goes',
  rating: 'as far as the chip is rated',
  sign: 'no further, it would suck',
} as const;

export const heldWords = ({ held }: Setting): string => (held ? HELD[held] : '');

const nameOf = (target: TargetResult): string => target.port ?? target.channel ?? '';

interface Worst {
  readonly name: string;
  readonly off: number;
  readonly within: number;
}

function worstOf(chip: Chip, targets: readonly TargetResult[]): Worst | null {
  let worst: Worst | null = null;
  targets.forEach((target, i) => {
    if (target.got === null) return;
    const off = target.got / Math.abs(target.wanted) - 1;
    const { within } = chip.targets[i]!;
    if (!worst || Math.abs(off) / within > Math.abs(worst.off) / worst.within)
      worst = { name: nameOf(target), off, within };
  });
  return worst;
}

/** What the made chip does, in one sentence. */
export function madeWords(chip: Chip, { result }: AsBuilt): Answer['says'] {
  if (result.targets.length === 0) return ['No target is given: only what flows can be compared.'];
  const worst = worstOf(chip, result.targets);
  if (!worst) return ['Not known: what flows is too small to be resolved.'];
  const missed = result.targets.filter(({ met }) => !met).length;
  const off = strong(figure(worst.off, 'share', { unit: '%', digits: 2, signed: true }));
  if (missed === 0)
    return ['As made it still meets its targets; the furthest is ', worst.name, ', ', off, ' off.'];
  return [
    `As made it misses ${missed === result.targets.length ? (missed === 1 ? 'its target' : 'all its targets') : `${counted(missed, 'target')} of ${count(result.targets.length)}`}: ${worst.name} is `,
    off,
    ` off, ${percent(worst.within)} is allowed.`,
  ];
}

/** What the drives can do about it, in one sentence. */
export function drivesWords(chip: Chip, { result, restored, wider }: AsBuilt): string {
  if (!restored) return 'Give a target, and the drives that meet it are found.';
  const met = result.targets.every((target) => target.met);
  if (restored.settings.length === 0)
    return restored.met
      ? 'The drives can stay as they are.'
      : `No setting of these drives brings it nearer: the channels themselves divide the flow.${wider ? '' : ' What would help is another chip.'}`;
  if (restored.met)
    return met ? 'These drives bring the targets nearer still:' : 'These drives restore the targets:';
  return `These drives come nearest, and do not reach: ${nearWords(chip, restored)}.`;
}

/** "out 1 is still +1.7 % off, 1 % is allowed" */
export function nearWords(chip: Chip, { result }: Restored): string {
  const worst = worstOf(chip, result.targets);
  if (!worst) return 'no target can be resolved';
  return `${worst.name} is still ${figure(worst.off, 'share', { unit: '%', digits: 2, signed: true })} off, ${percent(worst.within)} is allowed`;
}
