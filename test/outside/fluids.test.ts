import { fluidOf } from '../../solver/fluid/fluid.ts';
import { hermite, monotoneSlopes } from '../../solver/fluid/monotone.ts';
import { iapwsViscosity, kellDensity, tanakaDensity } from '../../solver/fluid/water.ts';
import { verify } from '../verify/row.ts';

const relative = (got: number, wanted: number): number => Math.abs(got / wanted - 1);

// IAPWS R12-08, table 4: K, kg/m^3, uPa s (without the critical enhancement).
for (const [temperature, density, viscosity] of [
  [298.15, 998, 889.7351],
  [298.15, 1200, 1437.649467],
  [373.15, 1000, 307.883622],
  [433.15, 1, 14.538324],
  [433.15, 1000, 217.685358],
  [873.15, 1, 32.619287],
  [873.15, 100, 35.802262],
  [873.15, 600, 77.430195],
  [1173.15, 1, 44.217245],
  [1173.15, 100, 47.640433],
  [1173.15, 400, 64.154608],
] as const) {
  verify(
    {
      quantity: 'viscosity of water',
      check: 'published',
      at: `${temperature} K, ${density} kg/m³`,
      source: 'IAPWS R12-08, table 4',
      tolerance: 4e-8,
    },
    () => relative(iapwsViscosity(temperature, density) * 1e6, viscosity),
  );
}

// The short correlation of the same body for 0.1 MPa is another formula, fitted to within its own digits.
for (const celsius of [1, 10, 20, 25, 37, 60, 80]) {
  verify(
    {
      quantity: 'viscosity of water',
      check: 'published',
      at: `${celsius} °C, atmospheric pressure`,
      source: 'IAPWS SR6-08, short correlation for 0.1 MPa (constants from memory)',
      tolerance: 4e-5,
    },
    () => {
      const t = (celsius + 273.15) / 300;
      const short = 280.68 * t ** -1.9 + 511.45 * t ** -7.7 + 61.131 * t ** -19.6 + 0.45903 * t ** -40;
      return relative(fluidOf({ name: 'water', temperature: celsius + 273.15 }).viscosity! * 1e6, short);
    },
  );
}

for (const [celsius, density] of [
  [5, 999.9668],
  [15, 999.1026],
  [20, 998.2067],
  [25, 997.047],
  [37, 993.329],
] as const) {
  verify(
    {
      quantity: 'density of water',
      check: 'published',
      at: `${celsius} °C`,
      source: 'Tanaka et al. 2001, Metrologia 38, 301',
      tolerance: 6e-8,
    },
    () => relative(fluidOf({ name: 'water', temperature: celsius + 273.15 }).density, density),
  );
}

verify(
  {
    quantity: 'density of water where two formulas meet',
    check: 'published',
    at: '40 °C',
    source: 'Kell 1975, J. Chem. Eng. Data 20, 97 (from memory), against Tanaka et al. 2001',
    tolerance: 4e-6,
  },
  () => relative(kellDensity(40), tanakaDensity(40)),
);

for (const [w, mu20, mu25, rho20, rho25] of [
  [0.2, 1.7414, 1.5245, 1046.72, 1045.05],
  [0.4, 3.6848, 3.1372, 1099.15, 1096.93],
  [0.5, 6.0023, 5.0037, 1126.23, 1123.74],
  [0.6, 10.9115, 8.8478, 1153.54, 1150.83],
  [0.8, 60.8591, 45.3504, 1208.12, 1205.09],
] as const) {
  for (const [celsius, viscosity, density] of [
    [20, mu20, rho20],
    [25, mu25, rho25],
  ] as const) {
    const fluid = () => fluidOf({ name: 'glycerol-water', temperature: celsius + 273.15, massFraction: w });
    const at = `${w} glycerol by mass, ${celsius} °C`;
    verify(
      {
        quantity: 'viscosity of glycerol and water',
        check: 'published',
        at,
        source: 'Cheng 2008, Ind. Eng. Chem. Res. 47, 3285, evaluated separately to the digits given',
        tolerance: 4e-5,
      },
      () => relative(fluid().viscosity! * 1e3, viscosity),
    );
    verify(
      {
        quantity: 'density of glycerol and water',
        check: 'published',
        at,
        source: 'Volk and Kähler 2018, Exp. Fluids 59, 75, evaluated separately to the digits given',
        tolerance: 6e-6,
      },
      () => relative(fluid().density, density),
    );
  }
}

const SCIPY = [
  2.191655660377358, 3.9099858490566044, 4.291540094339623, 4.242513089005236, 1.9391700601124684,
  1.9000728718247042,
];
verify(
  {
    quantity: 'interpolation in a fluid table',
    check: 'package',
    at: 'knots 0, 1, 3, 4, 7 with a flat and a turning piece',
    source: 'scipy 1.17.1, PchipInterpolator',
    tolerance: 1e-14,
  },
  () => {
    const x = [0, 1, 3, 4, 7];
    const y = [1, 4, 4.5, 2, 1.9];
    const slopes = monotoneSlopes(x, y);
    const got = [0.3, 0.9, 1.7, 3.2, 5, 6.9].map((at) => hermite(x, y, slopes, at));
    return Math.max(...got.map((value, i) => relative(value, SCIPY[i])));
  },
);
