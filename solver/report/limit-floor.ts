import type { Limit } from '../chip/chip.ts';
import { shareWithin } from '../exposure/floor.ts';
import type { Finding } from '../problem/finding.ts';
import { covers } from './coverage.ts';
import { chamberFloor } from './floors.ts';
import { type Evidence, type Judged, notJudged } from './limits.ts';

type FloorLimit = Extract<Limit, { floor: unknown }>;

/**
 * Share of the floor of each chamber covered whose stress lies within the two bounds, against the share
 * wanted; the chamber with the least decides. What is not known of a floor may be within or not: the limit
 * is judged where that makes no difference.
 */
export function floorLimit(limit: FloorLimit, evidence: Evidence): Judged {
  const { chip, graph, lumped, flow } = evidence;
  const inside = covers(limit, chip);
  const [low, high] = limit.floor;
  let worst: number | null = null;
  let where = '';
  let broken = false;
  const open: Finding[] = [];
  const chambers = chip.chambers.filter(({ id, layer }) => inside({ name: id, layer, ids: new Set([id]) }));
  for (const chamber of chambers) {
    const name = `chamber:${chamber.id}`;
    const floor = chamberFloor(chip, graph, lumped, flow, chamber);
    if ('why' in floor) {
      open.push(notJudged(limit, name, floor.why, floor.remedy));
      continue;
    }
    const known = floor.parts.area.reduce((sum, area) => sum + area, 0);
    const whole = known + floor.unknown;
    const within = (shareWithin(floor.parts, low, high) * known) / whole;
    const most = within + floor.unknown / whole;
    if (worst === null || within < worst) [worst, where] = [within, name];
    if (most < limit.area) broken = true;
    else if (within < limit.area) {
      open.push(
        notJudged(
          limit,
          name,
          `between ${(100 * within).toPrecision(3)} and ${(100 * most).toPrecision(3)} % of its floor lies within: near its ends it is not solved.`,
          'Solve the junctions to know the ends.',
        ),
      );
    }
  }
  if (chambers.length === 0) {
    open.push(
      notJudged(
        limit,
        '',
        'it covers no chamber.',
        'Name a chamber, or a layer that holds one, in the limit.',
      ),
    );
  }
  return {
    result: {
      name: limit.name,
      limit: limit.area,
      worst,
      where: where || open[0]?.where || '',
      met: broken ? false : open.length > 0 ? null : true,
    },
    findings: broken ? [] : open,
  };
}
