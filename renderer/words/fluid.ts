import type { FluidSpec } from '../../solver/fluid/spec.ts';
import { figure } from './figure.ts';

/** A fluid in a few words: "water, 25.0 °C". */
export function fluidWords(fluid: FluidSpec): string {
  if ('name' in fluid) {
    const name =
      fluid.name === 'culture-medium'
        ? 'culture medium'
        : fluid.name === 'glycerol-water'
          ? 'glycerol and water'
          : fluid.name;
    return `${name}, ${figure(fluid.temperature, 'temperature', { unit: 'degC', digits: 3 })}`;
  }
  if ('viscosity' in fluid) return figure(fluid.viscosity, 'viscosity');
  if ('shear' in fluid) return `shear-thinning (${fluid.shear.kind})`;
  return 'measured';
}
