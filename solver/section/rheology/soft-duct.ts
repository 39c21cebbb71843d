import { collapsed, meanOpening, opening, openingSlope, type RoofLaw } from '../roof/roof.ts';
import type { DuctFlowLaw, DuctShape } from './duct-law.ts';
import { inverse } from './inverse.ts';
import type { LocalFlow, Rheology } from './local.ts';

/**
 * A duct under a soft roof. At pressure p the channel is open by the factor `opening(p)` of its rigid
 * conductance, as if its depth were h = h0 opening^(1/3). A Newtonian fluid in a uniform duct has the
 * closed form Q = drop · meanOpening / R. Everything else is marched from the high end to the low one,
 *
 *   dp/dx = −(h0/h) G0(Q (h0/h)²),   G0 the rigid section's gradient for a flow,
 *
 * which is the scaling of a wide shallow channel with its depth for any fluid, and Q found so that the
 * far pressure is met. Where the two are to agree, they do (checked).
 *
 * @param localAt,roofAt the rigid section and the roof at a mask width, m
 */
export function softDuct(
  rheology: Rheology,
  shape: DuctShape,
  localAt: (width: number) => LocalFlow,
  roofAt: (width: number) => RoofLaw,
): DuctFlowLaw {
  const { width, length } = shape;
  const placeAt = (share: number): Place => {
    const w = width[0] + (width[1] - width[0]) * share;
    return { local: localAt(w), roof: roofAt(w) };
  };
  const uniform = width[0] === width[1];
  const count = uniform ? 1 : 2 * STEPS + 1;
  const places = Array.from({ length: count }, (_, i) => placeAt(i / Math.max(1, count - 1)));
  const march: March = { places, backwards: places.toReversed(), length };
  const [{ local, roof }] = places;
  const closed = uniform && 'viscosity' in rheology;
  const resistance = closed ? (rheology.viscosity * length) / local.section.conductance : 0;

  const flowOf = (drop: number, to: number, out: Float64Array): void => {
    if (closed) {
      out[0] = (drop * meanOpening(roof, drop, to)) / resistance;
      out[1] = opening(roof, to + drop) / resistance;
      out[2] = -opening(roof, to) / resistance;
    } else if (drop > 0) marchedFlow(march, march.places, drop, to + drop, out);
    else if (drop < 0) {
      // From the high end: the flow is positive there.
      marchedFlow(march, march.backwards, -drop, to, out);
      const first = out[1];
      out[0] = -out[0];
      out[1] = -out[2];
      out[2] = -first;
    } else atRest(march, to, out);
  };
  const three = new Float64Array(3);
  const two = new Float64Array(2);
  const fallen = new Float64Array(STEPS + 1);
  return {
    flow: flowOf,
    state(pFrom, pTo) {
      flowOf(pFrom - pTo, pTo, three);
      const flow = Math.abs(three[0]);
      const way = pFrom < pTo ? march.backwards : march.places;
      const high = Math.max(pFrom, pTo);
      pressureFall(march, way, high, flow, three, fallen);
      const held = flow === 0 ? Math.abs(pFrom - pTo) / length : 0;
      let peakShear: number | null = 0;
      let peakVelocity = 0;
      let force = 0;
      let wall = 0;
      for (let i = 0; i <= STEPS; i += 1) {
        const place = way[uniform ? 0 : 2 * i];
        const { section } = place.local;
        const open = Math.cbrt(opening(place.roof, high - fallen[i]));
        place.local.gradient(flow / open ** 2, two);
        // Where nothing moves the wall bears what the pressure puts on it, no more.
        const gradient = flow === 0 ? held * open : two[0];
        const { stress, velocity } = place.local.peaks(gradient);
        // The wall of a shallow channel bears gradient times depth over two: (G0/open) (h0 open).
        const mean = gradient * section.meanShear;
        const weight = (i === 0 || i === STEPS ? 0.5 : 1) * section.perimeter;
        force += weight * mean;
        wall += weight;
        if (stress === null) peakShear = null;
        else if (peakShear !== null) peakShear = Math.max(peakShear, stress * mean);
        peakVelocity = Math.max(peakVelocity, (velocity * flow) / (section.area * open));
      }
      const [first, last] = [places[0], places[places.length - 1]];
      return {
        flow: Math.sign(pFrom - pTo) * flow,
        flowing: flow > 0 || local.yieldGradient === 0,
        peakShear,
        peakVelocity,
        meanShear: force / wall,
        rise: [first.roof.slope * pFrom, last.roof.slope * pTo],
        collapsed: collapsed(first.roof, pFrom) || collapsed(last.roof, pTo),
      };
    },
  };
}

