import { shearRate } from '../fluid/shear.ts';
import type { Profile } from '../section/profile.ts';
import type { Rheology } from '../section/rheology/local.ts';
import type { Crossing, Hugging } from './crossing.ts';
import type { History } from './laws.ts';
import { LEVELS, type SectionExposure, WALL_WEIGHTS } from './section-exposure.ts';
import { sectionExposure } from './section-of.ts';

/** A duct with what flows in it. */
export interface FlowingDuct {
  readonly profile: Profile;
  /** Mask widths at both ends, linear between, and depth and length, m. */
  readonly width: readonly [number, number];
  readonly depth: number;
  readonly length: number;
  /** m³/s, above zero. */
  readonly flow: number;
  /** Pa along it, above zero. */
  readonly drop: number;
  /** m³ */
  readonly volume: number;
  readonly peakWallShear: number | null;
  readonly rheology: Rheology;
  /** What a `Problem` calls it. */
  readonly where: string;
}

/** A place along the duct that stands for a share of its length, and its pressure gradient, Pa/m. */
interface Station {
  readonly share: number;
  readonly exposure: SectionExposure;
  readonly gradient: number;
}

/** Gauss-Legendre on [0, 1], five points. */
const POINTS = [0.046910077030668, 0.230765344947158, 0.5, 0.769234655052842, 0.953089922969332];
const WEIGHTS = [
  0.118463442528095, 0.239314335249683, 0.284444444444444, 0.239314335249683, 0.118463442528095,
];

export function ductCrossing(duct: FlowingDuct): Crossing {
  const { profile, width, depth, length, flow, volume, where } = duct;
  const time = volume / flow;
  const at = (w: number): SectionExposure => sectionExposure(profile, w, depth, where);
  let made: Station[] | null = null;
  const stations = (): Station[] => {
    made ??= stationsOf(duct, at);
    return made;
  };
  let middle: SectionExposure | null = null;
  const middling = (): SectionExposure => {
    middle ??= at((width[0] + width[1]) / 2);
    return middle;
  };
  return {
    time,
    get fast() {
      return time / middling().fast;
    },
    get slow() {
      return time / middling().slow;
    },
    peakWallShear: duct.peakWallShear,
    stretch: null,
    dose(exponent) {
      let sum = 0;
      for (const { share, exposure, gradient } of stations()) {
        sum += share * gradient ** exponent * exposure.shearPower(exponent);
      }
      return (sum * length) / flow;
    },
    history: () => meanHistory(stations(), length / flow),
    hugging(diameter) {
      const narrow = at(Math.min(width[0], width[1]));
      return narrow.clearance < diameter ? null : huggingOf(duct, stations(), at, diameter);
    },
  };
}

function stationsOf(duct: FlowingDuct, at: (width: number) => SectionExposure): Station[] {
  const { width, length, flow, drop, rheology } = duct;
  const places =
    width[0] === width[1]
      ? [{ share: 1, exposure: at(width[0]) }]
      : POINTS.map((point, i) => ({
          share: WEIGHTS[i],
          exposure: at(width[0] + point * (width[1] - width[0])),
        }));
  if ('viscosity' in rheology) {
    return places.map((place) => ({
      ...place,
      gradient: (rheology.viscosity * flow) / place.exposure.conductance,
    }));
  }
  // A fluid that thins shares its drop out along a taper much as a viscous one does.
  let whole = 0;
  for (const { share, exposure } of places) whole += share / exposure.conductance;
  return places.map((place) => ({
    ...place,
    gradient: drop / (length * whole * place.exposure.conductance),
  }));
}

/** @param perArea length over flow: the time that each square metre of section stands for */
function meanHistory(stations: readonly Station[], perArea: number): History {
  const count = stations.length * LEVELS;
  const stress = new Float64Array(count);
  const time = new Float64Array(count);
  let i = 0;
  for (const { share, exposure, gradient } of stations) {
    for (const level of exposure.levels) {
      stress[i] = gradient * level;
      time[i] = (share * exposure.area * perArea) / LEVELS;
      i += 1;
    }
  }
  return { stress, time };
}

function huggingOf(
  duct: FlowingDuct,
  stations: readonly Station[],
  at: (width: number) => SectionExposure,
  diameter: number,
): Hugging | null {
  const { width, length, rheology } = duct;
  if (stations.length === 1) return uniformHugging(duct, stations[0], diameter);
  const stress = new Float64Array(stations.length);
  const time = new Float64Array(stations.length);
  let whole = 0;
  let peak = 0;
  for (let i = 0; i < stations.length; i += 1) {
    const { share, exposure, gradient } = stations[i];
    const place = exposure.hugging(diameter);
    if (!place) return null;
    stress[i] = gradient * place.shear;
    peak = Math.max(peak, stress[i]);
    const speed = huggingSpeed(place.velocity, place.between, gradient, diameter / 2, rheology);
    time[i] = (share * length) / speed;
    whole += time[i];
  }
  // The narrow end, which lies beyond the outermost station.
  for (const w of width) {
    const exposure = at(w);
    const place = exposure.hugging(diameter);
    const nearest = stations[w === width[0] ? 0 : stations.length - 1];
    const gradient = (nearest.gradient * nearest.exposure.conductance) / exposure.conductance;
    if (place) peak = Math.max(peak, gradient * place.shear);
  }
  return {
    time: whole,
    peak,
    dose(exponent) {
      let sum = 0;
      for (let i = 0; i < time.length; i += 1) sum += stress[i] ** exponent * time[i];
      return sum;
    },
    history: () => ({ stress, time }),
  };
}

function uniformHugging(
  { length, rheology }: FlowingDuct,
  { exposure, gradient }: Station,
  diameter: number,
): Hugging | null {
  const place = exposure.hugging(diameter);
  if (!place) return null;
  const peak = gradient * place.shear;
  const time = length / huggingSpeed(place.velocity, place.between, gradient, diameter / 2, rheology);
  return {
    time,
    peak,
    dose: (exponent) => peak ** exponent * time,
    history: () => ({ stress: Float64Array.of(peak), time: Float64Array.of(time) }),
  };
}

/** m/s at a distance from the wall: G/µ times the section's own velocity, or the shear rates on the way added up. */
function huggingSpeed(
  velocity: number,
  between: Float64Array,
  gradient: number,
  distance: number,
  rheology: Rheology,
): number {
  if ('viscosity' in rheology) return (gradient * velocity) / rheology.viscosity;
  let sum = 0;
  for (let k = 0; k < between.length; k += 1) {
    sum += WALL_WEIGHTS[k] * shearRate(rheology.shear, gradient * between[k]);
  }
  return sum * distance;
}
