import { type Placement, toCaller } from '../cell/canonical.ts';
import type { CellFields, CellSolution } from '../cell/cell.ts';
import { mixVelocity, pressuresOf } from '../cell/flow-field.ts';
import { type CellPattern, cellPattern } from './cell-pattern.ts';
import { type CellScan, planArea, scanCell } from './cell-scan.ts';
import { huggingTraces, type Trace } from './cell-trace.ts';
import type { Crossing, Hugging } from './crossing.ts';
import { doseOf, type History } from './laws.ts';

/** A solved cell with what flows through it. */
export interface FlowingCell {
  readonly solution: CellSolution;
  /** m³/s into the cell at each face. */
  readonly flow: ArrayLike<number>;
  /** Pa s */
  readonly viscosity: number;
  /** Place of the shape's origin on the chip, m. */
  readonly origin: readonly [number, number];
  /** Width of each face, m. */
  readonly faceWidth: readonly number[];
  readonly peakWallShear: number | null;
  /** How the slowest and fastest hundredths of the flow stand to its mean in the channels around. */
  readonly slow: number;
  readonly fast: number;
}

/**
 * What was worked out for one pattern of flow through one solved shape, when it was asked for. The field itself
 * is not kept: it is large, and quickly mixed again.
 */
class Pattern {
  readonly #fields: CellFields;
  /** On the faces of the solved copy. */
  readonly #pressures: Float64Array;
  readonly #enters: readonly number[];
  #scan: CellScan | null = null;
  /** By radius in depths: of each face by which fluid enters. */
  readonly #traces = new Map<number, ReadonlyMap<number, readonly Trace[]>>();

  constructor(fields: CellFields, pressures: Float64Array, flow: ArrayLike<number>) {
    this.#fields = fields;
    this.#pressures = pressures;
    this.#enters = Array.from(pressures.keys()).filter((face) => flow[face] > 0);
  }

  get scan(): CellScan {
    this.#scan ??= scanCell(mixVelocity(this.#fields, this.#pressures));
    return this.#scan;
  }

