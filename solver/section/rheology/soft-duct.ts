import { collapsed, opening, openingPotential, openingSlope, type RoofLaw } from '../roof/roof.ts';
import type { DuctLaw, DuctShape } from './duct-law.ts';
import { inverse } from './inverse.ts';
import { type LocalFlow, localFlow, type Rheology } from './local.ts';

/**
 * A duct under a soft roof. At pressure p the channel is open by the factor `opening(p)` of its rigid
 * conductance, as if its depth were h = h0 opening^(1/3). A Newtonian fluid in a uniform duct has the
 * closed form Q = (Φ(pFrom) − Φ(pTo))/R. Everything else is marched from the high end to the low one,
 *
 *   dp/dx = −(h0/h) G0(Q (h0/h)²),   G0 the rigid section's gradient for a flow,
 *
 * which is the scaling of a wide shallow channel with its depth for any fluid, and Q found so that the
 * far pressure is met. Where the two are to agree, they do (checked).
 */
export function softDuct(
  rheology: Rheology,
  shape: DuctShape,
  roofAt: (width: number) => RoofLaw,
  where: string,
): DuctLaw {
  const { profile, width, depth, length } = shape;
  const ends = [0, 1].map((end) => ({
    local: localFlow(rheology, profile, width[end], depth, where),
    roof: roofAt(width[end]),
  }));
  const uniform = width[0] === width[1];
  const places: Place[] = uniform
    ? [ends[0]]
    : Array.from({ length: 2 * STEPS + 1 }, (_, i) => {
        const w = width[0] + ((width[1] - width[0]) * i) / (2 * STEPS);
        return { local: localFlow(rheology, profile, w, depth, where), roof: roofAt(w) };
      });
  const closed = uniform && 'viscosity' in rheology;
  const resistance = closed ? (rheology.viscosity * length) / ends[0].local.section.conductance : 0;

  const flowOf = (pFrom: number, pTo: number, out: Float64Array): void => {
    const { roof } = ends[0];
    if (closed) {
      out[0] = (openingPotential(roof, pFrom) - openingPotential(roof, pTo)) / resistance;
      out[1] = opening(roof, pFrom) / resistance;
      out[2] = -opening(roof, pTo) / resistance;
      return;
    }
    // From the high end: the flow is positive there.
    if (pFrom >= pTo) march(places, length, false, pFrom, pTo, out);
    else {
      march(places, length, true, pTo, pFrom, out);
      const first = out[1];
      out[0] = -out[0];
      out[1] = -out[2];
      out[2] = -first;
    }
  };
  const three = new Float64Array(3);
  const two = new Float64Array(2);
  const pressures = new Float64Array(STEPS + 1);
  return {
    flow: flowOf,
    state(pFrom, pTo) {
      flowOf(pFrom, pTo, three);
      const flow = Math.abs(three[0]);
      const backwards = pFrom < pTo;
      farPressure(places, length, backwards, Math.max(pFrom, pTo), flow, three, pressures);
      let peakShear: number | null = 0;
      let peakVelocity = 0;
      let force = 0;
      let wall = 0;
      let flowing = false;
      for (let i = 0; i <= STEPS; i += 1) {
        const at = uniform ? 0 : 2 * i;
        const { local, roof } = places[backwards && !uniform ? 2 * STEPS - at : at];
        const open = Math.cbrt(opening(roof, pressures[i]));
        local.gradient(flow / open ** 2, two);
        flowing ||= two[0] > local.yieldGradient;
        const { stress, velocity } = local.peaks(two[0]);
        // The wall of a shallow channel bears gradient times depth over two: (G0/open) (h0 open).
        const mean = two[0] * local.section.meanShear;
        const weight = (i === 0 || i === STEPS ? 0.5 : 1) * local.section.perimeter;
        force += weight * mean;
        wall += weight;
        if (stress === null) peakShear = null;
        else if (peakShear !== null) peakShear = Math.max(peakShear, stress * mean);
        peakVelocity = Math.max(peakVelocity, (velocity * flow) / (local.section.area * open));
      }
      return {
        flow: flowing ? Math.sign(pFrom - pTo) * flow : 0,
        flowing,
        peakShear,
        peakVelocity: flowing ? peakVelocity : 0,
        meanShear: force / wall,
        rise: [ends[0].roof.slope * pFrom, ends[1].roof.slope * pTo],
      };
    },
  };
}

