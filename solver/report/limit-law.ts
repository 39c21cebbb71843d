import type { Chip } from '../chip/chip.ts';
import type { LimitResult } from '../chip/result.ts';
import { doseExponent } from '../exposure/laws.ts';
import { mixedLaw, referenceOf } from '../exposure/reference-limits.ts';
import type { Route } from '../exposure/routes.ts';
import type { Finding } from '../problem/finding.ts';
import { covers } from './coverage.ts';
import { type LawLimit, onRoute } from './exposure.ts';
import { type Evidence, type Judged, notJudged } from './limits.ts';

/**
 * A published law of damage against the worst route that it covers, on the mean path and, where the limit
 * names a cell, along the wall: dose of one pass times the passes. `where` is the place that gives most of it.
 */
export function lawLimit(limit: LawLimit, evidence: Evidence): Judged {
  const { chip } = evidence;
  const exposure = evidence.exposure();
  let worst = -1;
  let at = -1;
  let path: 'mean' | 'wall-hugging' = 'mean';
  let stuck = -1;
  exposure.routes.forEach((route, index) => {
    if (!onRoute(limit, route)) return;
    const { mean, wallHugging } = exposure.damage(limit, index);
    if (mean > worst) [worst, at, path] = [mean, index, 'mean'];
    if (limit.cellDiameter === undefined) return;
    if (wallHugging === null) stuck = index;
    else if (wallHugging > worst) [worst, at, path] = [wallHugging, index, 'wall-hugging'];
  });
  const base = { name: limit.name, limit: limit.damage };
  if (at < 0) {
    return {
      result: { ...base, worst: null, where: '', met: null },
      findings: [notJudged(limit, '', 'no fluid goes where it holds.', 'Drive the chip, or drop the limit.')],
    };
  }
  const broken = worst > limit.damage;
  const route = exposure.routes[at];
  const result: LimitResult = {
    ...base,
    worst,
    where: mostHarmful(limit, route, path, evidence),
    met: broken ? false : stuck >= 0 ? null : true,
    route: [route.from.id, route.to.id],
    path,
  };
  const findings = [...lawFindings(limit, route), ...passesFindings(limit, route, chip)];
  if (!broken && stuck >= 0) {
    const { from, to } = exposure.routes[stuck];
    findings.push(
      notJudged(
        limit,
        `port:${from.id}`,
        `its cell does not fit through the route to ${to.id}.`,
        'Widen the route, or correct the cell diameter.',
      ),
    );
  }
  return { result, findings };
}

/** The element that gives most of the dose on the path that carries most; '' where that path is not known. */
function mostHarmful(
  limit: LawLimit,
  route: Route,
  path: 'mean' | 'wall-hugging',
  { chip, exposure: found }: Evidence,
): string {
  const exposure = found();
  const { crossing, element } = exposure.net;
  const exponent = doseExponent(limit.law);
  const inside = covers(limit, chip);
  let most = 0;
  let where = '';
  for (const e of exposure.paths.get(route) ?? []) {
    if (!inside(element[e])) continue;
    const how = path === 'mean' ? crossing[e] : crossing[e].hugging(limit.cellDiameter!);
    const dose = how?.dose(exponent) ?? 0;
    if (dose <= most) continue;
    most = dose;
    where = element[e].name;
  }
  return where;
}

/** What is doubtful about the law itself. */
function lawFindings(limit: LawLimit, route: Route): Finding[] {
  const mixed = mixedLaw(limit.law);
  if (mixed) {
    return [
      {
        kind: 'law-mixed',
        severity: 'warn',
        where: '',
        says: `The limit "${limit.name}" takes the constant of ${mixed.constant} with the exponents of ${mixed.exponents}: the three belong together, and the factor between such laws is a hundred and more.`,
        do: 'Take all three constants from one law.',
      },
    ];
  }
  const reference = referenceOf(limit.law);
  const time = limit.passes * route.mean[0];
  const stress = route.peak[0];
  if (!reference || !Number.isFinite(stress)) return [];
  const { mostStress, mostTime } = reference.data;
  const beyond: string[] = [];
  if (mostStress !== undefined && stress > mostStress) {
    beyond.push(`stresses up to ${stress.toPrecision(3)} Pa (its data end at ${mostStress} Pa)`);
  }
  if (mostTime !== undefined && time > mostTime) {
    beyond.push(`${time.toPrecision(3)} s in all (its data end at ${mostTime} s)`);
  }
  if (beyond.length === 0) return [];
  return [
    {
      kind: 'law-range',
      severity: 'note',
      where: '',
      says: `The limit "${limit.name}" goes by ${reference.name}, which is taken beyond its data here: ${beyond.join(', ')}.`,
      do: 'Take the damage as an order of magnitude, and confirm it with your own cells.',
    },
  ];
}

/** Flows that differ by less than this share are those of one pump, which takes out what it puts in. */
const SAME_PUMP = 1e-6;

/** A loop through a pump: how often the assay goes round it, by its own residence time and that of its tubing. */
function passesFindings(limit: LawLimit, route: Route, chip: Chip): Finding[] {
  const time = chip.assay?.time;
  const [from, to] = [route.from.id, route.to.id].map((id) => chip.ports.find((port) => port.id === id)!);
  if (time === undefined || from.drive.kind !== 'flow' || to.drive.kind !== 'flow') return [];
  if (Math.abs(from.drive.flow + to.drive.flow) > SAME_PUMP * from.drive.flow) return [];
  let tubing = 0;
  for (const { bore, length } of [...from.tubing, ...to.tubing]) tubing += (Math.PI / 4) * bore ** 2 * length;
  const round = route.mean[0] + tubing / from.drive.flow;
  const passes = time / round;
  if (!Number.isFinite(passes) || passes <= limit.passes) return [];
  return [
    {
      kind: 'loop-passes',
      severity: 'warn',
      where: `port:${from.id}`,
      says: `The loop from ${from.id} to ${to.id} goes round in ${round.toPrecision(3)} s, tubing included: ${Math.floor(passes).toLocaleString('en')} times in the assay. The limit "${limit.name}" counts ${limit.passes === 1 ? 'one pass' : `${limit.passes.toLocaleString('en')} passes`}.`,
      do: `Count ${Math.ceil(passes).toLocaleString('en')} passes in the limit, or shorten the assay.`,
      value: passes,
      threshold: limit.passes,
      remedy: {
        label: `count ${Math.ceil(passes).toLocaleString('en')} passes in ${limit.name}`.slice(0, 200),
        changes: [
          {
            kind: 'set',
            key: 'limits',
            value: chip.limits.map((one) => (one === limit ? { ...limit, passes: Math.ceil(passes) } : one)),
          },
        ],
      },
    },
  ];
}