interface Place {
  readonly local: LocalFlow;
  readonly roof: RoofLaw;
}

interface March {
  /** One, or at every half step along the duct; and the other way round. */
  readonly places: readonly Place[];
  readonly backwards: readonly Place[];
  readonly length: number;
}

/** Steps of the fourth-order Runge-Kutta march: within 1e-5 of the closed form where the roof doubles the conductance. */
const STEPS = 12;

const g = new Float64Array(2);
const far = new Float64Array(3);
const found = new Float64Array(2);
/** Gradient, and its derivatives by flow and by pressure. */
const slopes = new Float64Array(3);

/** Flow for a drop > 0 from the high pressure, and its derivatives by the high and the low one, into out[0..2]. */
function marchedFlow(
  march: March,
  way: readonly Place[],
  drop: number,
  high: number,
  out: Float64Array,
): void {
  out.fill(0, 0, 3);
  const middle = way[way.length >> 1];
  if (middle.local.yieldGradient > 0) {
    pressureFall(march, way, high, 0, far);
    if (drop <= far[0]) return;
  }
  const fall = (flow: number, o: Float64Array): void => {
    pressureFall(march, way, high, flow, far);
    o[0] = far[0];
    o[1] = far[1];
  };
  middle.local.flow(drop / march.length, g);
  inverse(fall, drop, g[0] * opening(middle.roof, high - drop / 2), found);
  pressureFall(march, way, high, found[0], far);
  // drop = fall(flow, high): d(flow) = (d(high) − d(low) − fall_high d(high)) / fall_flow.
  out[0] = found[0];
  out[1] = (1 - far[2]) / far[1];
  out[2] = -1 / far[1];
}

/** The slopes of a duct without a pressure drop: its parts in series, as open as they are. */
function atRest({ places, length }: March, pressure: number, out: Float64Array): void {
  let sum = 0;
  for (const { local, roof } of places) {
    local.flow(0, g);
    sum += 1 / (g[1] * opening(roof, pressure));
  }
  out[0] = 0;
  out[1] = places.length / (sum * length);
  out[2] = -out[1];
}

/**
 * How far the pressure falls along the way, with the derivatives of that by flow and by the pressure it
 * starts from, into out[0..2].
 * @param record the fall after every step, STEPS + 1
 */
function pressureFall(
  { length }: March,
  way: readonly Place[],
  near: number,
  flow: number,
  out: Float64Array,
  record?: Float64Array,
): void {
  const h = length / STEPS;
  let fall = 0;
  let byFlow = 0;
  let byNear = 0;
  if (record) record[0] = 0;
  for (let step = 0; step < STEPS; step += 1) {
    let rise = 0;
    let riseFlow = 0;
    let riseNear = 0;
    let k = 0;
    let kFlow = 0;
    let kNear = 0;
    for (let stage = 0; stage < 4; stage += 1) {
      const share = stage === 0 ? 0 : stage === 3 ? 1 : 0.5;
      rate(way[way.length === 1 ? 0 : 2 * step + 2 * share], near - fall - share * h * k, flow);
      kFlow = slopes[1] - slopes[2] * (byFlow + share * h * kFlow);
      kNear = slopes[2] * (1 - byNear - share * h * kNear);
      k = slopes[0];
      const weight = (stage === 0 || stage === 3 ? 1 : 2) / 6;
      rise += weight * k;
      riseFlow += weight * kFlow;
      riseNear += weight * kNear;
    }
    fall += h * rise;
    byFlow += h * riseFlow;
    byNear += h * riseNear;
    if (record) record[step + 1] = fall;
  }
  out[0] = fall;
  out[1] = byFlow;
  out[2] = byNear;
}

function rate({ local, roof }: Place, pressure: number, flow: number): void {
  const factor = opening(roof, pressure);
  const open = Math.cbrt(factor);
  const openSlope = (open * openingSlope(roof, pressure)) / (3 * factor);
  local.gradient(flow / open ** 2, g);
  slopes[0] = g[0] / open;
  slopes[1] = g[1] / open ** 3;
  // d/dp of G0(Q h^-2)/h: both the argument and the divisor fall as the roof rises.
  slopes[2] = flow === 0 ? 0 : (-openSlope / open ** 2) * (g[0] + (2 * g[1] * flow) / open ** 2);
}
