import type { SectionShape } from './section-shape.ts';
import { solveFlow } from './solve-section.ts';
import { sharedSections } from './solved-unit.ts';

/**
 * Resistance (1/conductance) of a family of shapes of one parameter (unit depth), as piecewise Chebyshev
 * polynomials. Each value is solved to a proven bound of VALUES; a piece is halved until its polynomial
 * is cut off below CUT. Together they keep the table within 1e-5. Pieces are made when first asked for.
 */
const VALUES = 7e-6;
const CUT = 1.5e-6;
const NODES = 10;
const SMALLEST = 1 / 64;

interface Piece {
  readonly from: number;
  readonly to: number;
  /** Chebyshev coefficients, or the two halves. */
  coefficients: Float64Array | null;
  halves: readonly [Piece, Piece] | null;
}

export class ResistanceTable {
  private readonly pieces: Piece[];
  private readonly shapeAt: (parameter: number) => SectionShape;

  /** @param breaks ascending: the range of the parameter and where pieces end. */
  constructor(breaks: readonly number[], shapeAt: (parameter: number) => SectionShape) {
    this.shapeAt = shapeAt;
    this.pieces = breaks.slice(1).map((to, i) => emptyPiece(breaks[i], to));
  }

  /** m⁻⁴ for a shape of depth 1 m; the parameter must lie within the table's range. */
  at(parameter: number, where: string): number {
    let i = 0;
    while (i < this.pieces.length - 1 && parameter > this.pieces[i].to) i += 1;
    let piece = this.pieces[i];
    for (;;) {
      if (!piece.coefficients && !piece.halves) this.make(piece, where);
      if (piece.coefficients) return clenshaw(piece, piece.coefficients, parameter);
      const [low, high]: readonly [Piece, Piece] = piece.halves!;
      piece = parameter <= low.to ? low : high;
    }
  }

  private make(piece: Piece, where: string): void {
    const values = new Float64Array(NODES);
    const middle = (piece.from + piece.to) / 2;
    const half = (piece.to - piece.from) / 2;
    for (let k = 0; k < NODES; k += 1) {
      values[k] = 1 / this.solve(middle + half * Math.cos((Math.PI * (k + 0.5)) / NODES), where);
    }
    const coefficients = chebyshev(values);
    const tail = Math.max(Math.abs(coefficients[NODES - 1]), Math.abs(coefficients[NODES - 2]));
    const least = values.reduce((a, b) => Math.min(a, b));
    if (tail <= CUT * least || half < SMALLEST) piece.coefficients = coefficients;
    else piece.halves = [emptyPiece(piece.from, middle), emptyPiece(middle, piece.to)];
  }

  private solve(parameter: number, where: string): number {
    const shape = this.shapeAt(parameter);
    const known = sharedSections.flow(shape.key, VALUES);
    if (known) return known;
    const { conductance } = solveFlow(shape, VALUES, where).solved;
    sharedSections.setFlow(shape.key, VALUES, conductance);
    return conductance;
  }
}

const emptyPiece = (from: number, to: number): Piece => ({ from, to, coefficients: null, halves: null });

/** Coefficients of the polynomial through values at cos(π(k + ½)/n). */
function chebyshev(values: Float64Array): Float64Array {
  const n = values.length;
  return Float64Array.from(values, (_, j) => {
    let sum = 0;
    for (let k = 0; k < n; k += 1) sum += values[k] * Math.cos((Math.PI * j * (k + 0.5)) / n);
    return ((j === 0 ? 1 : 2) * sum) / n;
  });
}

function clenshaw(piece: Piece, c: Float64Array, parameter: number): number {
  const x = (2 * parameter - piece.from - piece.to) / (piece.to - piece.from);
  let [a, b] = [0, 0];
  for (let j = c.length - 1; j >= 1; j -= 1) {
    const next = 2 * x * a - b + c[j];
    b = a;
    a = next;
  }
  return x * a - b + c[0];
}
