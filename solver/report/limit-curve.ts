import type { Limit } from '../chip/chip.ts';
import type { Crossing, Hugging } from '../exposure/crossing.ts';
import { type CurveUse, curveUse, type StressCurve } from '../exposure/curve.ts';
import type { History } from '../exposure/laws.ts';
import type { Finding } from '../problem/finding.ts';
import { covers } from './coverage.ts';
import { onRoute } from './exposure.ts';
import { type Evidence, type Judged, notJudged } from './limits.ts';

type CurveLimit = Extract<Limit, { curve: unknown }>;

/**
 * Stress against time: on the path that carries most of each route, the share of the bearable time that is
 * used up at the worst stress. The limit is 1, all of it.
 */
export function curveLimit(limit: CurveLimit, { chip, exposure }: Evidence): Judged {
  const { net, paths } = exposure();
  const inside = covers(limit, chip);
  let worst: { use: CurveUse; where: string; route: [string, string]; path: 'mean' | 'wall-hugging' } | null =
    null;
  let beyond: { time: number; where: string } | null = null;
  let stuck = '';
  for (const [route, edges] of paths) {
    if (!onRoute(limit, route)) continue;
    const own = edges.filter((e) => inside(net.element[e]));
    if (own.length === 0) continue;
    const names = own.map((e) => net.element[e].name);
    const crossings = own.map((e) => net.crossing[e]);
    const ways: ['mean' | 'wall-hugging', readonly (Crossing | Hugging)[]][] = [['mean', crossings]];
    if (limit.cellDiameter !== undefined) {
      const along = crossings.map((how) => how.hugging(limit.cellDiameter!));
      if (along.every((how) => how !== null)) ways.push(['wall-hugging', along]);
      else stuck ||= names[along.indexOf(null)];
    }
    for (const [path, along] of ways) {
      const histories = along.map((how) => how.history());
      const use = curveUse(limit.curve, joined(histories));
      const where = names[hardest(histories, use.stress)] ?? '';
      if (use.beyond > 0) beyond ??= { time: use.beyond, where };
      if (worst && use.use <= worst.use.use) continue;
      worst = { use, where, route: [route.from.id, route.to.id], path };
    }
  }
  const base = { name: limit.name, limit: 1 };
  if (!worst) {
    return {
      result: { ...base, worst: null, where: '', met: null },
      findings: [notJudged(limit, '', 'no fluid goes where it holds.', 'Drive the chip, or drop the limit.')],
    };
  }
  const { use, where, route, path } = worst;
  const broken = use.use > 1;
  const findings: Finding[] = [];
  if (!broken && beyond) findings.push(beyondFinding(limit, limit.curve, beyond));
  if (!broken && stuck) {
    findings.push(
      notJudged(limit, stuck, 'its cell does not fit through.', 'Widen it, or correct the cell diameter.'),
    );
  }
  return {
    result: {
      ...base,
      worst: use.use,
      where,
      met: broken ? false : findings.length > 0 ? null : true,
      route,
      path,
    },
    findings,
  };
}

function joined(histories: readonly History[]): History {
  const count = histories.reduce((sum, { time }) => sum + time.length, 0);
  const stress = new Float64Array(count);
  const time = new Float64Array(count);
  let at = 0;
  for (const part of histories) {
    stress.set(part.stress, at);
    time.set(part.time, at);
    at += part.time.length;
  }
  return { stress, time };
}

/** Where most of the time at that stress or above it is spent. */
function hardest(histories: readonly History[], level: number): number {
  let most = -1;
  let found = 0;
  histories.forEach(({ stress, time }, i) => {
    let sum = 0;
    for (let k = 0; k < time.length; k += 1) if (stress[k] >= level) sum += time[k];
    if (sum > most) [most, found] = [sum, i];
  });
  return found;
}

function beyondFinding(limit: Limit, curve: StressCurve, beyond: { time: number; where: string }): Finding {
  const [[first, stress]] = curve;
  return notJudged(
    limit,
    beyond.where,
    `its curve begins at ${stress} Pa for ${first} s, and ${beyond.time.toPrecision(2)} s are spent above that stress.`,
    'Extend the curve to shorter times, or lower the stress.',
  );
}
