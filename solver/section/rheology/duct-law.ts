import type { Profile } from '../profile.ts';
import { roofLaw, type SoftRoof } from '../roof/roof.ts';
import { inverse } from './inverse.ts';
import { type LocalFlow, localFlow, type Rheology } from './local.ts';
import { softDuct } from './soft-duct.ts';

/**
 * What the network needs of a duct whose flow is not proportional to its pressure drop: the flow for
 * any pressures at its two ends, rising with the first, falling with the second, odd under exchange of
 * ends for a straight rigid duct.
 */
export interface DuctLaw {
  /** Flow (m³/s, positive from first to second end), ∂/∂pFrom and ∂/∂pTo, into out[0..2]; Pa. */
  flow(pFrom: number, pTo: number, out: Float64Array): void;
  /** What the flow does, at end pressures that `flow` was or could be asked for. */
  state(pFrom: number, pTo: number): DuctState;
}

export interface DuctState {
  /** m³/s; 0 where a yield stress holds the fluid. */
  readonly flow: number;
  /** False where the fluid has a yield stress and the walls nowhere reach it. */
  readonly flowing: boolean;
  /** Greatest along the duct, Pa and m/s; null where the section's peak is unbounded. */
  readonly peakShear: number | null;
  readonly peakVelocity: number;
  /** Mean over the wall's area, Pa. */
  readonly meanShear: number;
  /** Where a soft roof is given: rise over the depth at both ends (negative under suction), else zeros. */
  readonly rise: readonly [number, number];
}

export interface DuctShape {
  readonly profile: Profile;
  /** Mask width at both ends, m; linear between. */
  readonly width: readonly [number, number];
  /** m */
  readonly depth: number;
  readonly length: number;
  readonly roof?: SoftRoof;
}

/** @param where what to call the duct in a `Problem` */
export function ductLaw(rheology: Rheology, shape: DuctShape, where = ''): DuctLaw {
  if (!(shape.length > 0)) throw new RangeError(`duct of length ${shape.length}`);
  if (shape.roof) {
    const { roof } = shape;
    return softDuct(rheology, shape, (width) => roofLaw(roof, width, shape.depth, where), where);
  }
  return rigidDuct(rheology, shape, where);
}

interface Station extends LocalFlow {
  /** Length it stands for, m. */
  readonly span: number;
}

function rigidDuct(rheology: Rheology, shape: DuctShape, where: string): DuctLaw {
  const { profile, width, depth, length } = shape;
  const stations: Station[] = alongTaper(width, length).map(({ width: w, span }) => ({
    ...localFlow(rheology, profile, w, depth, where),
    span,
  }));
  const uniform = stations.length === 1;
  const yieldDrop = stations.reduce((sum, { yieldGradient, span }) => sum + yieldGradient * span, 0);
  const local = new Float64Array(2);
  const drop = (flow: number, out: Float64Array): void => {
    let sum = 0;
    let slope = 0;
    for (const station of stations) {
      station.gradient(flow, local);
      sum += station.span * local[0];
      slope += station.span * local[1];
    }
    out[0] = sum;
    out[1] = slope;
  };
  const two = new Float64Array(2);
  const flowOf = (size: number, out: Float64Array): void => {
    if (uniform) {
      stations[0].flow(size / length, out);
      out[1] /= length;
      return;
    }
    stations[0].flow(size / length, two);
    inverse(drop, size, two[0], out);
  };
  const ends = [0, 1].map((end) => localFlow(rheology, profile, width[end], depth, where));
  return {
    flow(pFrom, pTo, out) {
      const difference = pFrom - pTo;
      flowOf(Math.abs(difference), two);
      out[0] = difference < 0 ? -two[0] : two[0];
      out[1] = two[1];
      out[2] = -two[1];
    },
    state(pFrom, pTo) {
      const size = Math.abs(pFrom - pTo);
      const flowing = size > yieldDrop;
      flowOf(size, two);
      const flow = two[0];
      let force = 0;
      let wall = 0;
      for (const station of stations) {
        station.gradient(flow, local);
        force += station.span * station.section.area * local[0];
        wall += station.span * station.section.perimeter;
      }
      let peakShear: number | null = 0;
      let peakVelocity = 0;
      for (const end of uniform ? [ends[0]] : ends) {
        end.gradient(flow, local);
        const { stress, velocity } = end.peaks(local[0]);
        if (stress === null) peakShear = null;
        else if (peakShear !== null) {
          peakShear = Math.max(peakShear, stress * end.section.meanShear * local[0]);
        }
        peakVelocity = Math.max(peakVelocity, (velocity * flow) / end.section.area);
      }
      return {
        flow: flowing ? Math.sign(pFrom - pTo) * flow : 0,
        flowing,
        peakShear,
        peakVelocity: flowing ? peakVelocity : 0,
        meanShear: force / wall,
        rise: [0, 0],
      };
    },
  };
}

/** Widths along a straight taper with the length that each stands for; one station if it is none. */
export function alongTaper(
  width: readonly [number, number],
  length: number,
): { readonly width: number; readonly span: number }[] {
  const [w1, w2] = width;
  if (w1 === w2) return [{ width: w1, span: length }];
  // Gauss in the logarithm of the width, in panels short enough for its rule.
  const whole = Math.log(w2 / w1);
  const panels = Math.ceil(Math.abs(whole) / 0.75);
  const out: { width: number; span: number }[] = [];
  for (let panel = 0; panel < panels; panel += 1) {
    for (let k = 0; k < NODES.length; k += 1) {
      const w = w1 * Math.exp((whole * (panel + NODES[k])) / panels);
      // whole / (w2 - w1) stays finite as the two widths meet.
      out.push({ width: w, span: (length * w * WEIGHTS[k] * whole) / (panels * (w2 - w1)) });
    }
  }
  return out;
}

/** Gauss-Legendre on [0, 1], five points. */
const NODES = [0.046910077030668, 0.230765344947158, 0.5, 0.769234655052842, 0.953089922969332];
const WEIGHTS = [
  0.118463442528095, 0.239314335249683, 0.284444444444444, 0.239314335249683, 0.118463442528095,
];
