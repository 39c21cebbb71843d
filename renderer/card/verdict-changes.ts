import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { figure } from '../words/figure.ts';

/** Below this relative change nobody needs to be told. */
const WORTH = 1e-3;

/** What a change does to the flows at the ports, the highest wall shear and the findings, in one or two sentences. */
export function verdictChanges(chip: Chip, before: Result | null, after: Result): string {
  const says: string[] = [];
  let worst = 0;
  let where = '';
  for (const port of after.ports) {
    const old = before?.ports.find(({ id }) => id === port.id);
    if (!old || old.flow === null || port.flow === null || old.flow === 0) continue;
    const change = port.flow / old.flow - 1;
    if (Math.abs(change) > Math.abs(worst)) [worst, where] = [change, port.id];
  }
  says.push(
    Math.abs(worst) > WORTH
      ? `The flow at ${where} changes by ${figure(worst, 'share', { digits: 2, unit: '%' })}, the most of all ports.`
      : 'No flow at a port changes by a thousandth.',
  );
  const missed = (result: Result): number =>
    result.targets.filter(({ met }) => !met).length + result.limits.filter(({ met }) => met === false).length;
  if (before && chip.targets.length + chip.limits.length > 0 && missed(before) !== missed(after))
    says.push(`Of targets and limits ${missed(after)} are missed, ${missed(before)} before.`);
  const open = (result: Result): number =>
    result.findings.filter(({ severity, accepted }) => severity !== 'note' && accepted === undefined).length;
  if (before) says.push(`Findings of weight: ${open(after)}, ${open(before)} before.`);
  return says.join(' ');
}
