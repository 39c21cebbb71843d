import { apparentViscosity, viscositySlope } from '../../fluid/shear.ts';
import type { ShearModel } from '../../fluid/spec.ts';
import { Problem } from '../../problem/problem.ts';
import { emptyFactor, type Factor, factorise } from '../../sparse/factorise.ts';
import { SingularMatrix } from '../../sparse/singular.ts';
import { solve } from '../../sparse/solve.ts';
import { withFixed } from '../stiffness.ts';
import type { SectionElements } from './elements.ts';

/**
 * Fully developed flow of a shear-thinning fluid through one section: the velocity that minimises
 *
 *   integral of W(|grad u|) - G u,   W the shear energy,   u = 0 on the wall,
 *
 * by Newton's method with the consistent tangent and a line search on the slope of that convex energy
 * (its values would cancel near the solution).
 */
export interface SectionFlow {
  /** Velocity at every node; nodeCount */
  readonly velocity: Float64Array;
  /** Integral of the velocity, and its derivative by the gradient. */
  readonly flow: number;
  readonly slope: number;
  readonly iterations: number;
}

/** Scratch of repeated solves on one section, so that none allocates. */
export interface NewtonWorkspace {
  readonly factor: Factor;
  /** 21 per triangle */
  readonly element: Float64Array;
  /** nodeCount each */
  readonly residual: Float64Array;
  readonly step: Float64Array;
  readonly trial: Float64Array;
}

export function newtonWorkspace(elements: SectionElements): NewtonWorkspace {
  const { nodeCount } = elements.mesh;
  return {
    factor: emptyFactor(elements.system.symbolic),
    element: new Float64Array(elements.system.element.length),
    residual: new Float64Array(nodeCount),
    step: new Float64Array(nodeCount),
    trial: new Float64Array(nodeCount),
  };
}

const MOST = 80;
/** Newton's decrement over the power of the flow; its square root is the relative error in the energy norm. */
const CONVERGED = 1e-20;

/**
 * @param gradient G = -dp/dx, positive
 * @param smallest shear rate below which the fluid is taken as viscous (see `apparentViscosity`)
 * @param velocity start, nodeCount; overwritten with the solution
 * @throws Problem 'not-converged'
 */
export function solveSection(
  elements: SectionElements,
  model: ShearModel,
  gradient: number,
  smallest: number,
  velocity: Float64Array,
  work: NewtonWorkspace = newtonWorkspace(elements),
): SectionFlow {
  const { load, system, wall } = elements;
  const { factor, element, residual, step, trial } = work;
  for (let iteration = 1; iteration <= MOST; iteration += 1) {
    linearise(elements, model, gradient, smallest, velocity, element, residual);
    try {
      factorise(system.symbolic, withFixed(system.pattern, element, wall), factor);
    } catch (error) {
      // The tangent of a convex energy is positive definite: only overflow or a NaN can spoil it.
      if (error instanceof SingularMatrix) throw notFound(gradient);
      throw error;
    }
    step.set(residual);
    solve(factor, step);
    const decrement = dot(step, residual);
    const done = decrement <= CONVERGED * Math.abs(gradient * dot(load, velocity));
    // Along the step the energy falls at first as the decrement; go no further than where it hardly rises.
    for (let share = 1, tries = 1; ; tries += 1) {
      for (let i = 0; i < trial.length; i += 1) trial[i] = velocity[i] + share * step[i];
      if (done) break;
      const rise = -fallAlong(elements, model, gradient, smallest, trial, step);
      if (rise <= 0.1 * decrement) break;
      if (tries === 40) throw notFound(gradient);
      share *= Math.max(0.1, decrement / (decrement + rise));
    }
    velocity.set(trial);
    if (!done) continue;
    // The derivative of the flow by the gradient is the load through the tangent.
    for (let i = 0; i < step.length; i += 1) step[i] = wall[i] ? 0 : load[i];
    solve(factor, step);
    return { velocity, flow: dot(load, velocity), slope: dot(load, step), iterations: iteration };
  }
  throw notFound(gradient);
}

function notFound(gradient: number): Problem {
  return new Problem(
    'not-converged',
    `The flow of the shear-thinning fluid through a section was not found (scaled gradient ${gradient.toPrecision(3)}).`,
    'fluid.shear',
    'Check the constants of the fluid; an index nearer to 1 or a smaller yield stress is easier.',
  );
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i] * b[i];
  return sum;
}

/** How fast the energy falls at `velocity` along `step`: the residual times the step. */
function fallAlong(
  elements: SectionElements,
  model: ShearModel,
  gradient: number,
  smallest: number,
  velocity: Float64Array,
  step: Float64Array,
): number {
  const { table, mesh, load } = elements;
  const { triangles } = mesh;
  const { weight, gx, gy } = table;
  const { count } = table.rule;
  let sum = gradient * dot(load, step);
  for (let t = 0, p = 0; t < triangles.length; t += 6) {
    for (let q = 0; q < count; q += 1, p += 1) {
      let ux = 0;
      let uy = 0;
      let sx = 0;
      let sy = 0;
      for (let k = 0; k < 6; k += 1) {
        const node = triangles[t + k];
        ux += velocity[node] * gx[6 * p + k];
        uy += velocity[node] * gy[6 * p + k];
        sx += step[node] * gx[6 * p + k];
        sy += step[node] * gy[6 * p + k];
      }
      const rate = Math.sqrt(ux * ux + uy * uy);
      sum -= weight[p] * apparentViscosity(model, rate, smallest) * (ux * sx + uy * sy);
    }
  }
  return sum;
}

const along = new Float64Array(6);

/**
 * The tangent of every triangle (lower triangle by rows) into `element`, and G load - stress into
 * `residual`, zero on the wall.
 */
function linearise(
  elements: SectionElements,
  model: ShearModel,
  gradient: number,
  smallest: number,
  velocity: Float64Array,
  element: Float64Array,
  residual: Float64Array,
): void {
  const { table, mesh, load, wall } = elements;
  const { triangles } = mesh;
  const { weight, gx, gy } = table;
  const { count } = table.rule;
  element.fill(0);
  for (let i = 0; i < residual.length; i += 1) residual[i] = gradient * load[i];
  for (let t = 0, p = 0, entry = 0; t < triangles.length; t += 6, entry += 21) {
    for (let q = 0; q < count; q += 1, p += 1) {
      const at = 6 * p;
      let ux = 0;
      let uy = 0;
      for (let k = 0; k < 6; k += 1) {
        const u = velocity[triangles[t + k]];
        ux += u * gx[at + k];
        uy += u * gy[at + k];
      }
      const rate = Math.sqrt(ux * ux + uy * uy);
      const viscous = weight[p] * apparentViscosity(model, rate, smallest);
      const thinning = rate === 0 ? 0 : (weight[p] * viscositySlope(model, rate, smallest)) / rate;
      for (let k = 0; k < 6; k += 1) along[k] = gx[at + k] * ux + gy[at + k] * uy;
      for (let i = 0, m = entry; i < 6; i += 1) {
        residual[triangles[t + i]] -= viscous * along[i];
        const x = viscous * gx[at + i];
        const y = viscous * gy[at + i];
        const bent = thinning * along[i];
        for (let j = 0; j <= i; j += 1, m += 1) {
          element[m] += x * gx[at + j] + y * gy[at + j] + bent * along[j];
        }
      }
    }
  }
  for (let i = 0; i < residual.length; i += 1) if (wall[i]) residual[i] = 0;
}
