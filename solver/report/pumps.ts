import type { Chip, Port } from '../chip/chip.ts';
import type { PumpResult } from '../chip/result.ts';
import { formatQuantity } from '../chip/units-format.ts';
import type { Lumped } from '../lump/lump.ts';
import type { NetworkSolution } from '../network/spec.ts';
import type { Finding } from '../problem/finding.ts';
import { slowed } from './slowed.ts';

/** What each driven port asks of what stands behind it, against what that can do; and the chip against its rating. */
export function pumpResults(
  chip: Chip,
  lumped: Lumped,
  flow: NetworkSolution,
): { readonly pumps: readonly PumpResult[]; readonly findings: readonly Finding[] } {
  const pumps: PumpResult[] = [];
  const findings: Finding[] = [];
  chip.ports.forEach((port, index) => {
    const drive = lumped.portDrive[index];
    if (drive < 0) return;
    const pressure = flow.drivePressure[drive];
    const out = flow.driveFlow[drive];
    if (!Number.isFinite(pressure) || !Number.isFinite(out)) return;
    const result = pumpResult(port, pressure, out, chip.assay?.time);
    pumps.push(result);
    findings.push(...pumpFindings(chip, port, result, !lumped.laws));
  });
  return { pumps, findings: [...findings, ...ratingFindings(chip, lumped, flow, pumps)] };
}

function pumpResult(port: Port, pressure: number, flow: number, assay: number | undefined): PumpResult {
  const { pump, reservoir } = port;
  const size = Math.abs(flow);
  const holds = flow > 0 ? (pump?.volume ?? reservoir?.volume) : pump?.volume;
  const runTime = holds === undefined || !(size > 0) ? null : holds / size;
  const tests: boolean[] = [];
  if (pump?.pressure !== undefined) tests.push(Math.abs(pressure) <= pump.pressure);
  if (pump?.flow !== undefined) tests.push(size <= pump.flow);
  if (runTime !== null && assay !== undefined) tests.push(runTime >= assay);
  return {
    port: port.id,
    pressure,
    flow,
    ...(pump?.pressure === undefined ? {} : { ratedPressure: pump.pressure }),
    ...(pump?.flow === undefined ? {} : { ratedFlow: pump.flow }),
    ...(pump?.bore === undefined ? {} : { plungerSpeed: size / ((Math.PI / 4) * pump.bore ** 2) }),
    runTime,
    met: tests.length === 0 ? null : tests.every((test) => test),
  };
}

/** @param linear whether all pressures and flows go with the drives */
function pumpFindings(chip: Chip, port: Port, result: PumpResult, linear: boolean): Finding[] {
  const { pump, reservoir } = port;
  const assay = chip.assay?.time;
  const lower = (factor: number): Pick<Finding, 'remedy'> => {
    const remedy = linear ? slowed(chip, factor) : null;
    return remedy ? { remedy } : {};
  };
  const where = `port:${port.id}`;
  const findings: Finding[] = [];
  if (pump?.pressure !== undefined && Math.abs(result.pressure) > pump.pressure) {
    findings.push({
      kind: 'pump-pressure',
      severity: 'stop',
      where,
      says: `The pump at ${port.id} must hold ${kilo(result.pressure)}, tubing included; it can do ${kilo(pump.pressure)}.`,
      do: 'Widen or shorten the channels and tubing on its way, let less flow, or take a stronger pump.',
      value: Math.abs(result.pressure),
      threshold: pump.pressure,
      ...lower(pump.pressure / Math.abs(result.pressure)),
    });
  }
  if (pump?.flow !== undefined && Math.abs(result.flow) > pump.flow) {
    findings.push({
      kind: 'pump-flow',
      severity: 'stop',
      where,
      says: `The pump at ${port.id} must move ${microlitres(result.flow)}; it can do ${microlitres(pump.flow)}.`,
      do: 'Let less flow, or take a larger pump or syringe.',
      value: Math.abs(result.flow),
      threshold: pump.flow,
      ...lower(pump.flow / Math.abs(result.flow)),
    });
  }
  if (result.runTime !== null && assay !== undefined && result.runTime < assay) {
    const volume = Math.abs(result.flow) * assay * (1 + 1e-9);
    const larger = {
      ...port,
      ...(pump?.volume === undefined
        ? { reservoir: { ...reservoir, volume } }
        : { pump: { ...pump, volume } }),
    };
    findings.push({
      kind: 'runs-out',
      severity: 'warn',
      where,
      says: `What ${port.id} holds lasts ${result.runTime.toPrecision(3)} s; the assay takes ${assay.toPrecision(3)} s.`,
      do: `Give it ${litres(volume)} or more, refill on the way, or let less flow.`,
      value: result.runTime,
      threshold: assay,
      remedy: {
        label: `give ${port.id} ${litres(volume)}`.slice(0, 200),
        changes: [{ kind: 'put', list: 'ports', id: port.id, part: larger }],
      },
    });
  }
  return findings;
}

/** The largest pressure of chip, ports and fittings against what they bear. */
function ratingFindings(
  chip: Chip,
  lumped: Lumped,
  flow: NetworkSolution,
  pumps: readonly PumpResult[],
): Finding[] {
  const { rating } = chip;
  if (!rating) return [];
  let most = 0;
  let where = '';
  const see = (pressure: number, place: string): void => {
    if (pressure <= most) return;
    most = pressure;
    where = place;
  };
  for (const pump of pumps) see(pump.pressure, `port:${pump.port}`);
  chip.ports.forEach(({ id }, index) => {
    see(flow.pressure[lumped.portNode[index]], `port:${id}`);
  });
  if (most <= rating.pressure) return [];
  const remedy = lumped.laws ? null : slowed(chip, rating.pressure / most);
  return [
    {
      kind: 'burst',
      severity: 'stop',
      where,
      says: `The pressure reaches ${kilo(most)} at ${where.replace('port:', '')}; chip and fittings are rated for ${kilo(rating.pressure)}.`,
      do: 'Lower the drive or the resistance, and wear eye protection: pressurised glass, tubing and fittings can burst.',
      value: most,
      threshold: rating.pressure,
      ...(remedy && { remedy }),
    },
  ];
}

const litres = (volume: number): string => formatQuantity(volume, 'volume', { digits: 3 });
const kilo = (pressure: number): string => `${(pressure / 1e3).toPrecision(3)} kPa`;
const microlitres = (flow: number): string => `${(Math.abs(flow) * 6e10).toPrecision(3)} µL/min`;
