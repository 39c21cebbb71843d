import { canonical } from '../../solver/cell/canonical.ts';
import { relativeDifference } from '../../solver/cell/difference.ts';
import { faceWidths } from '../../solver/cell/equivalent.ts';
import { fieldsOf, levelOf, solveLevel } from '../../solver/cell/level.ts';
import { peakOfFields } from '../../solver/cell/peak.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { solveShape } from '../../solver/cell/solve-shape.ts';
import { verify } from '../verify/row.ts';
import { randomJunction } from './random-junction.ts';

const JUNCTIONS = 200;
/** Bands are measured on the whole set in a verification run, on part of it in the tests of every day. */
const whole = Boolean(process.env.CHANNELWRIGHT_VERIFY);
const BANDS = whole ? 80 : 8;

let worst: { reciprocity: number; conservation: number; dissipation: number } | undefined;
function self(): NonNullable<typeof worst> {
  if (worst) return worst;
  worst = { reciprocity: 0, conservation: 0, dissipation: 0 };
  for (let seed = 0; seed < JUNCTIONS; seed += 1) {
    const { checks } = solveCell(randomJunction(seed), { flow: 0.02, peak: null });
    worst.reciprocity = Math.max(worst.reciprocity, checks.reciprocity);
    worst.conservation = Math.max(worst.conservation, checks.conservation);
    worst.dissipation = Math.max(worst.dissipation, checks.dissipation);
  }
  return worst;
}
const HAPPEL = 'reciprocal theorem, Happel and Brenner 1965, Low Reynolds Number Hydrodynamics (from memory)';
for (const [part, name] of [
  ['reciprocity', 'port matrix against its transpose'],
  ['conservation', 'what flows in against what flows out'],
  ['dissipation', 'power put in against viscous dissipation'],
] as const)
  verify(
    {
      quantity: name,
      check: 'invariant',
      at: `worst of ${JUNCTIONS} random junctions`,
      source: HAPPEL,
      tolerance: 1e-8,
    },
    () => self()[part],
  );

interface Band {
  readonly flow: boolean;
  readonly peak: boolean | null;
  readonly wide: number;
}
let bands: Band[] | undefined;
/** Each junction at the default accuracy against a mesh of about a third of the size and two more depth modes. */
function measured(): Band[] {
  bands ??= Array.from({ length: BANDS }, (_, i) => {
    const { shape } = canonical(randomJunction(1000 + i));
    const { faces } = shape;
    const found = solveShape(shape, { flow: 0.005, peak: 0.05 }, '');
    const slender = 1 / Math.min(...faceWidths(shape));
    const fine = whole ? 0.45 : 0.55;
    const modes = Math.min(12, (found.fields?.modes ?? 2) + (slender > 10 ? 3 : 2));
    const reference = solveLevel(levelOf(planMesh(shape, fine, '', 1e5, 20), faces), modes, 1e-8);
    const error = relativeDifference(found.portMatrix, reference.matrix, faces);
    let peak: boolean | null = null;
    if (found.peakError !== null && found.fields) {
      const exact = fieldsOf(reference);
      let miss = 0;
      for (let face = 0; face < faces; face += 1)
        miss = Math.max(miss, Math.abs(peakOfFields(found.fields, face) / peakOfFields(exact, face) - 1));
      peak = miss <= found.peakError;
    }
    return { flow: error <= found.flowError, peak, wide: found.flowError / error };
  });
  return bands;
}
const share = (inside: boolean[]): number => inside.filter((x) => !x).length / inside.length;
verify(
  {
    quantity: 'share of port matrices outside their error band (absolute)',
    check: 'band',
    at: `${BANDS} random junctions against refined solves`,
    source: 'two meshes and two numbers of modes, factors set on other junctions',
    tolerance: 0.05,
  },
  () => share(measured().map((band) => band.flow)),
);
verify(
  {
    quantity: 'share of peaks outside their error band (absolute)',
    check: 'band',
    at: `those of ${BANDS} random junctions that have fillets, against refined solves`,
    source: 'two meshes and two numbers of modes, factors set on other junctions',
    tolerance: 0.05,
  },
  () => share(measured().flatMap((band) => (band.peak === null ? [] : [band.peak]))),
);
verify(
  {
    quantity: 'median of band over true error (absolute)',
    check: 'band',
    at: `${BANDS} random junctions`,
    source: 'a band too wide says as little as one too narrow',
    tolerance: 6,
  },
  () => {
    const ratios = measured()
      .map((band) => band.wide)
      .sort((a, b) => a - b);
    return ratios[Math.floor(ratios.length / 2)]!;
  },
);
