import type { FluidSpec, ShearModel } from '../fluid/spec.ts';
import type { Limit, Target } from './chip.ts';
import { at, Fault, quoted } from './schema-fault.ts';
import { between, notNegative, positive } from './schema-range.ts';

/** Rules that hold of the fluid, of one target and of one limit by themselves. */

function checkShear(shear: ShearModel): void {
  switch (shear.kind) {
    case 'power-law':
      positive(shear.consistency, 'consistency', 'number');
      between(shear.index, 'index', 0, 2, true);
      break;
    case 'carreau':
      positive(shear.zeroShear, 'zeroShear', 'viscosity');
      positive(shear.infiniteShear, 'infiniteShear', 'viscosity');
      positive(shear.time, 'time', 'time');
      between(shear.index, 'index', 0, 2, true);
      break;
    case 'casson':
      notNegative(shear.yieldStress, 'yieldStress', 'stress');
      positive(shear.viscosity, 'viscosity', 'viscosity');
  }
}

export function checkFluid(fluid: FluidSpec): void {
  if ('temperature' in fluid) positive(fluid.temperature, 'temperature', 'temperature');
  if ('name' in fluid) {
    if (fluid.name !== 'glycerol-water') return;
    const { massFraction, volumeFraction } = fluid;
    if ((massFraction === undefined) === (volumeFraction === undefined)) {
      throw new Fault(
        'fluid',
        massFraction === undefined
          ? 'says nothing of the share of glycerol.'
          : 'gives the share of glycerol by mass and by volume.',
        'Give either "massFraction" or "volumeFraction", such as "30 %".',
      );
    }
    if (massFraction !== undefined) between(massFraction, 'massFraction', 0, 1);
    if (volumeFraction !== undefined) between(volumeFraction, 'volumeFraction', 0, 1);
  } else if ('table' in fluid) {
    fluid.table.forEach((row, i) => {
      at(['table', i], () => {
        positive(row.temperature, 'temperature', 'temperature');
        positive(row.viscosity, 'viscosity', 'viscosity');
        positive(row.density, 'density', 'density');
        if (i > 0 && !(row.temperature > fluid.table[i - 1]!.temperature)) {
          throw new Fault('fluid', 'does not rise from row to row.', 'Order the rows by temperature.', [
            'temperature',
          ]);
        }
      });
    });
  } else {
    positive(fluid.density, 'density', 'density');
    if ('viscosity' in fluid) positive(fluid.viscosity, 'viscosity', 'viscosity');
    else at(['shear'], () => checkShear(fluid.shear));
  }
}

export function checkTarget(target: Target): void {
  if ('share' in target) between(target.share, 'share', 0, 1, true);
  else if (target.flow === 0) {
    throw new Fault('range', 'is zero, of which no share can be missed.', 'Give the flow that is wanted.', [
      'flow',
    ]);
  }
  between(target.within, 'within', 0, 1, true);
}

export function checkLimit(limit: Limit): void {
  if (limit.cellDiameter !== undefined) positive(limit.cellDiameter, 'cellDiameter', 'length');
  if (typeof limit.where === 'object' && limit.where[0] === limit.where[1]) {
    throw new Fault(
      'reference',
      `is a route from ${quoted(limit.where[0])} to itself.`,
      'Name two different ports.',
      ['where'],
    );
  }
  if ('shear' in limit) positive(limit.shear, 'shear', 'stress');
  else if ('floor' in limit) checkFloor(limit.floor, limit.area);
  else if ('curve' in limit) checkCurve(limit.curve);
  else {
    at(['law'], () => {
      positive(limit.law.constant, 'constant', 'number');
      positive(limit.law.stress, 'stress', 'number');
      positive(limit.law.time, 'time', 'number');
    });
    between(limit.damage, 'damage', 0, 1, true);
    if (!(Number.isInteger(limit.passes) && limit.passes >= 1)) {
      throw new Fault('range', 'must be a whole number of passes.', 'Give 1 or more.', ['passes']);
    }
  }
}

function checkFloor([low, high]: readonly [number, number], area: number): void {
  if (!(low >= 0 && high > low)) {
    const remedy = 'Write it as ["0.5 Pa", "1.5 Pa"].';
    throw new Fault('range', 'must rise from a least to a largest stress.', remedy, ['floor']);
  }
  between(area, 'area', 0, 1, true);
}

function checkCurve(curve: readonly (readonly [number, number])[]): void {
  curve.forEach(([time, stress], i) => {
    const [timeBefore, stressBefore] = curve[i - 1] ?? [0, Number.POSITIVE_INFINITY];
    let wrong: [what: string, remedy: string] | undefined;
    if (!(stress > 0)) wrong = ['has a stress that is not above zero.', 'Give the stress that is bearable.'];
    else if (!(time > timeBefore)) {
      wrong = [
        `has a time that is not ${i === 0 ? 'above zero' : 'longer than the one before'}.`,
        'Order the points by rising time.',
      ];
    } else if (stress > stressBefore) {
      wrong = [
        'bears more stress for a longer time than the point before.',
        'Let the stress fall as the time rises.',
      ];
    }
    if (wrong) throw new Fault('range', ...wrong, ['curve', i]);
  });
}
