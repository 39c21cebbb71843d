import type { Profile } from '../section/profile.ts';
import { sectionOf } from '../section/section-of.ts';
import { taperMeans } from '../section/taper.ts';

/**
 * How a duct's figures change with its size, as powers: resistance ~ depth^depth width^width, both ends of a taper
 * together in `width`; `shift` is d ln/dw of both ends moved by one length, 1/m. Shear is the peak wall shear per
 * pressure gradient at the narrow end, a length.
 */
export interface Slopes {
  readonly resistance: Slope;
  readonly shear: Slope;
}
export interface Slope {
  readonly depth: number;
  readonly width: number;
  /** 1/m */
  readonly shift: number;
}

/** Step of the central differences, relative: a section solved by finite elements is good to a few 1e-5. */
const STEP = 0.02;

/**
 * Every figure is that of a shape times a power of its size (resistance −4, shear 1), so that the power of the depth
 * follows from that of the width: only the width is varied. The shallow limit of the rectangle is depth −3, width −1.
 */
export function slopesOf(
  profile: Profile,
  [w0, w1]: readonly [number, number],
  depth: number,
  where: string,
): Slopes {
  if (profile.kind === 'circle') return roundSlopes(w0);
  const narrow = Math.min(w0, w1);
  const figures =
    profile.kind === 'polygon'
      ? (grown: number) => measuredFigures(profile.points, grown, where)
      : (grown: number) => ({
          resistance: resistanceOf(profile, w0 * grown, w1 * grown, depth, where),
          shear: shearOf(profile, narrow * grown, depth, where),
        });
  const up = figures(1 + STEP);
  const down = figures(1 - STEP);
  const span = Math.log((1 + STEP) / (1 - STEP));
  const resistance = Math.log(up.resistance / down.resistance) / span;
  const shear = Math.log(up.shear / down.shear) / span;
  return {
    resistance: {
      depth: -4 - resistance,
      width: resistance,
      shift: shiftOf(profile, w0, w1, depth, where, resistance),
    },
    shear: { depth: 1 - shear, width: shear, shift: shear / narrow },
  };
}

/** Of both ends moved alike, 1/m. */
function shiftOf(
  profile: Profile,
  w0: number,
  w1: number,
  depth: number,
  where: string,
  resistance: number,
): number {
  if (profile.kind === 'polygon') return resistance / spanOf(profile.points);
  if (w0 === w1) return resistance / w0;
  const step = STEP * Math.min(w0, w1);
  const up = resistanceOf(profile, w0 + step, w1 + step, depth, where);
  const down = resistanceOf(profile, w0 - step, w1 - step, depth, where);
  return Math.log(up / down) / (2 * step);
}

function resistanceOf(profile: Profile, w0: number, w1: number, depth: number, where: string): number {
  return w0 === w1
    ? 1 / sectionOf(profile, w0, depth, where).conductance
    : taperMeans(profile, w0, w1, depth, where).resistance;
}

/** The peak, or the mean where a corner leaves the peak without a bound, m. */
function shearOf(profile: Profile, width: number, depth: number, where: string): number {
  const { peakShear, meanShear } = sectionOf(profile, width, depth, where);
  return peakShear ?? meanShear;
}

/** A bore that is off in one direction only is an ellipse: K ~ a³b³/(a² + b²), peak shear ~ a b²/(a² + b²) across b. */
function roundSlopes(bore: number): Slopes {
  return {
    resistance: { depth: -2, width: -2, shift: -2 / bore },
    shear: { depth: 0.5, width: 0.5, shift: 0.5 / bore },
  };
}

type Points = readonly (readonly [number, number])[];

/** A measured cross-section made wider. */
function measuredFigures(
  points: Points,
  grown: number,
  where: string,
): { readonly resistance: number; readonly shear: number } {
  const profile: Profile = { kind: 'polygon', points: points.map(([x, y]) => [x * grown, y] as const) };
  const section = sectionOf(profile, 0, 0, where);
  return { resistance: 1 / section.conductance, shear: section.peakShear ?? section.meanShear };
}

const spanOf = (points: Points): number =>
  points.reduce((most, [x]) => Math.max(most, x), -Infinity) -
  points.reduce((least, [x]) => Math.min(least, x), Infinity);

/** By profile, then by size; more different sections than a chip has are forgotten together. */
let known = new WeakMap<Profile, Map<string, Slopes>>();
const MOST = 20_000;
let count = 0;

/** As `slopesOf`, worked out once for each section. */
export function knownSlopes(
  profile: Profile,
  width: readonly [number, number],
  depth: number,
  where: string,
): Slopes {
  if (count > MOST) {
    known = new WeakMap();
    count = 0;
  }
  let sizes = known.get(profile);
  if (!sizes) {
    sizes = new Map();
    known.set(profile, sizes);
  }
  const key = `${depth} ${width[0]} ${width[1]}`;
  let found = sizes.get(key);
  if (!found) {
    found = slopesOf(profile, width, depth, where);
    sizes.set(key, found);
    count += 1;
  }
  return found;
}
