import type { DamageLaw } from './laws.ts';

/**
 * Published figures that a designer may start from. **Reference, to confirm with your own cells**: each holds
 * for its cell, medium, temperature and exposure only; none is a safe limit, and they are never averaged.
 */
export const CONFIRM = 'reference, to confirm with your own cells';

export interface ReferenceLimit {
  /** Kind of cell. */
  readonly cells: string;
  /** What was done and seen, in words. */
  readonly seen: string;
  readonly source: string;
  /** The part of a limit that it stands for; null where it informs but draws no line. */
  readonly limit:
    | { readonly shear: number }
    | { readonly floor: readonly [number, number]; readonly area: number }
    | { readonly curve: readonly (readonly [time: number, stress: number])[] }
    | null;
}

/** Stresses in Pa, times in s. */
export const REFERENCE_LIMITS: readonly ReferenceLimit[] = [
  {
    cells: 'human red blood cells, suspended',
    seen: 'Above 150 Pa, for 2 min, extensive damage by the stress alone.',
    source: 'Leverett et al. 1972, Biophys. J. 12, 257 (the time from memory)',
    limit: { curve: [[120, 150]] },
  },
  {
    cells: 'platelets',
    seen: 'About 8 Pa needed for significant activation; markers bind within 10 s.',
    source: 'Shankaran et al. 2003, Blood 101, 2637',
    limit: { shear: 8 },
  },
  {
    cells: 'platelets, milliseconds',
    seen: 'Of 57 to 255 Pa for 7 to 700 ms: procoagulant change from 170 Pa at 7 ms, lysis from 255 Pa at 7 ms.',
    source: 'Wurzinger et al. 1985, Thromb. Haemost. 54, 381',
    limit: { curve: [[0.007, 170]] },
  },
  {
    cells: 'adipose-derived human mesenchymal stem cells, suspended',
    seen: 'Viability unchanged up to 18.38 Pa for 5 min; debris beyond, growing with time.',
    source: 'Mand et al. 2024, Bioengineering 11, 1011',
    limit: { curve: [[300, 18.38]] },
  },
  {
    cells: 'HEK293, suspended, repeated passes',
    seen: 'Threshold of 4900 1/s in a hollow-fibre loop, which is about 3 to 5 Pa in medium (the stress derived here).',
    source: 'Zhan et al. 2020, iScience 23, 101653',
    limit: { shear: 3 },
  },
  {
    cells: 'rat aortic smooth muscle cells, suspended, repeated capillary passes',
    seen: 'Of 2 to 120 Pa at the wall, survival was best at 10 to 50 Pa.',
    source:
      'The impact of process stress on suspended anchorage-dependent mammalian cells (authors not seen)',
    limit: null,
  },
  {
    cells: 'prostate cancer lines, one pass of a 30 gauge needle',
    seen: '395 Pa on average: DU145 unchanged, some death of PC3, significant death of LNCaP.',
    source: 'Hope et al. 2021, J. Cell Sci. 134(4)',
    limit: null,
  },
  {
    cells: 'CHO, attached, long exposure',
    seen: 'No change of shape from 0.005 to 0.80 Pa; without protectant, product formation stopped at 0.10 Pa.',
    source: 'Keane et al. 2002, Biotechnol. Bioeng., doi 10.1002/bit.10472',
    limit: { floor: [0.005, 0.8], area: 0.9 },
  },
  {
    cells: 'endothelial layer, arterial level',
    seen: 'Quiescent above 1.5 Pa, disease-prone below 0.4 Pa.',
    source: 'Malek et al. 1999, JAMA 282, 2035',
    limit: null,
  },
  {
    cells: 'endothelium in the body, arterioles',
    seen: 'Arterioles 1 to 5 Pa; carotid mean 1.1 to 1.3 Pa, brachial 0.4 to 0.5 Pa, femoral 0.3 to 0.5 Pa.',
    source: 'Reneman & Hoeks 2008, Med. Biol. Eng. Comput. 46, 499 (pages from memory)',
    limit: { floor: [1, 5], area: 0.9 },
  },
  {
    cells: 'endothelial layer on a chip',
    seen: 'Growth unchanged below 0.83 Pa for 24 h; a rise to 100 Pa detached 88.2 %.',
    source: 'J. Nanobiotechnol. 2024, s12951-024-02334-6',
    limit: { floor: [0, 0.83], area: 0.9 },
  },
  {
    cells: 'hybridoma, suspended',
    seen: 'Death rises with laminar stress; 5 Pa for 10 min in a viscometer is the number usually quoted.',
    source:
      'Petersen et al. 1988, J. Biotechnol. 7, 229 (number from memory); trend also Schurch et al. 1988, J. Biotechnol. 7, 179',
    limit: { curve: [[600, 5]] },
  },
];

/** A published damage law: haemoglobin released in per cent = A stress^α time^β. */
export interface ReferenceLaw {
  readonly name: string;
  readonly law: DamageLaw;
  readonly source: string;
  /** How far its data go, in words and, where known, as numbers (Pa, s). */
  readonly data: { readonly says: string; readonly mostStress?: number; readonly mostTime?: number };
}

/**
 * Laws of haemolysis. They differ by more than a hundredfold on one exposure, and power laws are known to
 * miss absolute values by orders of magnitude (Faghih & Sharp 2019, Biomech. Model. Mechanobiol. 18, 845).
 */
export const REFERENCE_LAWS: readonly ReferenceLaw[] = [
  {
    name: 'Giersiepen',
    law: { constant: 3.62e-5, stress: 2.416, time: 0.785 },
    source: 'Giersiepen et al. 1990, Int. J. Artif. Organs 13, 300, on data of Wurzinger',
    data: { says: 'below 255 Pa and 0.7 s (from memory)', mostStress: 255, mostTime: 0.7 },
  },
  {
    name: 'Heuser and Opitz',
    law: { constant: 1.8e-6, stress: 1.991, time: 0.765 },
    source: 'Heuser & Opitz 1980, Biorheology 17, 17; fit in Song et al. 2003',
    data: { says: 'porcine, up to 700 Pa and 0.7 s (from memory)', mostStress: 700, mostTime: 0.7 },
  },
  {
    name: 'Zhang',
    law: { constant: 1.228e-5, stress: 1.9918, time: 0.6606 },
    source: 'Zhang et al. 2011, Artif. Organs 35, 1180',
    data: { says: 'ovine, 50 to 320 Pa and 0.03 to 1.5 s (from memory)', mostStress: 320, mostTime: 1.5 },
  },
  {
    name: 'Ding, human',
    law: { constant: 3.458e-6, stress: 2.0639, time: 0.2777 },
    source: 'Ding et al. 2015, Artif. Organs 39, 945 (reference from memory)',
    data: { says: 'not stated here' },
  },
];

const same = (a: DamageLaw, b: DamageLaw): boolean =>
  a.constant === b.constant && a.stress === b.stress && a.time === b.time;

/** The published law with just these constants, if there is one. */
export const referenceOf = (law: DamageLaw): ReferenceLaw | undefined =>
  REFERENCE_LAWS.find((reference) => same(reference.law, law));

/** Names of the two laws, where one's constant stands beside the other's exponents. */
export function mixedLaw(law: DamageLaw): { readonly constant: string; readonly exponents: string } | null {
  const constant = REFERENCE_LAWS.find((reference) => reference.law.constant === law.constant);
  const exponents = REFERENCE_LAWS.find(
    (reference) => reference.law.stress === law.stress || reference.law.time === law.time,
  );
  if (!constant || !exponents || constant === exponents) return null;
  return { constant: constant.name, exponents: exponents.name };
}
