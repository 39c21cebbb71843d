import type { ShearModel } from '../../fluid/spec.ts';
import type { Profile } from '../profile.ts';
import { sectionOf } from '../section-of.ts';
import { inverse, type Rising } from './inverse.ts';
import type { LocalFlow } from './local.ts';
import { resampled } from './resampled.ts';
import { type ScaledFluid, scaledFluid, stressGain } from './scaled.ts';
import { STEP, stepOf, tableEnds } from './shape-table.ts';
import { type ShapeMix, type ShapeTables, shapeTables } from './shapes.ts';

const tables = new Map<string, ShapeTables>();
/** Tables are kept for this many different fluids. */
const FLUIDS = 4;

function tablesOf(fluid: ScaledFluid): ShapeTables {
  const known = tables.get(fluid.key);
  if (known) return known;
  const oldest = tables.keys().next();
  if (tables.size >= FLUIDS && !oldest.done) tables.delete(oldest.value);
  const shapes = shapeTables(fluid);
  tables.set(fluid.key, shapes);
  return shapes;
}

/**
 * Flow of a shear-thinning fluid through one section under a pressure gradient:
 *
 *   Q = K G f / viscosity,   f the fluidity at the mean wall stress G A / P,   K the Newtonian conductance,
 *
 * f from a table of solved flows (cubic with exact slopes, kept monotone; within 3e-4 of a solve).
 *
 * @param width mask width and depth, m
 */
export function thinSection(
  shear: ShearModel,
  profile: Profile,
  width: number,
  depth: number,
  where = '',
): LocalFlow {
  const section = sectionOf(profile, width, depth, where);
  const fluid = scaledFluid(shear);
  const { mix, strip, plates } = tablesOf(fluid).partsOf(profile, width, depth, where);
  // The strip between plates, and what is left of the section without it.
  const gap = Math.min(section.width, section.depth);
  const stripConductance = (strip * gap ** 3) / 12;
  const conductance = section.conductance - stripConductance;
  const radius = (section.area - strip * gap) / (section.perimeter - 2 * strip);
  const main = partFlow(fluid, mix, conductance, radius);
  const side = strip > 0 ? partFlow(fluid, plates, stripConductance, gap / 2) : null;
  const yieldGradient = Math.min(main.yieldGradient, side?.yieldGradient ?? Number.POSITIVE_INFINITY);
  const two = new Float64Array(2);

  const direct: Rising = (gradient, out) => {
    main.flow(gradient, out);
    if (!side) return;
    side.flow(gradient, two);
    out[0] += two[0];
    out[1] += two[1];
  };
  const ordinaryGradient = fluid.stress / radius;
  const flow = resampled(direct, yieldGradient, ordinaryGradient);
  return {
    section,
    yieldGradient,
    ordinaryGradient,
    flow,
    gradient(wanted, out) {
      if (wanted > 0) inverse(flow, wanted, (wanted * fluid.viscosity) / section.conductance, out);
      else {
        flow(yieldGradient, out);
        out[0] = yieldGradient;
        out[1] = 1 / out[1];
      }
    },
    peaks(gradient) {
      const { stress, velocity } = main.peaks(gradient);
      main.flow(gradient, two);
      const own = two[0];
      flow(gradient, two);
      // Greatest velocity over the mean of the part, then over the mean of the whole.
      const share = (section.conductance / conductance) * (own > 0 ? own / two[0] : 1);
      return {
        stress: section.peakShear === null ? null : (section.peakShear / section.meanShear) * stress,
        velocity: section.peakVelocity * velocity * share,
      };
    },
  };
}

interface PartFlow {
  readonly yieldGradient: number;
  flow(gradient: number, out: Float64Array): void;
  /** Peak over mean wall stress and velocity, each over the same of a Newtonian fluid. */
  peaks(gradient: number): { readonly stress: number; readonly velocity: number };
}

