import { canonical } from './canonical.ts';
import { type Accuracy, type CellSolution, DEFAULT_ACCURACY, type ShapeSolution } from './cell.ts';
import { checkCell } from './check-cell.ts';
import { equivalent } from './equivalent.ts';
import { holeResistances, inSeries, seriesError } from './rim.ts';
import type { CellShape } from './shape.ts';
import { shapeSteps } from './solve-shape.ts';
import { finished, type Steps } from './steps.ts';
import { type CellStore, serves } from './store.ts';

/** Part of every key: raise it whenever results change, so that what older versions kept is not used. */
export const CELL_VERSION = 2;

/**
 * Solves Stokes flow in a piece of the plan in three dimensions, or takes the solution of a copy of it
 * from `store`. Throws `Problem` ('shape', 'memory', 'profile', 'too-many') naming `where`.
 */
export function solveCell(
  shape: CellShape,
  accuracy: Accuracy = DEFAULT_ACCURACY,
  store?: CellStore,
  where = '',
): CellSolution {
  return finished(cellSteps(shape, accuracy, store, where));
}

/** As `solveCell`, step by step: what is left before the last step has put nothing into the store. */
export function* cellSteps(
  shape: CellShape,
  accuracy: Accuracy,
  store: CellStore | undefined,
  where: string,
): Steps<CellSolution> {
  checkCell(shape, where);
  const { shape: extruded, error: profileError, peak } = equivalent(shape, where);
  const copy = canonical(extruded);
  const key = `${CELL_VERSION} ${copy.key}`;
  let solved: ShapeSolution | undefined = store?.get(key);
  if (!solved || !serves(solved, accuracy)) {
    solved = yield* shapeSteps(copy.shape, accuracy, where);
    store?.put(key, solved);
  }
  const { placements } = copy;
  const { faces } = shape;
  // A symmetric shape's result is the mean over its symmetries, so that copies agree whichever is met first.
  const inner = new Float64Array(faces * faces);
  for (const { face, scale } of placements) {
    const factor = scale ** 3 / placements.length;
    for (let i = 0; i < faces; i += 1)
      for (let j = 0; j < faces; j += 1)
        inner[face[i] * faces + face[j]] += factor * solved.portMatrix[i * faces + j];
  }
  const holes = holeResistances(shape);
  const portMatrix = holes.some((r) => r > 0) ? inSeries(inner, holes) : inner;
  return {
    faces,
    key,
    portMatrix,
    inner,
    holes,
    flowError: solved.flowError + profileError + seriesError(portMatrix, holes),
    peakError: typeof peak === 'string' || solved.peakError === null ? null : solved.peakError + peak.error,
    peakScale: typeof peak === 'string' ? 1 : peak.scale,
    leansSharp: peak === 'leans sharp',
    profileError,
    profilePeakError: typeof peak === 'string' ? null : peak.error,
    depth: extruded.depth,
    sharp: solved.sharp,
    checks: solved.checks,
    fields: solved.fields,
    placements,
  };
}

/** The key under which a shape's solution is kept. */
export function cellKey(shape: CellShape, where = ''): string {
  checkCell(shape, where);
  return `${CELL_VERSION} ${canonical(equivalent(shape, where).shape).key}`;
}
