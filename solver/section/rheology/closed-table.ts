import { shearRate } from '../../fluid/shear.ts';
import { rateMoment } from './closed-forms.ts';
import { type ScaledFluid, stressAt, stressGain } from './scaled.ts';
import { type ShapeNode, type ShapeTable, STEP } from './shape-table.ts';

/**
 * The tables of the two sections that need no solve: a round tube, and parallel plates (the limit of
 * every wide, shallow rectangle). Same numbers as a solved shape, by quadrature or closed form.
 */
export function closedTable(shape: 'tube' | 'plates', fluid: ScaledFluid): ShapeTable {
  const { model } = fluid;
  const power = shape === 'tube' ? 2 : 1;
  const yieldStress = model.kind === 'casson' ? 1 : 0;
  const solved = new Map<number, ShapeNode>();
  return {
    yieldStress,
    node(index) {
      const known = solved.get(index);
      if (known) return known;
      const stress = stressAt(model, index * STEP, yieldStress);
      const moment = rateMoment(model, stress, power);
      const node: ShapeNode = {
        // A Newtonian fluid of viscosity 1 has the moment stress / (power + 2).
        logFluidity: Math.log(((power + 2) * moment) / stress),
        slope: (shearRate(model, stress) / moment - (power + 2)) * stressGain(model, index * STEP),
        peakStress: 1,
        peakVelocity: (2 * rateMoment(model, stress, 0)) / ((power + 2) * moment),
      };
      solved.set(index, node);
      return node;
    },
  };
}
