import { rectangleConductance } from '../section/rectangle.ts';
import { rectangleAt } from './rectangle-point.ts';
import {
  type HuggingPlace,
  powerOf,
  type Samples,
  type SectionExposure,
  spreadOf,
  WALL_POINTS,
} from './section-exposure.ts';

/** Gauss-Legendre on [0, 1], eight points. */
const POINTS = [
  0.019855071751232, 0.101666761293187, 0.237233795041835, 0.408282678752175, 0.591717321247825,
  0.762766204958165, 0.898333238706813, 0.980144928248768,
];
const WEIGHTS = [
  0.050614268145188, 0.111190517226687, 0.156853322938944, 0.181341891689181, 0.181341891689181,
  0.156853322938944, 0.111190517226687, 0.050614268145188,
];
/** Ends of the panels off the short wall, in short sides; beyond the last, flow is as between plates to 1e-8. */
const PANELS = [0, 0.125, 0.5, 1.25, 3, 6];
/** Panels over half the short side. */
const ACROSS = 4;

/** Width and depth in metres. The largest shear is in the middle of a long wall. */
export function rectangleExposure(width: number, depth: number): SectionExposure {
  const h = Math.min(width, depth);
  const w = Math.max(width, depth);
  const samples = quarterSamples(w, h);
  const out = new Float64Array(3);
  /** At a distance from the middle of the long wall. */
  const offWall = (distance: number): void => rectangleAt(w, h, 0, h / 2 - distance, out);
  return {
    area: width * depth,
    conductance: rectangleConductance(width, depth),
    clearance: h,
    ...spreadOf(samples),
    shearPower: (exponent) => 4 * powerOf(samples, exponent),
    hugging(diameter): HuggingPlace | null {
      if (!(diameter <= h)) return null;
      const between = Float64Array.from(WALL_POINTS, (share) => {
        offWall((share * diameter) / 2);
        return Math.abs(out[2]);
      });
      offWall(diameter / 2);
      return { velocity: out[0], shear: Math.abs(out[2]), between };
    },
  };
}

/** Points over a quarter of the rectangle w × h, w ≥ h. */
function quarterSamples(w: number, h: number): Samples {
  const x: number[] = [];
  const weightX: number[] = [];
  for (let p = 1; p < PANELS.length; p += 1) {
    const from = PANELS[p - 1] * h;
    const to = Math.min(PANELS[p] * h, w / 2);
    if (to <= from) break;
    for (let k = 0; k < POINTS.length; k += 1) {
      x.push(w / 2 - from - (to - from) * POINTS[k]);
      weightX.push((to - from) * WEIGHTS[k]);
    }
  }
  const rest = w / 2 - PANELS[PANELS.length - 1] * h;
  if (rest > 0) {
    x.push(0);
    weightX.push(rest);
  }
  const rows = ACROSS * POINTS.length;
  const count = x.length * rows;
  const area = new Float64Array(count);
  const velocity = new Float64Array(count);
  const shear = new Float64Array(count);
  const reach = new Float64Array(count);
  const out = new Float64Array(3);
  let i = 0;
  for (let column = 0; column < x.length; column += 1) {
    for (let row = 0; row < rows; row += 1) {
      const y = ((Math.floor(row / 8) + POINTS[row % 8]) * h) / (2 * ACROSS);
      rectangleAt(w, h, x[column], y, out);
      const rowHeight = (WEIGHTS[row % 8] * h) / (2 * ACROSS);
      area[i] = weightX[column] * rowHeight;
      velocity[i] = out[0];
      shear[i] = Math.hypot(out[1], out[2]);
      reach[i] = (Math.abs(out[1]) * weightX[column] + Math.abs(out[2]) * rowHeight) / 2;
      i += 1;
    }
  }
  return { area, velocity, shear, reach };
}
