import type { ShearModel } from '../../fluid/spec.ts';
import type { Profile } from '../profile.ts';
import type { Section } from '../section.ts';
import { sectionOf } from '../section-of.ts';
import { thinSection } from './thin-section.ts';

/** What flows, as far as a duct needs to know: one viscosity, or one that depends on the shear rate. */
export type Rheology = { readonly viscosity: number } | { readonly shear: ShearModel };

/** A place along a duct, rigid: what gradient drives what flow, and what the flow does to the wall. */
export interface LocalFlow {
  readonly section: Section;
  /** Pa/m below which nothing flows; 0 without a yield stress. */
  readonly yieldGradient: number;
  /** A gradient (Pa/m) in the middle of what the fluid is made for, about which tables are laid. */
  readonly ordinaryGradient: number;
  /** Flow (m³/s) under a gradient >= 0 (Pa/m), and its derivative. */
  flow(gradient: number, out: Float64Array): void;
  /** Gradient of a flow > 0, and its derivative; the yield gradient for none. */
  gradient(flow: number, out: Float64Array): void;
  /** Peak over mean wall stress (null where unbounded) and over mean velocity. */
  peaks(gradient: number): { readonly stress: number | null; readonly velocity: number };
}

export function localFlow(
  rheology: Rheology,
  profile: Profile,
  width: number,
  depth: number,
  where = '',
): LocalFlow {
  if ('shear' in rheology) return thinSection(rheology.shear, profile, width, depth, where);
  const section = sectionOf(profile, width, depth, where);
  const conductance = section.conductance / rheology.viscosity;
  const peaks = {
    stress: section.peakShear === null ? null : section.peakShear / section.meanShear,
    velocity: section.peakVelocity,
  };
  return {
    section,
    yieldGradient: 0,
    ordinaryGradient: 1e4,
    flow(gradient, out) {
      out[0] = conductance * gradient;
      out[1] = conductance;
    },
    gradient(flow, out) {
      out[0] = flow / conductance;
      out[1] = 1 / conductance;
    },
    peaks: () => peaks,
  };
}
