import { Problem } from '../../problem/problem.ts';
import type { SectionElements } from './elements.ts';
import { type NewtonWorkspace, newtonWorkspace, solveSection } from './newton.ts';
import { coordinate, type ScaledFluid, smallestRate, stressAt, stressGain } from './scaled.ts';
import { peakWallStress } from './wall-stress.ts';
import { yieldStressOf } from './yield-stress.ts';

/**
 * One shape of section for one scaled fluid, solved at even steps of the fluid's coordinate, each step
 * when it is first asked for. What is kept is how the flow differs from the Newtonian one of the same
 * shape on the same mesh, which the mesh's own error hardly touches.
 */
export interface ShapeTable {
  /** Mean wall stress (scaled) at which flow starts; 0 without a yield stress. */
  readonly yieldStress: number;
  node(index: number): ShapeNode;
}

export interface ShapeNode {
  /** Logarithm of flow over the Newtonian flow of viscosity 1 (scaled) under the same gradient. */
  readonly logFluidity: number;
  /** Its derivative by the coordinate. */
  readonly slope: number;
  /** Peak over mean wall stress, and peak over mean velocity, each over the same of a Newtonian fluid. */
  readonly peakStress: number;
  readonly peakVelocity: number;
}

/** Steps per decade of the coordinate; cubic interpolation with exact slopes is within 1.5e-4 then. */
const PER_DECADE = 4;
export const STEP = Math.LN10 / PER_DECADE;

/** Steps between which a table is solved; beyond, the limits of the fluid are known (see `fluidity`). */
export function tableEnds(fluid: ScaledFluid): readonly [number, number] {
  switch (fluid.model.kind) {
    case 'power-law':
      return [0, 0];
    case 'carreau':
      return [-3 * PER_DECADE, 8 * PER_DECADE];
    case 'casson':
      return [-PER_DECADE, 4 * PER_DECADE];
  }
}

/** @param copies how many mirror images of the mesh make the whole section */
export function shapeTable(elements: SectionElements, fluid: ScaledFluid, copies: number): ShapeTable {
  const { area, perimeter, mesh } = elements;
  const { model } = fluid;
  const yieldStress = model.kind === 'casson' ? yieldStressOf(elements, copies) : 0;
  const work = newtonWorkspace(elements);

  const newtonian = { kind: 'power-law', consistency: 1, index: 1 } as const;
  const unit = new Float64Array(mesh.nodeCount);
  const conductance = solveSection(elements, newtonian, perimeter / area, 0, unit, work).flow;
  // At unit mean wall stress.
  const stress0 = peakWallStress(elements, newtonian, perimeter / area, 0, unit);
  const velocity0 = greatest(unit) / conductance;

  const solved = new Map<number, ShapeNode & { readonly velocity: Float64Array }>();

  /** @param from index of a solved step to start from, or null for the Newtonian flow */
  function solveAt(index: number, from: number | null): void {
    const at = index * STEP;
    const stress = stressAt(model, at, yieldStress);
    const gradient = (stress * perimeter) / area;
    const near = from === null ? undefined : solved.get(from);
    const velocity = Float64Array.from(near?.velocity ?? unit);
    // What the flow should be by the slope of the step we come from.
    const gain =
      near && from !== null
        ? (stress / stressAt(model, from * STEP, yieldStress)) * Math.exp(near.slope * (at - from * STEP))
        : stress;
    for (let i = 0; i < velocity.length; i += 1) velocity[i] *= gain;
    const smallest = smallestRate(model, stress, yieldStress);
    const flow = solveGradually(elements, fluid, gradient, smallest, velocity, work);
    solved.set(index, {
      velocity,
      logFluidity: Math.log(flow.flow / (conductance * stress)),
      slope: ((flow.slope * gradient) / flow.flow - 1) * stressGain(model, at),
      peakStress: peakWallStress(elements, model, gradient, smallest, velocity) / stress / stress0,
      peakVelocity: greatest(velocity) / flow.flow / velocity0,
    });
  }

  /**
   * The step that a step is solved from, always the same one, so that no number depends on what was
   * asked for before: inwards to the Newtonian end (yield stress) or to the middle.
   */
  const first = model.kind === 'casson' ? tableEnds(fluid)[1] : 0;
  const before = (index: number): number | null =>
    index === first ? null : index + Math.sign(first - index);

  return {
    yieldStress,
    node(index) {
      const missing: number[] = [];
      for (let k: number | null = index; k !== null && !solved.has(k); k = before(k)) missing.push(k);
      for (const k of missing.reverse()) solveAt(k, before(k));
      const node = solved.get(index);
      if (!node) throw new RangeError(`step ${index}`);
      return node;
    },
  };
}

function greatest(values: Float64Array): number {
  return values.reduce((a, b) => Math.max(a, b));
}

/** Where Newton does not get there at once, the plug is made stiffer in three steps. */
function solveGradually(
  elements: SectionElements,
  fluid: ScaledFluid,
  gradient: number,
  smallest: number,
  velocity: Float64Array,
  work: NewtonWorkspace,
): ReturnType<typeof solveSection> {
  const start = velocity.slice();
  try {
    return solveSection(elements, fluid.model, gradient, smallest, velocity, work);
  } catch (error) {
    if (!(error instanceof Problem) || smallest === 0) throw error;
    velocity.set(start);
    for (const softer of [1000, 100, 10]) {
      solveSection(elements, fluid.model, gradient, softer * smallest, velocity, work);
    }
    return solveSection(elements, fluid.model, gradient, smallest, velocity, work);
  }
}

/** Coordinate of a mean wall stress (scaled) in steps of the table. */
export function stepOf(fluid: ScaledFluid, stress: number, yieldStress: number): number {
  return coordinate(fluid.model, stress, yieldStress) / STEP;
}
