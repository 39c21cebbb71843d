/**
 * What a section does to what flows through it, free of flow and fluid: velocity per unit G/µ (m²), shear
 * stress per unit G (m), G the pressure gradient. Where a fluid thins, the stresses are taken to be those of
 * a viscous one under the same gradient, which is exact for a round bore and between plates.
 */
export interface SectionExposure {
  /** m² */
  readonly area: number;
  /** m⁴: Q = conductance G/µ */
  readonly conductance: number;
  /** Diameter of the largest ball that fits in, m. */
  readonly clearance: number;
  /** Velocity over the mean below which the slowest hundredth of the flow moves, and above which the fastest. */
  readonly slow: number;
  readonly fast: number;
  /** Shear that each of `LEVELS` equal parts of the area bears, rising. */
  readonly levels: Float64Array;
  /** ∫ shear^γ dA, m^(γ + 2). */
  shearPower(exponent: number): number;
  /** What a ball meets at the wall where shear is largest; null where it does not fit in. */
  hugging(diameter: number): HuggingPlace | null;
}

/** The place of a ball's centre, one radius off the wall. */
export interface HuggingPlace {
  readonly velocity: number;
  readonly shear: number;
  /** Shear at the Gauss points `WALL_POINTS` of the way from the wall to the centre. */
  readonly between: Float64Array;
}

/** Equal parts of the area by their shear. */
export const LEVELS = 24;

/** Gauss-Legendre on [0, 1], six points. */
export const WALL_POINTS = [
  0.033765242898424, 0.169395306766868, 0.380690406958402, 0.619309593041598, 0.830604693233132,
  0.966234757101576,
];
export const WALL_WEIGHTS = [
  0.085662246189585, 0.180380786524069, 0.233956967286346, 0.233956967286346, 0.180380786524069,
  0.085662246189585,
];

/** Points spread over a section (or a part that stands for the whole), each with its share of the area. */
export interface Samples {
  readonly area: Float64Array;
  readonly velocity: Float64Array;
  readonly shear: Float64Array;
  /** How far velocity differs from its own within the part that a point stands for. */
  readonly reach: Float64Array;
}

/** The hundredth at either end of the flow. */
const PART = 0.01;

/** Speeds and stresses by their parts of flow and area, from sample points. */
export function spreadOf(samples: Samples): Pick<SectionExposure, 'slow' | 'fast' | 'levels'> {
  const { area, velocity, shear } = samples;
  let flow = 0;
  let whole = 0;
  let most = 0;
  for (let i = 0; i < area.length; i += 1) {
    flow += area[i] * velocity[i];
    whole += area[i];
    most = Math.max(most, velocity[i]);
  }
  const mean = flow / whole;
  const speedAt = (part: number): number => {
    let low = 0;
    let high = 1.1 * most;
    for (let step = 0; step < 40; step += 1) {
      const middle = (low + high) / 2;
      if (slowerFlow(samples, middle) < part * flow) low = middle;
      else high = middle;
    }
    return (low + high) / 2;
  };
  return {
    slow: speedAt(PART) / mean,
    fast: Math.min(most, speedAt(1 - PART)) / mean,
    levels: levelsOf(shear, area, whole),
  };
}

/** Flow that moves slower than a speed, each point standing for the speeds about its own. */
function slowerFlow({ area, velocity, reach }: Samples, speed: number): number {
  let sum = 0;
  for (let i = 0; i < area.length; i += 1) {
    const least = Math.max(0, velocity[i] - reach[i]);
    const most = velocity[i] + reach[i];
    if (speed >= most) sum += area[i] * velocity[i];
    else if (speed > least) sum += (area[i] * (speed * speed - least * least)) / (2 * (most - least));
  }
  return sum;
}

/** The shear in the middle of each of `LEVELS` equal parts of the area. */
function levelsOf(shear: Float64Array, area: Float64Array, whole: number): Float64Array {
  const order = new Uint32Array(shear.length);
  for (let i = 0; i < order.length; i += 1) order[i] = i;
  order.sort((a, b) => shear[a] - shear[b]);
  const levels = new Float64Array(LEVELS);
  let passed = 0;
  let i = 0;
  for (let k = 0; k < LEVELS; k += 1) {
    const wanted = ((k + 0.5) / LEVELS) * whole;
    while (i < order.length - 1 && passed + area[order[i]] < wanted) {
      passed += area[order[i]];
      i += 1;
    }
    levels[k] = shear[order[i]];
  }
  return levels;
}

export function powerOf({ area, shear }: Samples, exponent: number): number {
  let sum = 0;
  for (let i = 0; i < area.length; i += 1) sum += area[i] * shear[i] ** exponent;
  return sum;
}
