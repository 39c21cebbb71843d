import { type Section, sectionFrom } from './section.ts';

/** Depth over width of an equilateral triangle. */
export const EQUILATERAL = Math.sqrt(3) / 2;

/**
 * The equilateral triangle of side s and height H = s√3/2, exactly: u = (G/µH) d₁d₂d₃ with the
 * distances d from the three sides; shear on a side d₂d₃/H. Source: F.M. White, Viscous Fluid Flow,
 * 3rd ed. 2006, sec. 3-3. Lid up, tip on the floor.
 */
export function equilateralSection(side: number): Section {
  const height = EQUILATERAL * side;
  return sectionFrom({
    area: (side * height) / 2,
    perimeter: 3 * side,
    width: side,
    depth: height,
    conductance: (Math.sqrt(3) * side ** 4) / 320,
    peakVelocity: 20 / 9,
    peakAt: [0, (2 * height) / 3],
    peakShear: height / 4,
    peakShearAt: [0, height],
    floorShear: 0,
    sideShear: height / 4,
    error: 0,
    shearError: 0,
  });
}
