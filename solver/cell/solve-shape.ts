import { Problem } from '../problem/problem.ts';
import type { Accuracy, ShapeSolution } from './cell.ts';
import { relativeDifference } from './difference.ts';
import { faceWidths } from './equivalent.ts';
import { fieldsOf, type Level, type LevelSolution, levelOf, solveLevel, tighten } from './level.ts';
import { mostTriangles } from './memory.ts';
import { peakOfFields } from './peak.ts';
import { planMesh } from './plan-mesh.ts';
import { type CellShape, sharpCorners } from './shape.ts';

/** Of the pressure iteration: where the result is kept, and where only errors are judged by it. */
const TIGHT = 2e-9;
const LOOSE = 2e-5;
/** Coarseness of the mesh that judges at first, over that of the mesh judged. */
const APART = 1.5;
/** Errors go with these powers of the coarseness. */
const FLOW_ORDER = 3.5;
const PEAK_ORDER = 2;
const MOST_ROUNDS = 6;
const MOST_MODES = 12;
const FINEST = 0.25;

/**
 * Solves a shape of depth 1 on two meshes and with two numbers of depth modes, refines until the asked
 * accuracy is met (or memory, rounds or modes run out: the errors then say what was reached).
 */
export function solveShape(shape: CellShape, accuracy: Accuracy, where: string): ShapeSolution {
  const { faces } = shape;
  const sharp = sharpCorners(shape.loops).length > 0;
  const peak = sharp ? null : accuracy.peak;
  const slender = 1 / Math.min(...faceWidths(shape));
  let modes = Math.max(peak === null ? 1 : peakModes(peak), flowModes(accuracy.flow, slender));
  let coarseness = 1.08 * (accuracy.flow / 0.005) ** (1 / FLOW_ORDER);
  coarseness = Math.min(1.4, Math.max(FINEST, coarseness));
  // Edges per quarter circle: peaks go with them, flows hardly.
  let arcs =
    peak === null ? 3 / coarseness : Math.max(3 / coarseness, 6 * (0.048 / peak) ** (1 / PEAK_ORDER));
  const mesh = (times: number): Level => {
    const most = mostTriangles(modes, faces - 1);
    return levelOf(planMesh(shape, coarseness * times, where, most, arcs / times), faces);
  };

  let apart = APART;
  let judge = solveLevel(
    within(() => mesh(apart), where),
    modes,
    LOOSE,
  );
  let fine = solveLevel(
    within(() => mesh(1), where),
    modes,
    LOOSE,
  );
  let bounds: Bounds;
  for (let round = 1; ; round += 1) {
    const fewer = modes > 1 ? solveLevel(judge.level, modes - 1, LOOSE) : null;
    bounds = {
      flow: flowError(fine, judge, fewer, coarseness, apart, slender, faces),
      peak: peak === null ? null : peakError(fine, judge, fewer, arcs, apart, slender, faces),
    };
    const over = (part: 'mesh' | 'modes', share: number): boolean =>
      exceeds(bounds.flow, accuracy.flow, part, share) ||
      (bounds.peak !== null && peak !== null && exceeds(bounds.peak, peak, part, share));
    const moreModes = over('modes', 0.5);
    const finer = over('mesh', 0.5);
    if (!moreModes && !finer) break;
    const room = coarseness / FINEST;
    if (round === MOST_ROUNDS || (moreModes ? modes === MOST_MODES : room < 1.2)) break;
    if (moreModes) modes += 1;
    if (finer && room >= 1.2) {
      const flowStep = (bounds.flow.mesh / (0.55 * accuracy.flow)) ** (1 / FLOW_ORDER);
      const peakStep =
        bounds.peak && peak !== null ? (bounds.peak.mesh / (0.55 * peak)) ** (1 / PEAK_ORDER) : 1;
      const step = Math.min(1.8, room, Math.max(1.2, flowStep, peakStep));
      let level: Level;
      try {
        level = within(() => mesh(1 / step), where);
      } catch (error) {
        // What was reached is worth having.
        if (error instanceof Problem && error.kind === 'memory') break;
        throw error;
      }
      coarseness /= step;
      arcs *= step;
      apart = step;
      judge = moreModes ? solveLevel(fine.level, modes, LOOSE) : fine;
      fine = solveLevel(level, modes, LOOSE);
    } else {
      judge = solveLevel(judge.level, modes, LOOSE);
      fine = solveLevel(fine.level, modes, LOOSE);
    }
  }
  const kept = tighten(fine, TIGHT);
  return {
    faces,
    asked: accuracy,
    portMatrix: kept.matrix,
    flowError: bounds.flow.mesh + bounds.flow.modes,
    peakError: bounds.peak && bounds.peak.mesh + bounds.peak.modes,
    sharp,
    checks: kept.checks,
    fields: fieldsOf(kept),
  };
}

