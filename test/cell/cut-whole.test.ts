import { LARGEST, MERGE } from '../../solver/cell/cut/bounds.ts';
import { cutCells } from '../../solver/cell/cut/cut.ts';
import type { CutOptions } from '../../solver/cell/cut/spec.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { ductOf } from '../../solver/lump/duct.ts';
import { chamber, channel, chipOf, layer, port } from '../chip/drawings.ts';
import { verify } from '../verify/row.ts';

/** Port matrix of a chip (viscosity 1, m^3): cells and ducts assembled densely, all but ports eliminated. */
function portMatrix(
  chip: Chip,
  options: Partial<CutOptions>,
  accuracy: number,
): { matrix: number[][]; cells: number } {
  const graph = readGraph(chip);
  const cut = cutCells(chip, graph, options);
  if (cut.findings.length > 0) throw new Error(cut.findings[0]!.says);
  const n = cut.nodeCount;
  const y = Array.from({ length: n }, () => new Array<number>(n).fill(0));
  const stamp = (i: number, j: number, value: number) => {
    y[i]![j]! += value;
  };
  for (const d of cut.ducts) {
    const piece = graph.pieces[d.piece]!;
    const { profile, depth } = chip.layers[piece.layerIndex]!;
    const duct = ductOf(profile, [d.width[0] * 1e-9, d.width[1] * 1e-9], depth * 1e-9, '');
    const g = 1 / (duct.resistance * d.length * 1e-9);
    stamp(d.from, d.from, g);
    stamp(d.to, d.to, g);
    stamp(d.from, d.to, -g);
    stamp(d.to, d.from, -g);
  }
  for (const c of cut.cells) {
    const { portMatrix: m, faces } = solveCell(c.shape, { flow: accuracy, peak: null });
    for (let i = 0; i < faces; i++) {
      for (let j = 0; j < faces; j++) stamp(c.faces[i]!.node, c.faces[j]!.node, m[i * faces + j]!);
    }
  }
  const kept = [...cut.portNode];
  for (let k = 0; k < n; k++) {
    if (kept.includes(k) || y[k]![k] === 0) continue;
    const pivot = y[k]![k]!;
    for (let i = 0; i < n; i++) {
      if (i === k || y[i]![k] === 0) continue;
      const f = y[i]![k]! / pivot;
      for (let j = 0; j < n; j++) y[i]![j]! -= f * y[k]![j]!;
    }
    for (let i = 0; i < n; i++) {
      y[i]![k] = 0;
      y[k]![i] = 0;
    }
  }
  return { matrix: kept.map((i) => kept.map((j) => y[i]![j]!)), cells: cut.cells.length };
}

/** Largest difference over the largest entry. */
function difference(a: readonly number[][], b: readonly number[][]): number {
  const size = Math.max(...a.flat().map(Math.abs));
  return Math.max(...a.flatMap((row, i) => row.map((v, j) => Math.abs(v - b[i]![j]!)))) / size;
}

const on = (depth: number) => ({ layers: [layer('flow', depth, 5)] });
const chips: Record<string, Chip> = {
  'two T junctions at two widths': chipOf({
    ...on(50),
    channels: [
      channel('m', [
        [-500, 0],
        [800, 0],
      ]),
      channel('a', [
        [0, 0],
        [0, 500],
      ]),
      channel('b', [
        [300, 0],
        [300, -500],
      ]),
    ],
    ports: [port('i', [-500, 0]), port('o', [800, 0]), port('p', [0, 500]), port('q', [300, -500])],
  }),
  'a serpentine of four bends, deep': chipOf({
    ...on(120),
    channels: [
      channel('s', [
        [-400, 0],
        [400, 0],
        [400, 300],
        [0, 300],
        [0, 600],
        [800, 600],
      ]),
    ],
    ports: [port('i', [-400, 0]), port('o', [800, 600])],
  }),
  'a splitter with a slanted branch and a step, shallow': chipOf({
    ...on(20),
    channels: [
      channel(
        'f',
        [
          [-600, 0],
          [0, 0],
        ],
        140,
      ),
      channel('u', [
        [0, 0],
        [400, 300],
        [900, 300],
      ]),
      channel(
        'd',
        [
          [0, 0],
          [250, -250],
        ],
        60,
      ),
      channel(
        'e',
        [
          [250, -250],
          [700, -250],
        ],
        90,
      ),
    ],
    ports: [port('i', [-600, 0]), port('o', [900, 300]), port('p', [700, -250])],
  }),
  'a chamber between two channels with a T before it': chipOf({
    ...on(50),
    channels: [
      channel('m', [
        [-800, 0],
        [500, 0],
      ]),
      channel('t', [
        [-350, 0],
        [-350, 500],
      ]),
      channel('x', [
        [300, 0],
        [300, -800],
      ]),
    ],
    chambers: [
      chamber('w', [
        [0, -200],
        [600, -200],
        [600, 200],
        [0, 200],
      ]),
    ],
    ports: [port('i', [-800, 0]), port('o', [-350, 500]), port('p', [300, -800])],
  }),
  'a loop of two unlike arms': chipOf({
    ...on(80),
    channels: [
      channel('i', [
        [-500, 0],
        [0, 0],
      ]),
      channel(
        'u',
        [
          [0, 0],
          [0, 350],
          [700, 350],
          [700, 0],
        ],
        80,
      ),
      channel(
        'd',
        [
          [0, 0],
          [700, 0],
        ],
        100,
      ),
      channel('o', [
        [700, 0],
        [1200, 0],
      ]),
    ],
    ports: [port('i', [-500, 0]), port('o', [1200, 0])],
  }),
};

for (const [name, chip] of Object.entries(chips)) {
  verify(
    {
      quantity: 'port matrix of a chip cut into cells and ducts, against the same chip as one cell',
      check: 'invariant',
      at: name,
      source: 'the same solver without cuts',
      tolerance: 5e-4,
    },
    () => {
      const cut = portMatrix(chip, { largest: LARGEST, mergeWithin: MERGE }, 1e-3);
      const whole = portMatrix(chip, { largest: 1e9, mergeWithin: 1e9 }, 1e-3);
      if (whole.cells !== 1 || cut.cells < 2) throw new Error(`${cut.cells} cells against ${whole.cells}`);
      return difference(whole.matrix, cut.matrix);
    },
  );
}