/** @param conductance Newtonian, m⁴; `radius` area over perimeter, m */
function partFlow(fluid: ScaledFluid, mix: ShapeMix, conductance: number, radius: number): PartFlow {
  const fluidity = mixedFluidity(fluid, mix);
  const yieldStress = mixed(mix, (table) => table.yieldStress);
  const perGradient = radius / fluid.stress;
  const unit = conductance / fluid.viscosity;
  const at = new Float64Array(2);
  const [low, high] = tableEnds(fluid);
  return {
    yieldGradient: yieldStress / perGradient,
    flow(gradient, out) {
      fluidity(gradient * perGradient, at);
      out[0] = unit * gradient * at[0];
      out[1] = unit * at[0] * (1 + at[1]);
    },
    peaks(gradient) {
      const x = stepOf(fluid, gradient * perGradient, yieldStress);
      const inside = Number.isNaN(x) ? low : Math.min(Math.max(x, low), high);
      const i = Math.min(Math.floor(inside), Math.max(low, high - 1));
      const s = low === high ? 0 : inside - i;
      const value = (k: number, of: 'peakStress' | 'peakVelocity'): number =>
        mixed(mix, (table) => table.node(k)[of]);
      const between = (of: 'peakStress' | 'peakVelocity'): number =>
        s === 0 ? value(i, of) : (1 - s) * value(i, of) + s * value(i + 1, of);
      return { stress: between('peakStress'), velocity: between('peakVelocity') };
    },
  };
}

function mixed(mix: ShapeMix, value: (table: ShapeMix[number]['table']) => number): number {
  let sum = 0;
  for (const { table, share } of mix) sum += share * value(table);
  return sum;
}

/** Fluidity at a mean wall stress (scaled), and d ln f / d ln stress, into out[0] and out[1]. */
function mixedFluidity(fluid: ScaledFluid, mix: ShapeMix): (stress: number, out: Float64Array) => void {
  const { model } = fluid;
  const [low, high] = tableEnds(fluid);
  const yieldStress = mixed(mix, (table) => table.yieldStress);
  if (model.kind === 'power-law') {
    const unit = Math.exp(mixed(mix, (table) => table.node(0).logFluidity));
    const power = 1 / model.index - 1;
    return (stress, out) => {
      out[0] = unit * stress ** power;
      out[1] = power;
    };
  }
  // Values and slopes at the steps that have been asked for.
  const value = new Float64Array(high - low + 1).fill(Number.NaN);
  const slope = new Float64Array(high - low + 1);
  const prepare = (k: number): void => {
    if (!Number.isNaN(value[k - low])) return;
    value[k - low] = mixed(mix, (table) => table.node(k).logFluidity);
    slope[k - low] = Math.max(
      0,
      mixed(mix, (table) => table.node(k).slope),
    );
  };
  const last = (k: number): number => {
    prepare(k);
    return value[k - low];
  };
  return (stress, out) => {
    if (!(stress > yieldStress)) {
      out[0] = model.kind === 'casson' ? 0 : 1;
      out[1] = 0;
      return;
    }
    const x = stepOf(fluid, stress, yieldStress);
    // d(steps) / d ln(stress), so that slopes by the step become slopes by the stress.
    let log: number;
    let perStep: number;
    if (x <= low) {
      // Carreau: its viscosity at rest. Casson: the plug fills the section, flow rises as the cube of the excess.
      perStep = model.kind === 'casson' ? 3 * STEP : 0;
      log = last(low) + perStep * (x - low);
    } else if (x >= high) {
      // Carreau: the last slope goes on. Casson: Newtonian as the root of yield over stress falls.
      const end = last(high);
      const fall = model.kind === 'casson' ? Math.exp((-STEP * (x - high)) / 2) : 1;
      log = model.kind === 'casson' ? end * fall : end + slope[high - low] * STEP * (x - high);
      perStep = model.kind === 'casson' ? (-end * fall * STEP) / 2 : slope[high - low] * STEP;
    } else {
      const k = Math.floor(x);
      prepare(k);
      prepare(k + 1);
      const rise = value[k + 1 - low] - value[k - low];
      // Monotone if no slope is above three times the chord (Fritsch and Carlson 1980, SIAM J. Numer. Anal. 17, 238).
      const m0 = Math.min(slope[k - low] * STEP, 3 * Math.max(rise, 0));
      const m1 = Math.min(slope[k + 1 - low] * STEP, 3 * Math.max(rise, 0));
      const s = x - k;
      const r = 1 - s;
      log = value[k - low] + s * s * (3 - 2 * s) * rise + s * r * (r * m0 - s * m1);
      perStep = 6 * s * r * rise + r * (1 - 3 * s) * m0 + s * (3 * s - 2) * m1;
    }
    out[0] = Math.exp(log);
    out[1] = perStep / (STEP * stressGain(model, x * STEP));
  };
}
