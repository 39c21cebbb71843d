import { Problem } from '../problem/problem.ts';
import type { CellShape } from './shape.ts';

/** Beyond these a piece of plan is not solved but refused before anything is built from it. */
const MOST_EDGES = 20_000;
const MOST_FACES = 64;

/** Throws a `Problem` unless the shape has a depth, finite coordinates and all its faces. */
export function checkCell(shape: CellShape, where: string): void {
  const { loops, depth, faces } = shape;
  const redraw = 'Redraw this piece of the plan.';
  if (!(depth > 0 && depth < Number.POSITIVE_INFINITY))
    throw new Problem('shape', `The depth is ${depth}.`, where, 'Give the layer a depth above zero.');
  if (loops.length === 0 || loops[0].length < 3)
    throw new Problem('shape', 'The outline encloses nothing.', where, redraw);
  let edges = 0;
  for (const loop of loops) edges += loop.length;
  if (edges > MOST_EDGES)
    throw new Problem(
      'memory',
      `The outline has ${edges} edges; up to ${MOST_EDGES} can be solved in three dimensions.`,
      where,
      'Simplify the outline, or draw curves as arcs instead of many short lines.',
    );
  if (!Number.isInteger(faces) || faces < 1)
    throw new Problem('shape', 'No channel leads into it.', where, 'Join it to a channel or a port.');
  if (faces > MOST_FACES)
    throw new Problem(
      'too-many',
      `${faces} channels meet in one piece; up to ${MOST_FACES} can be solved together.`,
      where,
      'Draw them further apart.',
    );
  const has = new Uint8Array(faces + 1);
  for (const loop of loops)
    for (const { x, y, bulge, tag } of loop) {
      if (!(Number.isFinite(x) && Number.isFinite(y) && Number.isFinite(bulge)))
        throw new Problem('shape', 'A point of the outline is not a number.', where, redraw);
      if (!(Number.isInteger(tag) && tag >= 0 && tag <= faces))
        throw new Problem('shape', `An edge belongs to face ${tag}, but there are ${faces}.`, where, redraw);
      has[tag] = 1;
    }
  for (let face = 1; face <= faces; face += 1)
    if (!has[face]) throw new Problem('shape', `Face ${face} has no edge on the outline.`, where, redraw);
}
