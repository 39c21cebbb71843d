import type { Limit } from '../chip/chip.ts';
import { largestWithin } from '../exposure/cell-region.ts';
import { NANOMETRES } from '../lump/stretches.ts';
import { covers, routeOf } from './coverage.ts';
import { elementOf } from './flow-net.ts';
import { type Evidence, type Judged, notJudged } from './limits.ts';
import { regionOf } from './region.ts';

type ShearLimit = Extract<Limit, { shear: unknown }>;

/**
 * A wall-shear limit against the largest peak of the pieces and cells it covers; of a cell that is only
 * partly in the limit's channel or chamber, what lies within that counts. A place whose peak is unbounded or
 * not known leaves the limit open, unless another place already breaks it.
 */
export function shearLimit(limit: ShearLimit, evidence: Evidence): Judged {
  const { chip, channels, cells } = evidence;
  const inside = covers(limit, chip);
  const route = routeOf(limit);
  const between = route ? evidence.between(route[0], route[1]) : null;
  let worst: number | null = null;
  let where = '';
  let unknown = '';
  const see = (peak: number | null, name: string): void => {
    if (peak === null) unknown ||= name;
    else if (worst === null || peak > worst) {
      worst = peak;
      where = name;
    }
  };
  channels.forEach(({ id, pieces }, index) => {
    const own = inside({ name: id, layer: chip.channels[index].layer, ids: new Set([id]) });
    pieces.forEach((piece, number) => {
      const name = `${id}#${number + 1}`;
      if (piece.flow === null || !own || between?.has(name) === false) return;
      see(piece.peakWallShear, name);
    });
  });
  cells.forEach((cell, index) => {
    const within = between
      ? cell.faces.some((face) => between.has(face))
      : inside(elementOf(chip, evidence.graph, evidence.lumped.cells[index]));
    if (!within) return;
    if (cell.peakWallShear === null || typeof limit.where !== 'string') see(cell.peakWallShear, cell.id);
    else see(peakWithin(evidence, index, limit.where), cell.id);
  });
  const broken = worst !== null && worst > limit.shear;
  const solved = cells.find(({ id }) => id === unknown)?.portMatrix.length !== 0;
  return {
    result: {
      name: limit.name,
      limit: limit.shear,
      worst,
      where: where || unknown,
      met: broken ? false : unknown !== '' || worst === null ? null : true,
    },
    findings:
      unknown === '' || broken
        ? []
        : [
            solved
              ? notJudged(
                  limit,
                  unknown,
                  'the wall shear has no finite peak there.',
                  'Give the layer a fillet radius, so that its corners have one.',
                )
              : notJudged(
                  limit,
                  unknown,
                  'it is not solved in three dimensions.',
                  'Solve it, or see what keeps it from being solved.',
                ),
          ],
  };
}

/** Peak of a cell within a channel or chamber; of the whole cell for what has no area of its own. */
function peakWithin(evidence: Evidence, index: number, id: string): number | null {
  const { chip, cells, lumped, flow } = evidence;
  const { spec, solution } = lumped.cells[index];
  const region = regionOf(chip, id);
  const own = cells[index].peakWallShear;
  const whole = cells[index].faces.every((face) => face.replace(/#\d+$/, '') === id);
  if (!region || !solution || whole) return own;
  const pressures = spec.faces.map(({ node }) => flow.pressure[node] || 0);
  return largestWithin(solution, pressures, (x, y) =>
    region(spec.origin[0] + NANOMETRES * x, spec.origin[1] + NANOMETRES * y),
  );
}
