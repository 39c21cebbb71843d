import { inertiaShare } from '../cell/inertia.ts';

import type { Chip } from '../chip/chip.ts';
import type { CellResult, PieceResult } from '../chip/result.ts';
import type { PlacedCell } from '../lump/layout.ts';
import type { Lumped } from '../lump/lump.ts';
import { NANOMETRES } from '../lump/stretches.ts';
import type { NetworkSolution } from '../network/spec.ts';
import type { Finding } from '../problem/finding.ts';
import { patternPeak } from './cell-peaks.ts';

/** Every cell with what flows in it; one that is not solved has no matrix and no peak. */
export function cellResults(
  chip: Chip,
  lumped: Lumped,
  flow: NetworkSolution,
): { readonly cells: readonly CellResult[]; readonly findings: readonly Finding[] } {
  const names = faceNames(chip, lumped);
  const findings: Finding[] = [];
  const cells = lumped.cells.map((cell, index) => {
    const result = cellResult(cell, lumped, index, flow, names);
    if (cell.solution?.sharp || cell.solution?.leansSharp) findings.push(sharpFinding(chip, cell));
    return result;
  });
  return { cells, findings: [...merged(findings), ...thinningNote(lumped)] };
}

function cellResult(
  { spec, solution }: PlacedCell,
  lumped: Lumped,
  index: number,
  flow: NetworkSolution,
  names: ReadonlyMap<number, string>,
): CellResult {
  const n = spec.faces.length;
  const base = {
    id: spec.name,
    kind: spec.kind,
    at: [spec.origin[0] / NANOMETRES, spec.origin[1] / NANOMETRES] as const,
    faces: spec.faces.map((face) => names.get(face.node) ?? spec.name),
  };
  if (!solution) return { ...base, portMatrix: [], peakWallShear: null, peakAt: null, accuracy: 1 };
  const { matrix } = lumped.spec.blocks[lumped.cellBlock[index]];
  const pressures = spec.faces.map((face) => flow.pressure[face.node] || 0);
  const peak = patternPeak(solution, pressures);
  return {
    ...base,
    portMatrix: rowsOf(matrix, n),
    peakWallShear: peak ? peak.value : null,
    peakAt: peak ? [base.at[0] + peak.at[0], base.at[1] + peak.at[1]] : null,
    accuracy: solution.flowError,
    pressures,
    ...(peak ? { peakError: peak.error } : {}),
  };
}

const rows = new WeakMap<Float64Array, readonly (readonly number[])[]>();

/** A port matrix as a result has it, made once. */
function rowsOf(matrix: Float64Array, n: number): readonly (readonly number[])[] {
  let known = rows.get(matrix);
  if (!known) {
    known = Array.from({ length: n }, (_, i) => Array.from(matrix.subarray(i * n, (i + 1) * n)));
    rows.set(matrix, known);
  }
  return known;
}

/** What goes on from each node: a piece ("feed#1"), else the port whose hole or end it is. */
function faceNames(chip: Chip, lumped: Lumped): Map<number, string> {
  const names = new Map<number, string>();
  chip.ports.forEach((port, index) => {
    names.set(lumped.portNode[index], `port:${port.id}`);
  });
  lumped.stretches.forEach((stretch, index) => {
    for (const node of [stretch.from, stretch.to]) {
      if (!names.has(node)) names.set(node, lumped.names[index]);
    }
  });
  return names;
}

function sharpFinding(chip: Chip, { spec, solution }: PlacedCell): Finding {
  const layer = chip.layers[spec.layerIndex];
  if (!solution!.sharp)
    return {
      kind: 'sharp-corner',
      severity: 'note',
      where: spec.name,
      says: `${spec.name} has a sharp inner corner, where wall shear has no bound: the walls of layer ${layer.id} lean outward by more than its fillets' radius, so no peak is given there.`,
      do: `Give layer ${layer.id} a fillet radius above what its walls lean outward (of an etch, its depth).`,
      at: [spec.origin[0] / NANOMETRES, spec.origin[1] / NANOMETRES],
    };
  return {
    kind: 'sharp-corner',
    severity: 'note',
    where: spec.name,
    says: `${spec.name} has a sharp inner corner, where wall shear has no bound: layer ${layer.id} has no fillet radius, so no peak is given there.`,
    do: `Give layer ${layer.id} the fillet radius that mask and resist leave.`,
    at: [spec.origin[0] / NANOMETRES, spec.origin[1] / NANOMETRES],
  };
}

/** One finding for all sharp cells of the chip: the remedy is one, on the layer. */
function merged(findings: readonly Finding[]): Finding[] {
  if (findings.length < 2) return [...findings];
  const [first] = findings;
  return [{ ...first, says: `${first.says} The same holds for ${findings.length - 1} more.` }];
}

/** Below this Reynolds number of the channels around a cell, what inertia shifts is not worth reckoning. */
const CREEPING = 0.05;

/** The share by which inertia, which creeping flow leaves out, shifts the flow through each cell. */
export function inertiaShares(
  lumped: Lumped,
  flow: NetworkSolution,
  pieces: readonly PieceResult[],
  density: number,
): Float64Array {
  const fastest = new Map<number, number>();
  lumped.stretches.forEach((stretch, index) => {
    const reynolds = pieces[index].reynolds ?? 0;
    for (const node of [stretch.from, stretch.to]) {
      fastest.set(node, Math.max(fastest.get(node) ?? 0, reynolds));
    }
  });
  return Float64Array.from(lumped.cells, ({ spec, solution }) => {
    const reynolds = Math.max(0, ...spec.faces.map((face) => fastest.get(face.node) ?? 0));
    if (!solution || reynolds < CREEPING) return 0;
    const pressures = spec.faces.map((face) => flow.pressure[face.node] || 0);
    return inertiaShare(solution, pressures, spec.shape.depth, density, lumped.viscosity) ?? 0;
  });
}

/** Inertia where it shifts the flow through a solved cell by more than the cell's own accuracy. */
export function inertiaFindings({ cells }: Lumped, shares: Float64Array): Finding[] {
  let worst: { share: number; cell: PlacedCell } | null = null;
  let count = 0;
  for (const [index, cell] of cells.entries()) {
    const share = shares[index];
    if (!cell.solution || share <= cell.solution.flowError) continue;
    count += 1;
    if (!worst || share > worst.share) worst = { share, cell };
  }
  if (!worst) return [];
  const { spec } = worst.cell;
  return [
    {
      kind: 'inertia',
      severity: worst.share > 0.05 ? 'warn' : 'note',
      where: spec.name,
      says: `Inertia, which creeping flow leaves out, shifts the flow through ${spec.name} by about ${(100 * worst.share).toPrecision(2)} %, more than its ${(100 * worst.cell.solution!.flowError).toPrecision(2)} % accuracy${count > 1 ? `; ${count} junctions in all` : ''}.`,
      do: 'Take that as the error of the split there, or slow the flow.',
      at: [spec.origin[0] / NANOMETRES, spec.origin[1] / NANOMETRES],
    },
  ];
}

function thinningNote(lumped: Lumped): Finding[] {
  const first = lumped.cells.find(({ solution }) => solution !== null);
  if (!lumped.thins || !first) return [];
  return [
    {
      kind: 'thinning-junction',
      severity: 'note',
      where: first.spec.name,
      says: 'The fluid thins with shear, but each junction is solved with one viscosity, that of the channels around it.',
      do: 'Take the wall shear at corners as a guide only: the true fluid is thinner there.',
    },
  ];
}