  /** Paths along the walls from a face. */
  traces(face: number, radius: number): readonly Trace[] {
    let found = this.#traces.get(radius);
    if (!found) {
      const field = mixVelocity(this.#fields, this.#pressures);
      // Whoever asks for paths asks for strain too.
      this.#scan ??= scanCell(field);
      found = new Map(this.#enters.map((from) => [from, huggingTraces(field, from, radius)]));
      this.#traces.set(radius, found);
    }
    return found.get(face) ?? [];
  }
}

interface Shape {
  /** For depth 1. */
  readonly volume: number;
  readonly patterns: Map<string, Pattern>;
}
const known = new WeakMap<CellFields, Shape>();
/** Patterns kept of one shape. */
const MOST_PATTERNS = 400;

function shapeOf(fields: CellFields): Shape {
  let shape = known.get(fields);
  if (!shape) {
    shape = { volume: planArea(fields.mesh), patterns: new Map() };
    known.set(fields, shape);
  }
  return shape;
}

function patternOf(solution: CellSolution, fields: CellFields, { key, flow }: CellPattern): Pattern {
  const { patterns } = shapeOf(fields);
  let found = patterns.get(key);
  if (!found) {
    if (patterns.size >= MOST_PATTERNS) patterns.clear();
    const [{ face, scale }] = solution.placements;
    const n = solution.faces;
    const matrix = new Float64Array(n * n);
    for (let i = 0; i < n; i += 1) {
      for (let j = 0; j < n; j += 1) {
        matrix[i * n + j] = solution.inner[face[i] * n + face[j]] / scale ** 3;
      }
    }
    found = new Pattern(fields, pressuresOf(matrix, n, flow), flow);
    patterns.set(key, found);
  }
  return found;
}

const doses = new WeakMap<History, Map<number, number>>();

/** Of a history that is kept with its pattern: reckoned once. */
function keptDose(history: History, exponent: number): number {
  let known = doses.get(history);
  if (!known) {
    known = new Map();
    doses.set(history, known);
  }
  let dose = known.get(exponent);
  if (dose === undefined) {
    dose = doseOf(history, exponent);
    known.set(exponent, dose);
  }
  return dose;
}

/**
 * A cell as paths cross it: what its fluid meets on the whole, and the fastest stretching. Null where
 * nothing flows or fields were not kept. Lengths go by the depth d of the solved shape, stresses by
 * µ Q/d³, times by d³/Q.
 */
export class CellPaths {
  readonly #cell: FlowingCell;
  readonly #pattern: Pattern;
  /** For depth 1. */
  readonly #volume: number;
  readonly #placement: Placement;
  /** Pa and s that the solved copy's units stand for. */
  readonly #stress: number;
  readonly #time: number;
  readonly #rounding: number;

  private constructor(
    cell: FlowingCell,
    through: number,
    pattern: Pattern,
    volume: number,
    rounding: number,
  ) {
    const [placement] = cell.solution.placements;
    this.#cell = cell;
    this.#pattern = pattern;
    this.#volume = volume;
    this.#rounding = rounding;
    this.#placement = placement;
    this.#stress = (cell.viscosity * through) / placement.scale ** 3;
    this.#time = placement.scale ** 3 / through;
  }

  static of(cell: FlowingCell): CellPaths | null {
    const { solution, flow } = cell;
    if (!solution.fields) return null;
    const { face } = solution.placements[0];
    const pattern = cellPattern(Float64Array.from(face, (mine) => flow[mine]));
    if (!pattern) return null;
    let through = 0;
    for (let i = 0; i < flow.length; i += 1) through += Math.max(0, flow[i]);
    const { fields } = solution;
    const found = patternOf(solution, fields, pattern);
    return new CellPaths(cell, through, found, shapeOf(fields).volume, pattern.rounding);
  }

  /** Pa s */
  get viscosity(): number {
    return this.#cell.viscosity;
  }

  /** m³ */
  get volume(): number {
    return this.#volume * this.#placement.scale ** 3;
  }

  get stretch(): NonNullable<Crossing['stretch']> {
    const { rate, stress, x, y } = this.#pattern.scan.stretch;
    const [px, py] = toCaller(this.#placement, x, y);
    const { origin } = this.#cell;
    return {
      rate: rate / this.#time,
      stress: stress * this.#stress,
      at: [origin[0] + px, origin[1] + py],
    };
  }

  /** Of what comes in by one face and leaves by another (from 0, as the cell was given). */
  crossing(from: number, to: number): Crossing {
    const time = this.#volume * this.#time;
    const pattern = this.#pattern;
    const stretch = (): NonNullable<Crossing['stretch']> => this.stretch;
    const { slow, fast, peakWallShear } = this.#cell;
    return {
      time,
      fast: time / fast,
      slow: time / slow,
      peakWallShear,
      rounding: this.#rounding,
      get stretch() {
        return stretch();
      },
      dose: (exponent) => keptDose(pattern.scan.spread, exponent) * this.#stress ** exponent * this.#time,
      history: () => this.#scaled(pattern.scan.spread),
      hugging: (diameter) => this.#hugging(from, to, diameter),
    };
  }

  #scaled({ stress, time }: History): History {
    return {
      stress: stress.map((value) => value * this.#stress),
      time: time.map((value) => value * this.#time),
    };
  }

  /** The worst of the paths along the walls that lead there; of all that enter, where none of them does. */
  #hugging(from: number, to: number, diameter: number): Hugging | null {
    const { faceWidth, solution } = this.#cell;
    const radius = diameter / 2 / this.#placement.scale;
    if (Math.min(solution.depth, faceWidth[from], faceWidth[to]) < diameter) return null;
    const { face } = this.#placement;
    const all = this.#pattern.traces(face.indexOf(from), radius);
    const there = all.filter((trace) => trace.to === face.indexOf(to));
    const paths = there.length > 0 ? there : all;
    if (paths.length === 0) return null;
    const worst = (value: (trace: Trace) => number): number => Math.max(...paths.map(value));
    const hardest = (): Trace =>
      paths.reduce((a, b) => (keptDose(b.history, 3) > keptDose(a.history, 3) ? b : a));
    return {
      time: worst(({ time }) => time) * this.#time,
      peak: worst(({ peak }) => peak) * this.#stress,
      dose: (exponent) =>
        worst(({ history }) => keptDose(history, exponent)) * this.#stress ** exponent * this.#time,
      history: () => this.#scaled(hardest().history),
    };
  }
}
