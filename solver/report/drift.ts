import type { Chip } from '../chip/chip.ts';
import type { DriftResult } from '../chip/result.ts';
import { GRAVITY } from '../lump/drives.ts';
import type { Lumped } from '../lump/lump.ts';
import { prepareNetwork } from '../network/prepare.ts';
import { solveNetwork } from '../network/solve-network.ts';
import type { NetworkSolution } from '../network/spec.ts';
import type { Finding } from '../problem/finding.ts';

/** Steps of the assay; the levels fall exponentially, which Runge-Kutta follows to a part in a million here. */
const STEPS = 60;

/**
 * Levels fall where fluid is drawn and rise where it gathers: dh/dt = −q(h)/A of each reservoir with a head.
 * How its split drifts over the assay, and when a vessel runs dry. Null where no head falls, no assay time is
 * given, or the flow does not follow pressure in proportion (thinning fluids and soft roofs are not followed).
 */
export function driftOf(
  chip: Chip,
  lumped: Lumped,
  flow: NetworkSolution,
  density: number,
): { readonly drift: DriftResult; readonly findings: readonly Finding[] } | null {
  const time = chip.assay?.time;
  const vessels = chip.ports.flatMap((port, index) => {
    const { drive, reservoir } = port;
    if (drive.kind !== 'head' || !reservoir || lumped.portDrive[index] < 0) return [];
    const area = reservoir.area ?? (Math.PI / 4) * reservoir.bore! ** 2;
    return [{ port, index, drive: lumped.portDrive[index], area, level: drive.head }];
  });
  if (time === undefined || vessels.length === 0 || lumped.laws) return null;
  const network = prepareNetwork(lumped.spec);
  const flowsAt = (levels: Float64Array): Float64Array => {
    const drives = lumped.spec.drives.slice();
    vessels.forEach(({ drive }, i) => {
      drives[drive] = { ...drives[drive], value: density * GRAVITY * levels[i] };
    });
    return solveNetwork({ ...lumped.spec, drives }, network).driveFlow;
  };
  const rate = (levels: Float64Array): Float64Array => {
    const flows = flowsAt(levels);
    return Float64Array.from(vessels, ({ drive, area }) => -flows[drive] / area);
  };
  let levels = Float64Array.from(vessels, ({ level }) => level);
  // Drawn from each, m³, and when it had given all that was in it.
  const start = levels.slice();
  const dry: (number | null)[] = vessels.map(() => null);
  const dt = time / STEPS;
  const moved = (by: Float64Array, share: number): Float64Array =>
    levels.map((level, i) => level + share * dt * by[i]);
  for (let step = 0; step < STEPS; step += 1) {
    const a = rate(levels);
    const b = rate(moved(a, 0.5));
    const c = rate(moved(b, 0.5));
    const d = rate(moved(c, 1));
    levels = levels.map((level, i) => level + (dt / 6) * (a[i] + 2 * b[i] + 2 * c[i] + d[i]));
    vessels.forEach(({ port, area }, i) => {
      const held = port.reservoir!.volume;
      if (held !== undefined && dry[i] === null && (start[i] - levels[i]) * area > held) {
        dry[i] = (step + 1) * dt;
      }
    });
  }
  const after = flowsAt(levels);
  const total = (flows: Float64Array): number => flows.reduce((sum, q) => sum + Math.max(0, q), 0);
  const before = total(flow.driveFlow);
  const behind = total(after);
  const ports = chip.ports.flatMap(({ id }, index) => {
    const drive = lumped.portDrive[index];
    if (drive < 0) return [];
    return [
      {
        port: id,
        flow: after[drive],
        share: behind > 0 ? Math.abs(after[drive]) / behind : null,
        drift:
          before > 0 && behind > 0
            ? Math.abs(after[drive]) / behind - Math.abs(flow.driveFlow[drive]) / before
            : null,
      },
    ];
  });
  const findings = vessels.flatMap(({ port }, i): Finding[] => {
    if (dry[i] === null) return [];
    return [
      {
        kind: 'runs-dry',
        severity: 'warn',
        where: `port:${port.id}`,
        says: `The reservoir at ${port.id} runs dry after about ${dry[i].toPrecision(2)} s of the assay's ${time.toPrecision(3)} s.`,
        do: 'Fill in more, refill on the way, or let less flow.',
      },
    ];
  });
  return {
    drift: {
      time,
      levels: vessels.map(({ port, level }, i) => ({ port: port.id, from: level, to: levels[i] })),
      ports,
    },
    findings,
  };
}
