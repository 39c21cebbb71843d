import type { Chip } from '../chip/chip.ts';
import type { LimitResult, TargetResult } from '../chip/result.ts';
import type { Finding } from '../problem/finding.ts';
import type { ErrorBands } from './bands.ts';

/** What limits and targets came to, in the chip's order, with the bands of the numbers that they were judged by. */
interface Judged {
  readonly limits: readonly LimitResult[];
  readonly targets: readonly TargetResult[];
  readonly bands: ErrorBands | null;
  /** Whether junctions count as ideal: then everything is rough, and said to be. */
  readonly rough: boolean;
}

/** Limits on wall shear and targets at ports that are met by less than their number may be off. */
export function closeCalls(chip: Chip, { limits, targets, bands, rough }: Judged): Finding[] {
  if (!bands || rough) return [];
  const findings: Finding[] = [];
  const add = (where: string, what: string, spare: number, band: number): void => {
    if (spare >= band) return;
    findings.push({
      kind: 'close-call',
      severity: 'warn',
      where,
      says: `${what} is met with ${percent(spare)} to spare, and its number may be ${percent(band)} off: it may as well be missed.`,
      do: 'Leave it more room, or solve the junctions more accurately.',
      value: spare,
      threshold: band,
      error: band,
    });
  };
  chip.limits.forEach((limit, i) => {
    const { worst, met, where } = limits[i];
    if (!('shear' in limit) || met !== true || !(worst! > 0)) return;
    add(where, `The limit "${limit.name}"`, limit.shear / worst! - 1, bands.chip.shear);
  });
  const ports = new Map(chip.ports.map(({ id }, i) => [id, bands.ports[i]]));
  chip.targets.forEach((target, i) => {
    const { got, met } = targets[i];
    if (!('port' in target) || !met || !(got! > 0)) return;
    const band = ports.get(target.port);
    if (!band) return;
    const isShare = 'share' in target;
    const wanted = Math.abs(isShare ? target.share : target.flow);
    const spare = (target.within * wanted - Math.abs(got! - wanted)) / got!;
    add(`port:${target.port}`, `The target at ${target.port}`, spare, isShare ? band.share : band.flow);
  });
  return findings;
}

const percent = (share: number): string => `${Number((100 * share).toPrecision(2))} %`;
