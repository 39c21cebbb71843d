import Constrainautor from '@kninnug/constrainautor';

/** Steps for one edge beyond which it is never laid: this many, and as many for every point. */
const LEAST = 10_000;
const EACH = 4;

/**
 * Constrains edges as the library does, and throws where rounding has it flip the same diagonals for ever:
 * points nearly on an edge can do that.
 */
export class BoundedConstraints extends Constrainautor {
  #steps = 0;
  readonly #most: number;

  constructor(delaunay: ConstructorParameters<typeof Constrainautor>[0]) {
    super(delaunay);
    this.#most = LEAST + (EACH * delaunay.coords.length) / 2;
  }

  override constrainOne(from: number, to: number): number {
    this.#steps = 0;
    return super.constrainOne(from, to);
  }

  override isCollinear(a: number, b: number, c: number): boolean {
    this.#step();
    return super.isCollinear(a, b, c);
  }

  override flipDiagonal(edge: number): number {
    this.#step();
    return super.flipDiagonal(edge);
  }

  #step(): void {
    this.#steps += 1;
    if (this.#steps > this.#most) throw new Error('The edge cannot be laid.');
  }
}
