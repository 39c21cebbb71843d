import type { CellEvidence, StretchEvidence } from '../checks/evidence.ts';
import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { PieceResult } from '../chip/result.ts';
import type { Lumped } from '../lump/lump.ts';
import { depthMismatch, NANOMETRES } from '../lump/stretches.ts';
import type { NetworkSolution } from '../network/spec.ts';

/** The stretches as the checks see them, with the sections and pressures that results leave out. */
export function stretchEvidence(
  lumped: Lumped,
  flow: NetworkSolution,
  pieces: readonly PieceResult[],
): StretchEvidence[] {
  return lumped.stretches.map(({ piece, from, to, width }, index) => {
    const { narrow } = lumped.ducts[index];
    return {
      name: lumped.names[index],
      piece,
      result: pieces[index],
      pressure: [flow.pressure[from] || 0, flow.pressure[to] || 0],
      width,
      hydraulicDiameter: narrow.hydraulicDiameter,
      area: narrow.area,
    };
  });
}

/** The solved cells as the checks see them. */
export function cellEvidence(chip: Chip, graph: Graph, { cells }: Lumped): CellEvidence[] {
  return cells.flatMap(({ spec, solution }): CellEvidence[] => {
    if (!solution) return [];
    const { name: id, origin } = spec;
    const { flowError, profileError, profilePeakError } = solution;
    return [
      {
        id,
        at: [origin[0] / NANOMETRES, origin[1] / NANOMETRES],
        // What the turn into a hole adds is no matter of how exactly the shape was solved.
        accuracy: spec.faces.some(({ kind }) => kind === 'rim') ? 0 : flowError - profileError,
        upright: profileError,
        uprightPeak: profilePeakError,
        depths: depthMismatch(chip, graph, spec),
      },
    ];
  });
}
