import type { Port } from '../../solver/chip/chip.ts';
import type { PumpResult, Result } from '../../solver/chip/result.ts';
import { counted, figure } from '../words/figure.ts';
import { spoken } from '../words/spoken.ts';
import { type Answer, type Evidence, type Margin, placeName, strong, unsolved } from './answer.ts';
import { PUMP_KINDS } from './finding-kinds.ts';

const QUESTION = 'Can the pump drive it?';

const drives = (port: Port): boolean => port.drive.kind !== 'closed';

/** What the drives must deliver against what stands behind them can, and what chip and fittings bear. */
export function pumpAnswer(evidence: Evidence): Answer {
  const { result, chip } = evidence;
  if (!result) return unsolved(QUESTION, evidence);
  const open = new Set(chip.ports.filter(drives).map((port) => port.id));
  if (result.ports.filter((port) => open.has(port.id)).length < 2)
    return {
      question: QUESTION,
      standing: 'unknown',
      says: ['Not known: nothing drives a flow.'],
      margin: null,
      culprit: null,
    };
  const pumps = result.pumps ?? [];
  const judged = pumps.filter((pump) => pump.met !== null);
  const worst = judged.reduce<PumpResult | null>((a, b) => (!a || strain(b) > strain(a) ? b : a), null);
  const margin = worst && bar(worst);
  const found = result.findings.filter(
    ({ kind, severity, accepted }) => PUMP_KINDS.has(kind) && severity !== 'note' && accepted === undefined,
  );
  const first = found.find(({ severity }) => severity === 'stop') ?? found[0];
  if (first)
    return {
      question: QUESTION,
      standing: 'no',
      says: [
        'No: ',
        spoken(first.says).replace(/\.$/, ''),
        found.length > 1 ? `, and ${counted(found.length - 1, 'more finding', 'more findings')}.` : '.',
      ],
      margin,
      culprit: first.where || null,
    };
  if (!worst) return notAsked(result, evidence, open);
  const { port, ratedPressure, ratedFlow, pressure, flow } = worst;
  const others = judged.length > 1 ? `, the hardest pressed of ${counted(judged.length, 'pump')}` : '';
  const byPressure = ratedPressure !== undefined && Math.abs(pressure) / ratedPressure >= flowStrain(worst);
  const rated = byPressure ? ratedPressure : ratedFlow;
  const kind = byPressure ? 'pressure' : 'flow';
  const need = Math.abs(byPressure ? pressure : flow);
  return {
    question: QUESTION,
    standing: 'yes',
    says:
      rated === undefined
        ? [
            `Yes: what ${placeName(`port:${port}`)} holds lasts `,
            strong(figure(worst.runTime, 'time', { digits: 3 })),
            `${others}.`,
          ]
        : [
            `Yes: ${placeName(`port:${port}`)} needs `,
            strong(figure(need, kind, { digits: 3 })),
            ` of the ${figure(rated, kind, { digits: 3 })} its pump can give${others}.`,
          ],
    margin,
    culprit: `port:${port}`,
  };
}

/** No pump is stated: what is needed is told, so that nothing can be missed. */
function notAsked(result: Result, { chip }: Evidence, open: ReadonlySet<string>): Answer {
  const ports = result.ports.filter((port) => open.has(port.id));
  const highest = ports.reduce((a, b) => (b.pressure > a.pressure ? b : a));
  const lowest = ports.reduce((a, b) => (b.pressure < a.pressure ? b : a));
  const need = highest.pressure - lowest.pressure;
  const pumps = chip.ports.filter((port) => port.drive.kind === 'flow').length;
  const fed = chip.ports.find(({ id }) => id === highest.id)?.drive;
  const at = placeName(`port:${highest.id}`);
  const tail =
    lowest.pressure < 0
      ? ` from ${at} to ${placeName(`port:${lowest.id}`)}, which sucks`
      : ` at ${at}${pumps > 1 ? `, the highest of ${counted(pumps, 'flow drive')}` : ''}`;
  return {
    question: QUESTION,
    standing: 'not asked',
    says: [
      'It needs ',
      strong(figure(need, 'pressure', { digits: 3 })),
      fed?.kind === 'head'
        ? `${tail}, which its reservoir gives; what that holds is not stated.`
        : `${tail}; no pump is given.`,
    ],
    margin: null,
    culprit: `port:${highest.id}`,
  };
}

const flowStrain = ({ flow, ratedFlow }: PumpResult): number =>
  ratedFlow === undefined ? 0 : Math.abs(flow) / ratedFlow;

/** How near a pump is to what it can do; above 1 it cannot. */
const strain = (pump: PumpResult): number =>
  Math.max(
    flowStrain(pump),
    pump.ratedPressure === undefined ? 0 : Math.abs(pump.pressure) / pump.ratedPressure,
    pump.met === false ? 1 + Number.EPSILON : 0,
  );

function bar(pump: PumpResult): Margin | null {
  const { ratedPressure, ratedFlow } = pump;
  const byPressure =
    ratedPressure !== undefined && Math.abs(pump.pressure) / ratedPressure >= flowStrain(pump);
  const rated = byPressure ? ratedPressure : ratedFlow;
  if (rated === undefined || !(rated > 0)) return null;
  const need = Math.abs(byPressure ? pump.pressure : pump.flow);
  const end = Math.max(rated, need);
  return {
    kind: 'bar',
    filled: need / end,
    limit: rated / end,
    over: need > rated,
    labels: [
      { at: 0, text: '0' },
      { at: rated / end, text: figure(rated, byPressure ? 'pressure' : 'flow', { digits: 3 }) },
    ],
  };
}