/** Bounds of relative errors: from the plan mesh and from the number of depth modes. */
interface Bound {
  readonly mesh: number;
  readonly modes: number;
}
interface Bounds {
  readonly flow: Bound;
  readonly peak: Bound | null;
}

/** Whether the bound misses what is asked and this part of it takes more than its share. */
const exceeds = (bound: Bound, asked: number, part: keyof Bound, share: number): boolean =>
  bound.mesh + bound.modes > asked && bound[part] > share * asked;

/** Turns 'too many triangles' into what it means here. */
function within(make: () => Level, where: string): Level {
  try {
    return make();
  } catch (error) {
    if (!(error instanceof Problem && error.kind === 'too-many')) throw error;
    throw new Problem(
      'memory',
      'This piece of the plan is too large or too detailed to be solved in three dimensions.',
      where,
      'Remove details far smaller than the rest, or divide the piece by longer channels.',
    );
  }
}

/** Depth modes that keep a flow within a sixth of `asked`, by the errors measured on T junctions. */
function flowModes(asked: number, slender: number): number {
  if (asked >= 0.02 && slender <= 1) return 1;
  let modes = 2;
  // Error of N modes: falls by about 60 per mode at depth/width 1, by 12 at 5, by 3 at 30.
  let error = 1.2e-4 * slender ** 2.6;
  if (slender > 4) error = 0.009 * (slender / 5) ** 0.5;
  while (error > asked / 6 && modes < MOST_MODES - 2) {
    modes += 1;
    error /= 1 + 60 / Math.max(1, slender);
  }
  return modes;
}

const peakModes = (asked: number): number => (asked >= 0.04 ? 2 : asked >= 0.008 ? 3 : 4);

/** Bounds of the relative error of the port matrix of `fine`. */
function flowError(
  fine: LevelSolution,
  judge: LevelSolution,
  fewer: LevelSolution | null,
  coarseness: number,
  apart: number,
  slender: number,
  faces: number,
): Bound {
  const step = relativeDifference(judge.matrix, fine.matrix, faces);
  const mesh = (1.2 * step) / (apart ** FLOW_ORDER - 1) + 0.0018 * coarseness ** FLOW_ORDER;
  if (!fewer) return { mesh, modes: 0.01 * slender ** 1.8 };
  const drop = relativeDifference(fewer.matrix, judge.matrix, faces);
  // What is left over what the last mode changed: at most 0.017, 0.1, 0.17, 0.51 at depth/width 2, 5, 12, 35.
  const left = Math.min(0.6, 0.02 + 0.022 * Math.max(0, slender - 1));
  return { mesh, modes: drop * (fine.modes > 2 ? Math.max(0.15, left) : left) };
}

/** Bounds of the relative error of the peak wall shear of `fine`, over the face patterns. */
function peakError(
  fine: LevelSolution,
  judge: LevelSolution,
  fewer: LevelSolution | null,
  arcs: number,
  apart: number,
  slender: number,
  faces: number,
): Bound {
  const kept = fieldsOf(fine);
  const judged = fieldsOf(judge);
  const less = fewer && fieldsOf(fewer);
  let step = 0;
  let drop = 0;
  for (let face = 0; face < faces; face += 1) {
    const here = peakOfFields(kept, face);
    const there = peakOfFields(judged, face);
    step = Math.max(step, Math.abs(there / here - 1));
    if (less) drop = Math.max(drop, Math.abs(peakOfFields(less, face) / there - 1));
  }
  const mesh = step / (apart ** PEAK_ORDER - 1) + 0.008 * (6 / arcs) ** PEAK_ORDER;
  if (!less) return { mesh, modes: 0.25 };
  // As above: at most 0.12, 0.14, 0.34, 0.6 for two modes; 0.6 for more, or 2.6 beyond depth/width 12.
  const left = Math.min(0.6, 0.12 + 0.03 * Math.max(0, slender - 2));
  return { mesh, modes: drop * (fine.modes === 2 ? left : slender > 12 ? 2.6 : 0.6) };
}
