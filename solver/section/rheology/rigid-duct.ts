import type { DuctFlowLaw } from './duct-law.ts';
import { inverse, type Rising } from './inverse.ts';
import type { LocalFlow } from './local.ts';
import { resampled } from './resampled.ts';

/**
 * A rigid duct of any length: what flows under a mean pressure gradient along it. One section if it is
 * uniform; else every place along it sets its own gradient for the same flow.
 */
export interface RigidTaper {
  /** Pa/m, mean along the duct, that the yield stress bears. */
  readonly yieldGradient: number;
  readonly flow: Rising;
  readonly stations: readonly Station[];
  /** Its two ends, or the one section. */
  readonly ends: readonly LocalFlow[];
}

export interface Station {
  readonly local: LocalFlow;
  /** Share of the length that it stands for. */
  readonly share: number;
}

/** @param at the section at a mask width, m */
export function rigidTaper(width: readonly [number, number], at: (width: number) => LocalFlow): RigidTaper {
  if (width[0] === width[1]) {
    const local = at(width[0]);
    return {
      yieldGradient: local.yieldGradient,
      flow: local.flow,
      stations: [{ local, share: 1 }],
      ends: [local],
    };
  }
  const stations = alongTaper(width).map(({ width: w, share }) => ({ local: at(w), share }));
  const yieldGradient = stations.reduce((sum, { local, share }) => sum + share * local.yieldGradient, 0);
  const two = new Float64Array(2);
  const gradient: Rising = (flow, out) => {
    let sum = 0;
    let slope = 0;
    for (const { local, share } of stations) {
      local.gradient(flow, two);
      sum += share * two[0];
      slope += share * two[1];
    }
    out[0] = sum;
    out[1] = slope;
  };
  const flow: Rising = (mean, out) => {
    if (mean > yieldGradient) {
      const { local } = stations[stations.length >> 1];
      local.flow(mean, two);
      inverse(gradient, mean, two[0], out);
      return;
    }
    // No gradient, or one that the yield stress bears.
    let resistance = 0;
    for (const { local, share } of stations) {
      local.flow(0, two);
      resistance += share / two[1];
    }
    out[0] = 0;
    out[1] = 1 / resistance;
  };
  return {
    yieldGradient,
    flow: resampled(flow, yieldGradient, stations[0].local.ordinaryGradient),
    stations,
    ends: [at(width[0]), at(width[1])],
  };
}

/** @param length m */
export function rigidDuct(taper: RigidTaper, length: number): DuctFlowLaw {
  const { yieldGradient, stations, ends } = taper;
  const two = new Float64Array(2);
  return {
    flow(drop, _to, out) {
      taper.flow(Math.abs(drop) / length, two);
      const slope = two[1] / length;
      out[0] = drop < 0 ? -two[0] : two[0];
      out[1] = slope;
      out[2] = -slope;
    },
    state(pFrom, pTo) {
      const mean = Math.abs(pFrom - pTo) / length;
      taper.flow(mean, two);
      const flow = two[0];
      // Where nothing moves the wall bears what the pressure puts on it, no more.
      const gradientAt = (local: LocalFlow): number => {
        if (flow === 0 || stations.length === 1) return mean;
        local.gradient(flow, two);
        return two[0];
      };
      let force = 0;
      let wall = 0;
      for (const { local, share } of stations) {
        force += share * local.section.area * gradientAt(local);
        wall += share * local.section.perimeter;
      }
      let peakShear: number | null = 0;
      let peakVelocity = 0;
      for (const end of ends) {
        const gradient = gradientAt(end);
        const { stress, velocity } = end.peaks(gradient);
        if (stress === null) peakShear = null;
        else if (peakShear !== null) {
          peakShear = Math.max(peakShear, stress * end.section.meanShear * gradient);
        }
        peakVelocity = Math.max(peakVelocity, (velocity * flow) / end.section.area);
      }
      return {
        flow: Math.sign(pFrom - pTo) * flow,
        flowing: flow > 0 || yieldGradient === 0,
        peakShear,
        peakVelocity,
        meanShear: force / wall,
        rise: [0, 0],
        collapsed: false,
      };
    },
  };
}

/** Widths along a straight taper with the share of the length that each stands for. */
function alongTaper(width: readonly [number, number]): { readonly width: number; readonly share: number }[] {
  const [w1, w2] = width;
  // Gauss in the logarithm of the width, in panels short enough for its rule.
  const whole = Math.log(w2 / w1);
  const panels = Math.ceil(Math.abs(whole) / 0.75);
  const out: { width: number; share: number }[] = [];
  for (let panel = 0; panel < panels; panel += 1) {
    for (let k = 0; k < NODES.length; k += 1) {
      const w = w1 * Math.exp((whole * (panel + NODES[k])) / panels);
      // whole / (w2 - w1) stays finite as the two widths meet.
      out.push({ width: w, share: (w * WEIGHTS[k] * whole) / (panels * (w2 - w1)) });
    }
  }
  return out;
}

/** Gauss-Legendre on [0, 1], five points. */
const NODES = [0.046910077030668, 0.230765344947158, 0.5, 0.769234655052842, 0.953089922969332];
const WEIGHTS = [
  0.118463442528095, 0.239314335249683, 0.284444444444444, 0.239314335249683, 0.118463442528095,
];
