import { BLOOD_CARREAU } from '../../solver/fluid/reference.ts';
import { apparentViscosity } from '../../solver/fluid/shear.ts';
import { verify } from '../verify/row.ts';
import { plateFlow, tubeFlow } from './shear-thinning-ducts.ts';

const relative = (got: number, wanted: number): number => Math.abs(got / wanted - 1);

for (const [rate, viscosity] of [
  [1, 27.097651],
  [10, 8.978905],
  [100, 4.707665],
  [1000, 3.736],
] as const) {
  verify(
    {
      quantity: 'apparent viscosity, Carreau',
      check: 'published',
      at: `blood, ${rate} 1/s`,
      source: 'Cho and Kensey 1991, Biorheology 28, 241 (constants from memory), evaluated separately',
      tolerance: 2e-7,
    },
    () => relative(apparentViscosity(BLOOD_CARREAU, rate) * 1e3, viscosity),
  );
}

// The flows under 10 to 1e5 Pa/m: nested adaptive quadrature of the shear rate over the stress, the rate by bisection.
for (const [gradient, tube, plates] of [
  [10, 1.1227879582002203e-13, 1.4883310446732242e-14],
  [100, 1.2060903278210784e-12, 1.512033408760855e-13],
  [1e3, 6.371765644117906e-11, 4.374572972827243e-12],
  [1e4, 1.4542320072911592e-9, 1.653525077464446e-10],
  [1e5, 1.7321505018355153e-8, 2.2210967567301163e-9],
] as const) {
  verify(
    {
      quantity: 'flow of a Carreau fluid in a tube',
      check: 'package',
      at: `blood, radius 200 µm, ${gradient} Pa/m`,
      source: 'scipy 1.17.1, quad and brentq',
      tolerance: 1e-9,
    },
    () => relative(tubeFlow(BLOOD_CARREAU, 200e-6, gradient), tube),
  );
  verify(
    {
      quantity: 'flow of a Carreau fluid between plates',
      check: 'package',
      at: `blood, gap 100 µm, width 1 mm, ${gradient} Pa/m`,
      source: 'scipy 1.17.1, quad and brentq',
      tolerance: 1e-9,
    },
    () => relative(plateFlow(BLOOD_CARREAU, 100e-6, 1e-3, gradient), plates),
  );
}

// xi = yield stress over wall stress = 0.1; the Newtonian flow is that of the Casson viscosity.
const casson = { kind: 'casson', yieldStress: 0.1, viscosity: 1e-3 } as const;
verify(
  {
    quantity: 'flow of a Casson fluid in a tube over the Newtonian flow',
    check: 'published',
    at: 'yield over wall stress = 0.1',
    source: 'Fung 1993, Biomechanics (formula from memory); value by mpmath quadrature of the model',
    tolerance: 1e-12,
  },
  () => relative(tubeFlow(casson, 1e-3, 2e3) / ((Math.PI * 1e-12 * 2e3) / 8e-3), 0.41052224910437),
);
verify(
  {
    quantity: 'flow of a Casson fluid between plates over the Newtonian flow',
    check: 'exact',
    at: 'yield over wall stress = 0.1',
    source: 'integral of the model, by quadrature',
    tolerance: 2e-10,
  },
  () => relative(plateFlow(casson, 2e-3, 1, 1e3) / ((8e-9 * 1e3) / 12e-3), 0.3909533616),
);
