import type { Port } from '../../solver/chip/chip.ts';
import { counted, figure } from '../words/figure.ts';
import { type Answer, type Evidence, placeName, strong, unsolved } from './answer.ts';

const QUESTION = 'Can the pump drive it?';

const drives = (port: Port): boolean => port.drive.kind !== 'closed';

/** What the drives must deliver. What they can is not part of the chip yet, so that nothing can be missed. */
export function pumpAnswer(evidence: Evidence): Answer {
  const { result, chip } = evidence;
  if (!result) return unsolved(QUESTION, evidence);
  const open = new Set(chip.ports.filter(drives).map((port) => port.id));
  const ports = result.ports.filter((port) => open.has(port.id));
  if (ports.length < 2)
    return {
      question: QUESTION,
      standing: 'unknown',
      says: ['Not known: nothing drives a flow.'],
      margin: null,
      culprit: null,
    };
  const highest = ports.reduce((a, b) => (b.pressure > a.pressure ? b : a));
  const lowest = ports.reduce((a, b) => (b.pressure < a.pressure ? b : a));
  const need = highest.pressure - lowest.pressure;
  const pumps = chip.ports.filter((port) => port.drive.kind === 'flow').length;
  const tail =
    lowest.pressure < 0
      ? ` from ${placeName(`port:${highest.id}`)} to ${lowest.id}, which sucks`
      : ` at ${highest.id}${pumps > 1 ? `, the highest of ${counted(pumps, 'flow drive')}` : ''}`;
  return {
    question: QUESTION,
    standing: 'not asked',
    says: ['It needs ', strong(figure(need, 'pressure', { digits: 3 })), `${tail}; no pump is given.`],
    margin: null,
    culprit: `port:${highest.id}`,
  };
}
