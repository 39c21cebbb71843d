import { Problem } from '../problem/problem.ts';
import type { Accuracy, CellFields, ShapeSolution } from './cell.ts';
import { relativeDifference } from './difference.ts';
import { faceWidths } from './equivalent.ts';
import { fieldsOf, type Level, type LevelSolution, levelOf, solveLevel } from './level.ts';
import { mostTriangles } from './memory.ts';
import { peakOfFields } from './peak.ts';
import { planMesh } from './plan-mesh.ts';
import { type CellShape, sharpCorners } from './shape.ts';

/** Of the pressure iteration: where the result is kept, and where only errors are judged by it. */
const TIGHT = 1e-9;
const LOOSE = 1e-6;
/** Coarseness of the mesh that judges, over that of the mesh judged. */
const APART = 1.5;
const MOST_ROUNDS = 4;
const MOST_MODES = 12;
const FINEST = 0.25;

/**
 * Solves a shape of depth 1 on two meshes and with two numbers of depth modes, refines until the asked
 * accuracy is met (or memory, rounds or modes run out: the errors then say what was reached).
 */
export function solveShape(shape: CellShape, accuracy: Accuracy, where: string): ShapeSolution {
  const { faces } = shape;
  const sharp = sharpCorners(shape.loops).length > 0;
  const wantPeak = accuracy.peak !== null && !sharp;
  const slender = 1 / Math.min(...faceWidths(shape));
  let modes = Math.max(wantPeak ? peakModes(accuracy.peak as number) : 1, flowModes(accuracy.flow, slender));
  let coarseness = Math.min(1.4, Math.max(FINEST, (accuracy.flow / 0.005) ** (1 / 3.5)));
  if (wantPeak)
    coarseness = Math.min(coarseness, Math.max(FINEST, ((accuracy.peak as number) / 0.05) ** 0.5));

  const mesh = (size: number): Level => {
    const most = mostTriangles(modes, faces - 1);
    try {
      return levelOf(planMesh(shape, size, where, most), faces);
    } catch (error) {
      if (error instanceof Problem && error.kind === 'too-many')
        throw new Problem(
          'memory',
          `This piece of the plan needs more than ${most} triangles to be solved in three dimensions.`,
          where,
          'Remove details far smaller than the rest, or divide the piece by longer channels.',
        );
      throw error;
    }
  };

  let judge = solveLevel(mesh(coarseness * APART), modes, LOOSE);
  let best: ShapeSolution | null = null;
  for (let round = 0; round < MOST_ROUNDS; round += 1) {
    let level: Level;
    try {
      level = mesh(coarseness);
    } catch (error) {
      if (best && error instanceof Problem && error.kind === 'memory') return best;
      throw error;
    }
    const fine = solveLevel(level, modes, TIGHT);
    const fewer = modes > 1 ? solveLevel(judge.level, modes - 1, LOOSE) : null;
    const flowParts = flowError(fine, judge, fewer, coarseness, slender, faces);
    const fields = fieldsOf(fine);
    const peakParts = wantPeak ? peakError(fields, judge, fewer, coarseness, faces) : null;
    best = {
      faces,
      asked: accuracy,
      portMatrix: fine.matrix,
      flowError: flowParts.mesh + flowParts.modes,
      peakError: peakParts && peakParts.mesh + peakParts.modes,
      sharp,
      checks: fine.checks,
      fields,
    };
    const flowExcess = best.flowError / accuracy.flow;
    const peakExcess = peakParts ? (best.peakError as number) / (accuracy.peak as number) : 0;
    if (flowExcess <= 1 && peakExcess <= 1) return best;
    const moreModes =
      (flowExcess > 1 && flowParts.modes > 0.4 * accuracy.flow) ||
      (peakParts !== null && peakExcess > 1 && peakParts.modes > 0.4 * (accuracy.peak as number));
    const finer =
      (flowExcess > 1 && flowParts.mesh > 0.4 * accuracy.flow) ||
      (peakParts !== null && peakExcess > 1 && peakParts.mesh > 0.4 * (accuracy.peak as number));
    if ((moreModes && modes >= MOST_MODES) || (finer && coarseness <= FINEST)) return best;
    if (moreModes) modes += 1;
    if (finer) coarseness = Math.max(FINEST, coarseness / APART);
    judge = moreModes || !finer ? solveLevel(finer ? level : judge.level, modes, LOOSE) : fine;
  }
  return best as ShapeSolution;
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
  slender: number,
  faces: number,
): { mesh: number; modes: number } {
  const step = relativeDifference(judge.matrix, fine.matrix, faces);
  const mesh = 0.8 * step + 0.001 * coarseness ** 3.5;
  if (!fewer) return { mesh, modes: 0.016 * Math.min(1, slender) ** 1.8 };
  const drop = relativeDifference(fewer.matrix, judge.matrix, faces);
  // The more a mode still changed, and the deeper the narrowest arm, the less the next ones gain.
  return { mesh, modes: drop * Math.min(1, Math.max(0.025, 2.5 * drop, slender / 25)) };
}

/** Bounds of the relative error of the peak wall shear of `fine`, over the face patterns. */
function peakError(
  fine: CellFields,
  judge: LevelSolution,
  fewer: LevelSolution | null,
  coarseness: number,
  faces: number,
): { mesh: number; modes: number } {
  const judged = fieldsOf(judge);
  const less = fewer && fieldsOf(fewer);
  let step = 0;
  let drop = 0;
  for (let face = 0; face < faces; face += 1) {
    const here = peakOfFields(fine, face);
    const there = peakOfFields(judged, face);
    step = Math.max(step, Math.abs(there / here - 1));
    if (less) drop = Math.max(drop, Math.abs(peakOfFields(less, face) / there - 1));
  }
  return { mesh: step + 0.004 * coarseness ** 2, modes: less ? 0.8 * drop : 0.1 };
}
