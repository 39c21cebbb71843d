import type { FluidSpec } from '../fluid/spec.ts';
import type { Profile } from '../section/profile.ts';
import type { Acceptance, Process } from './making.ts';
import type { Assay, Pump, Rating, Reservoir } from './running.ts';

/**
 * The chip: the one thing that is edited. Plan lengths and depths are whole nanometres, so nothing
 * drifts and masks are exact; everything else is SI. Immutable: an edit makes a new chip that shares
 * what did not change, so identity (===) tells what did.
 */

/** Whole nanometres. */
export type Nm = number;
export type Point = readonly [Nm, Nm];
export type LengthUnit = 'nm' | 'um' | 'mm' | 'cm' | 'm';

export interface Chip {
  readonly name: string;
  /** A caption or remark kept with the chip; '' where none. */
  readonly note: string;
  /** The unit in which the description gives plan lengths; kept so that it is written back alike. */
  readonly lengthUnit: LengthUnit;
  readonly outline: { readonly width: Nm; readonly height: Nm };
  readonly layers: readonly Layer[];
  readonly channels: readonly Channel[];
  readonly chambers: readonly Chamber[];
  readonly vias: readonly Via[];
  readonly ports: readonly Port[];
  readonly fluid: FluidSpec;
  readonly targets: readonly Target[];
  readonly limits: readonly Limit[];
  /** How it is made; absent where that is not said. */
  readonly process?: Process;
  /** Findings taken as they are; absent rather than empty. */
  readonly accepted?: readonly Acceptance[];
  /** What chip and fittings bear, and how long the assay takes; absent where not said. */
  readonly rating?: Rating;
  readonly assay?: Assay;
  /** What is to stay clear; absent rather than empty. */
  readonly keepOuts?: readonly KeepOut[];
}

/** A tolerance: a share of the nominal value, or a length in nanometres. */
export type Tolerance = { readonly share: number } | { readonly length: Nm };

export interface Layer {
  readonly id: string;
  readonly depth: Nm;
  readonly profile: Profile;
  /** Radius that fabrication gives re-entrant plan corners; 0 is sharp, where no peak can be quoted. */
  readonly fillet: Nm;
  /**
   * How far depth and widths may be off. The depth's error is one for the layer, a width's each channel's own,
   * but for `common`: the share of the width's tolerance that all channels of the layer have alike (0 where absent).
   */
  readonly tolerance?: { readonly depth?: Tolerance; readonly width?: Tolerance; readonly common?: number };
  readonly roof?: Roof;
}

/** A soft lid. */
export interface Roof {
  /** Young's modulus, Pa */
  readonly modulus: number;
  /** m */
  readonly thickness: number;
  readonly poisson: number;
  /** Chosen by thickness where absent. */
  readonly law?: 'thick' | 'plate';
  /** The fitted factor of the thick law. */
  readonly constant?: number;
}

export interface Channel {
  readonly id: string;
  readonly layer: string;
  /** Centreline, at least two different points. */
  readonly path: readonly Point[];
  /** Mask width at the first and at the last point; linear along the length between. */
  readonly width: readonly [Nm, Nm];
  /** Radius of the centreline at inner vertices; 0 is a mitred corner. */
  readonly bendRadius: Nm;
  /** Its own depth, where it was measured to differ from its layer's. */
  readonly depth?: Nm;
  /** Of its own depth and width, in place of its layer's; the error is then its own too. */
  readonly tolerance?: { readonly depth?: Tolerance; readonly width?: Tolerance };
}

export interface Chamber {
  readonly id: string;
  readonly layer: string;
  /** A simple polygon, not closed by repetition, either direction. */
  readonly outline: readonly Point[];
}

/** A part of the plan that nothing may reach into: under a clamp, a window, a sensor. No shape of the mask. */
export interface KeepOut {
  readonly id: string;
  /** The one layer that is to stay clear, and the holes that lead to it; all of them where absent. */
  readonly layer?: string;
  /** A simple polygon, as of a chamber. */
  readonly outline: readonly Point[];
  /** How far what is drawn must stay off the outline. */
  readonly clearance: Nm;
  /** What it is for; absent rather than ''. */
  readonly note?: string;
}

export interface Via {
  readonly id: string;
  readonly at: Point;
  readonly layers: readonly [string, string];
  readonly diameter: Nm;
}

export interface Port {
  readonly id: string;
  readonly at: Point;
  readonly layer: string;
  /** Hole; 0 puts the port at the end of the centreline itself. */
  readonly diameter: Nm;
  readonly drive: Drive;
  /** In series, from the outside to the chip; metres. */
  readonly tubing: readonly { readonly bore: number; readonly length: number }[];
  /** What drives the port, and the vessel that it draws from or fills, where that is said. */
  readonly pump?: Pump;
  readonly reservoir?: Reservoir;
}

export type Drive =
  /** Gauge, Pa */
  | { readonly kind: 'pressure'; readonly pressure: number }
  /** m^3/s, into the chip positive */
  | { readonly kind: 'flow'; readonly flow: number }
  /** Height of a reservoir's free surface above the chip, m */
  | { readonly kind: 'head'; readonly head: number }
  | { readonly kind: 'closed' };

/** What the designer wants: `share` of the total that enters the chip, or `flow` (m^3/s), `within` a share. */
export type Target = ({ readonly port: string } | { readonly channel: string }) &
  ({ readonly share: number } | { readonly flow: number }) & { readonly within: number };

export interface LimitPlace {
  readonly name: string;
  /** An id (of a layer too), or a route from port to port; the whole chip where absent. */
  readonly where?: string | readonly [string, string];
  /** m; with it the wall-hugging path is judged too. */
  readonly cellDiameter?: number;
}
export type Limit = LimitPlace &
  (
    | { readonly shear: number }
    | { readonly floor: readonly [number, number]; readonly area: number }
    /** [time s, stress Pa], times increasing. */
    | { readonly curve: readonly (readonly [number, number])[] }
    | {
        readonly law: { readonly constant: number; readonly stress: number; readonly time: number };
        /** Share, 0 to 1. */
        readonly damage: number;
        readonly passes: number;
      }
  );
