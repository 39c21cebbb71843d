import { describe, expect, test } from 'vitest';
import { BLOOD_CARREAU, BLOOD_CASSON } from '../../solver/fluid/reference.ts';
import { solveNonlinear } from '../../solver/network/solve-nonlinear.ts';
import type { Drive, NetworkSpec } from '../../solver/network/spec.ts';
import { type DuctShape, ductLaws, ordinaryViscosity } from '../../solver/section/rheology/duct-law.ts';
import type { Rheology } from '../../solver/section/rheology/local.ts';
import { sectionOf } from '../../solver/section/section-of.ts';
import { verify } from '../verify/row.ts';

const um = 1e-6;
type Duct = readonly [from: number, to: number, shape: DuctShape];

/** A network of ducts of one fluid, with pressures given at some nodes. */
function solved(
  rheology: Rheology,
  nodeCount: number,
  ducts: readonly Duct[],
  given: Record<number, number>,
) {
  const laws = ductLaws(rheology);
  const viscosity = ordinaryViscosity(rheology);
  const spec: NetworkSpec = {
    nodeCount,
    ductFrom: Int32Array.from(ducts, ([from]) => from),
    ductTo: Int32Array.from(ducts, ([, to]) => to),
    resistance: Float64Array.from(ducts, ([, , { profile, width, depth, length }]) => {
      const { conductance } = sectionOf(profile, (width[0] + width[1]) / 2, depth);
      return (viscosity * length) / conductance;
    }),
    blocks: [],
    drives: Object.entries(given).map(([node, value]): Drive => {
      return { node: Number(node), kind: 'pressure', value, series: 0 };
    }),
  };
  return solveNonlinear(
    spec,
    ducts.map(([, , shape]) => laws.law(shape)),
  );
}

const tube = (radius: number, length: number): DuctShape => ({
  profile: { kind: 'circle' },
  width: [2 * radius * um, 2 * radius * um],
  depth: 2 * radius * um,
  length: length * 1e-3,
});

// Inlet 0, junctions 1 and 2 with a bridge between, outlet 3.
const bridge: readonly Duct[] = [
  [0, 1, tube(150, 20)],
  [0, 2, tube(100, 10)],
  [1, 2, tube(60, 5)],
  [1, 3, tube(90, 12)],
  [2, 3, tube(120, 15)],
];
const carreau = () => solved({ shear: BLOOD_CARREAU }, 4, bridge, { 0: 3000, 3: 0 });
const scipy = 'scipy 1.17.1: quad over the stress, brentq for rates and node pressures';

for (const [node, pressure] of [
  [1, 2349.8559713073187],
  [2, 1376.6827878274075],
] as const) {
  verify(
    {
      quantity: 'pressure in a network of Carreau blood',
      check: 'package',
      at: `bridge of five tubes, 3 kPa, junction ${node}`,
      source: scipy,
      tolerance: 2e-5,
    },
    () => Math.abs(carreau().pressure[node] / pressure - 1),
  );
}
[
  1.6523896763951474e-9, 1.744691562998288e-9, 2.6742832579883857e-10, 1.384961350596309e-9,
  2.0121198887971268e-9,
].forEach((flow, duct) => {
  verify(
    {
      quantity: 'flow in a network of Carreau blood',
      check: 'package',
      at: `bridge of five tubes, 3 kPa, tube ${duct + 1}`,
      source: scipy,
      tolerance: 1e-4,
    },
    () => Math.abs(carreau().ductFlow[duct] / flow - 1),
  );
});

const roof = { modulus: 1.5e6, thickness: 5e-3, poisson: 0.5, law: 'thick', constant: 0.5 } as const;
const soft = (from: number, to: number, length: number): DuctShape => ({
  profile: { kind: 'rectangle' },
  width: [from * um, to * um],
  depth: 40 * um,
  length: length * 1e-3,
  roof,
});
const fork: readonly Duct[] = [
  [0, 1, soft(500, 500, 20)],
  [1, 2, soft(400, 200, 10)],
  [1, 3, soft(300, 300, 15)],
];
const softWater = () => solved({ viscosity: 1e-3 }, 4, fork, { 0: 60e3, 2: 0, 3: 5e3 });
const shooting =
  'scipy 1.17.1: shooting with solve_ivp (DOP853, 1e-12), brentq for flows and the node pressure';

verify(
  {
    quantity: 'pressure in a network under a soft roof',
    check: 'package',
    at: 'fork with a taper, 60 kPa, junction',
    source: shooting,
    tolerance: 1e-5,
  },
  () => Math.abs(softWater().pressure[1] / 27622.813567794736 - 1),
);
[6.801049961250885e-9, 4.307313628506837e-9, 2.4937363327440585e-9].forEach((flow, duct) => {
  verify(
    {
      quantity: 'flow in a network under a soft roof',
      check: 'package',
      at: `fork with a taper, 60 kPa, channel ${duct + 1}`,
      source: shooting,
      tolerance: 1e-5,
    },
    () => Math.abs(softWater().ductFlow[duct] / flow - 1),
  );
});

describe('a fluid with a yield stress', () => {
  test('stands still where no wall reaches it, and this is told', () => {
    const still = solved({ shear: BLOOD_CASSON }, 4, bridge, { 0: 0.2, 3: 0 });
    expect(still.faults.map(({ kind }) => kind)).toEqual(['no-flow']);
    expect([...still.ductFlow]).toEqual([0, 0, 0, 0, 0]);
  });

  test('flows where pressure is enough, although a branch without a pressure drop stands', () => {
    // A bridge in balance: nothing drives its middle.
    const even: readonly Duct[] = [
      [0, 1, tube(100, 10)],
      [0, 2, tube(100, 10)],
      [1, 2, tube(60, 5)],
      [1, 3, tube(100, 10)],
      [2, 3, tube(100, 10)],
    ];
    const { ductFlow, faults, conservationResidual } = solved({ shear: BLOOD_CASSON }, 4, even, {
      0: 2000,
      3: 0,
    });
    expect(faults).toEqual([]);
    expect(conservationResidual).toBeLessThan(1e-12);
    expect(ductFlow[0]).toBeGreaterThan(0);
    expect(ductFlow[3] / ductFlow[0]).toBeCloseTo(1, 9);
    expect(Math.abs(ductFlow[2])).toBeLessThan(1e-9 * ductFlow[0]);
  });
});

test('shear-thinning blood under a soft roof balances as well', () => {
  const { faults, conservationResidual, ductFlow } = solved({ shear: BLOOD_CARREAU }, 4, fork, {
    0: 60e3,
    2: 0,
    3: 5e3,
  });
  expect(faults).toEqual([]);
  expect(conservationResidual).toBeLessThan(1e-12);
  expect((ductFlow[1] + ductFlow[2]) / ductFlow[0]).toBeCloseTo(1, 12);
});
