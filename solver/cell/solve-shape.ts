import { Problem } from '../problem/problem.ts';
import type { Accuracy, ShapeSolution } from './cell.ts';
import { relativeDifference } from './difference.ts';
import { faceWidths } from './equivalent.ts';
import { fieldsOf, type Level, type LevelSolution, levelOf, solveLevel, tighten } from './level.ts';
import { mostTriangles } from './memory.ts';
import { peakOfFields } from './peak.ts';
import { planMesh } from './plan-mesh.ts';
import { type CellShape, sharpCorners } from './shape.ts';
import { finished, type Steps } from './steps.ts';

/** Of the pressure iteration where the result is kept. */
const TIGHT = 2e-9;
/** Where only errors are judged by it: share of the flow's accuracy, and at most. */
const LOOSE_SHARE = 0.02;
const LOOSE_MOST = 1e-4;
/** Coarseness of the mesh that judges at first, over that of the mesh judged. */
const APART = 1.5;
/** Errors go with these powers of the coarseness. */
const FLOW_ORDER = 3.5;
const PEAK_ORDER = 2;
const MOST_ROUNDS = 6;
const MOST_MODES = 12;
const FINEST = 0.25;
/** Power of the refinement at fillets that the rest of the mesh takes part in. */
const ELSEWHERE = 0.5;

/** As `shapeSteps`, in one go. */
export const solveShape = (shape: CellShape, accuracy: Accuracy, where: string): ShapeSolution =>
  finished(shapeSteps(shape, accuracy, where));

/**
 * Solves a shape of depth 1 on two meshes and with two numbers of depth modes, refines until the asked
 * accuracy is met (or memory, rounds or modes run out: the errors then say what was reached). Between its
 * steps, a few ms each for an ordinary junction, something else may be done, or it may be left for good.
 */
export function* shapeSteps(shape: CellShape, accuracy: Accuracy, where: string): Steps<ShapeSolution> {
  const { faces } = shape;
  const sharp = sharpCorners(shape.loops).length > 0;
  const peak = sharp ? null : accuracy.peak;
  const loose = Math.min(LOOSE_MOST, LOOSE_SHARE * accuracy.flow);
  const slender = 1 / Math.min(...faceWidths(shape));
  let modes = Math.max(peak === null ? 1 : peakModes(peak), flowModes(accuracy.flow, slender));
  let coarseness = 1.08 * (accuracy.flow / 0.005) ** (1 / FLOW_ORDER);
  coarseness = Math.min(1.4, Math.max(FINEST, coarseness));
  // Edges per quarter circle: peaks go with them, flows hardly.
  let arcs =
    peak === null ? 3 / coarseness : Math.max(3 / coarseness, 6 * (0.048 / peak) ** (1 / PEAK_ORDER));
  const level = (coarser: number, fewerArcs: number): Level => {
    const most = mostTriangles(modes, faces - 1);
    return within(
      () => levelOf(planMesh(shape, coarseness * coarser, where, most, arcs / fewerArcs), faces),
      where,
    );
  };

  /** How far the two meshes lie apart: in coarseness, and along arcs. */
  let apart: Apart = { mesh: APART, arcs: APART };
  let judge = solveLevel(level(APART, APART), modes, loose);
  yield;
  let fine = solveLevel(level(1, 1), modes, loose, judge);
  let bounds: Bounds;
  for (let round = 1; ; round += 1) {
    yield;
    const fewer = modes > 1 ? solveLevel(judge.level, modes - 1, loose, judge) : null;
    bounds = {
      flow: flowError(fine, judge, fewer, coarseness, apart.mesh, slender, faces),
      peak: peak === null ? null : peakError(fine, judge, fewer, arcs, apart.arcs, slender, faces),
    };
    const flowOver = (part: keyof Bound): boolean => exceeds(bounds.flow, accuracy.flow, part, 0.5);
    const peakOver = (part: keyof Bound): boolean =>
      bounds.peak !== null && peak !== null && exceeds(bounds.peak, peak, part, 0.5);
    const moreModes = flowOver('modes') || peakOver('modes');
    const room = coarseness / FINEST;
    const finer = room >= 1.2 && (flowOver('mesh') || peakOver('mesh'));
    if (!moreModes && !finer) break;
    if (round === MOST_ROUNDS || (moreModes && modes === MOST_MODES)) break;
    if (moreModes) modes += 1;
    if (finer) {
      const wanted = (bound: Bound, asked: number, order: number): number =>
        (bound.mesh / (0.55 * asked)) ** (1 / order);
      const flowStep = flowOver('mesh') ? wanted(bounds.flow, accuracy.flow, FLOW_ORDER) : 1;
      const peakStep = peakOver('mesh') ? wanted(bounds.peak!, peak!, PEAK_ORDER) : 1;
      // A peak lies at a fillet: what it asks for is mostly asked of the mesh there.
      const step = Math.min(1.8, room, Math.max(1.2, flowStep, peakStep ** ELSEWHERE));
      const arcStep = Math.min(1.5, Math.max(step, 1.2, peakStep));
      let next: Level;
      try {
        next = level(1 / step, 1 / arcStep);
      } catch (error) {
        // What was reached is worth having.
        if (error instanceof Problem && error.kind === 'memory') break;
        throw error;
      }
      coarseness /= step;
      arcs *= arcStep;
      apart = { mesh: step, arcs: arcStep };
      judge = moreModes ? solveLevel(fine.level, modes, loose, fine) : fine;
      fine = solveLevel(next, modes, loose, judge);
    } else {
      judge = solveLevel(judge.level, modes, loose, judge);
      fine = solveLevel(fine.level, modes, loose, fine);
    }
  }
  yield;
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

interface Apart {
  readonly mesh: number;
  readonly arcs: number;
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
