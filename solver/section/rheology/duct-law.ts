import { apparentViscosity } from '../../fluid/shear.ts';
import type { Profile } from '../profile.ts';
import { roofLaw, type SoftRoof } from '../roof/roof.ts';
import { type LocalFlow, localFlow, type Rheology } from './local.ts';
import { type RigidTaper, rigidDuct, rigidTaper } from './rigid-duct.ts';
import { softDuct } from './soft-duct.ts';

/**
 * What the network needs of a duct whose flow is not proportional to its pressure drop: the flow for
 * any pressures at its two ends, rising with the first and falling with the second (or staying at
 * nothing below a yield stress), without jumps.
 */
export interface DuctFlowLaw {
  /**
   * @param drop Pa, first end less second
   * @param to Pa, gauge, at the second end; only a soft roof minds
   * @param out receives m³/s from the first end to the second, and its derivatives by the pressures of the first
   *   and of the second, m³/(s Pa)
   */
  flow(drop: number, to: number, out: Float64Array): void;
  /** What the flow does at these end pressures, Pa. */
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
  /** Whether suction brings a soft roof so near to the floor that its law no longer holds. */
  readonly collapsed: boolean;
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

/** Makes laws for the ducts of one fluid; ducts of equal sections share what was solved for them. */
export interface DuctLaws {
  /** @param where what to call the duct in a `Problem` */
  law(shape: DuctShape, where?: string): DuctFlowLaw;
}

export function ductLaws(rheology: Rheology): DuctLaws {
  const locals = new Map<string, LocalFlow>();
  const tapers = new Map<string, RigidTaper>();
  const localOf = (profile: Profile, width: number, depth: number, where: string): LocalFlow =>
    remembered(locals, `${profileKey(profile)} ${depth} ${width}`, () =>
      localFlow(rheology, profile, width, depth, where),
    );
  return {
    law(shape, where = '') {
      const { profile, width, depth, length, roof } = shape;
      if (!(length > 0)) throw new RangeError(`duct of length ${length}`);
      const at = (w: number): LocalFlow => localOf(profile, w, depth, where);
      if (roof) return softDuct(rheology, shape, at, (w) => roofLaw(roof, w, depth, where));
      const taper = remembered(tapers, `${profileKey(profile)} ${depth} ${width}`, () =>
        rigidTaper(width, at),
      );
      return rigidDuct(taper, length);
    },
  };
}

/** More different sections than a chip has, less than memory minds. */
const MOST_KEPT = 5000;

function remembered<T>(kept: Map<string, T>, key: string, make: () => T): T {
  const known = kept.get(key);
  if (known !== undefined) return known;
  const made = make();
  if (kept.size >= MOST_KEPT) kept.clear();
  kept.set(key, made);
  return made;
}

const profileKeys = new WeakMap<Profile, string>();

/** A measured outline may have thousands of points: its text is made once. */
function profileKey(profile: Profile): string {
  const key = profileKeys.get(profile) ?? JSON.stringify(profile);
  profileKeys.set(profile, key);
  return key;
}

/** Shear rate of an ordinary channel, 1/s. */
const ORDINARY_RATE = 100;

/** One viscosity (Pa s) that is near enough to start a search from. */
export function ordinaryViscosity(rheology: Rheology): number {
  return 'viscosity' in rheology ? rheology.viscosity : apparentViscosity(rheology.shear, ORDINARY_RATE);
}