/** Whether suction at either end brings the roof so low that the law no longer holds. */
export function roofDown(law: RoofLaw, pFrom: number, pTo: number): boolean {
  return collapsed(law, pFrom) || collapsed(law, pTo);
}

interface Place {
  readonly local: LocalFlow;
  readonly roof: RoofLaw;
}

/** Steps of the fourth-order Runge-Kutta march: within 1e-5 of the closed form where the roof doubles the conductance. */
const STEPS = 12;

const g = new Float64Array(2);
const far = new Float64Array(3);
const found = new Float64Array(2);

/** Flow from the high pressure to the low one, and its derivatives by both, into out[0..2]. */
function march(
  places: readonly Place[],
  length: number,
  backwards: boolean,
  high: number,
  low: number,
  out: Float64Array,
): void {
  if (high === low) {
    // The slope at rest: that of a vanishing flow through the duct as it stands open.
    farPressure(places, length, backwards, high, 0, far);
    out[0] = 0;
    out[1] = far[2] / -far[1];
    out[2] = -1 / -far[1];
    return;
  }
  const fall = (flow: number, o: Float64Array): void => {
    farPressure(places, length, backwards, high, flow, far);
    o[0] = high - far[0];
    o[1] = -far[1];
  };
  const middle = places[places.length >> 1];
  const open = opening(middle.roof, (high + low) / 2);
  middle.local.flow((high - low) / length, g);
  inverse(fall, high - low, g[0] * open, found);
  farPressure(places, length, backwards, high, found[0], far);
  out[0] = found[0];
  out[1] = far[2] / -far[1];
  out[2] = -1 / -far[1];
}

/**
 * Pressure at the far end, its derivative by the flow and by the near pressure, into out[0..2].
 * @param record pressures after every step, STEPS + 1
 */
function farPressure(
  places: readonly Place[],
  length: number,
  backwards: boolean,
  near: number,
  flow: number,
  out: Float64Array,
  record?: Float64Array,
): void {
  const h = length / STEPS;
  const last = places.length - 1;
  let p = near;
  let byFlow = 0;
  let byNear = 1;
  if (record) record[0] = near;
  for (let step = 0; step < STEPS; step += 1) {
    let dp = 0;
    let dFlow = 0;
    let dNear = 0;
    let kp = 0;
    let kf = 0;
    let kn = 0;
    for (let stage = 0; stage < 4; stage += 1) {
      const share = stage === 0 ? 0 : stage === 3 ? 1 : 0.5;
      const at = last === 0 ? 0 : 2 * step + 2 * share;
      const place = places[backwards ? last - at : at];
      rate(place, p + share * h * kp, flow);
      const gf = slopes[1] + slopes[2] * (byFlow + share * h * kf);
      const gn = slopes[2] * (byNear + share * h * kn);
      kp = -slopes[0];
      kf = -gf;
      kn = -gn;
      const weight = (stage === 0 || stage === 3 ? 1 : 2) / 6;
      dp += weight * kp;
      dFlow += weight * kf;
      dNear += weight * kn;
    }
    p += h * dp;
    byFlow += h * dFlow;
    byNear += h * dNear;
    if (record) record[step + 1] = p;
  }
  out[0] = p;
  out[1] = byFlow;
  out[2] = byNear;
}

/** Gradient, and its derivatives by flow and by pressure. */
const slopes = new Float64Array(3);

function rate(place: Place, pressure: number, flow: number): void {
  const factor = opening(place.roof, pressure);
  const open = Math.cbrt(factor);
  const openSlope = (open * openingSlope(place.roof, pressure)) / (3 * factor);
  place.local.gradient(flow / open ** 2, g);
  slopes[0] = g[0] / open;
  slopes[1] = g[1] / open ** 3;
  // d/dp of G0(Q h^-2)/h: both the argument and the divisor fall as the roof rises.
  slopes[2] = (-openSlope / open ** 2) * (g[0] + (2 * g[1] * flow) / open ** 2);
}
