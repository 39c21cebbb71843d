import type { Finding } from '../problem/finding.ts';

/** The result in the fixed exchange form, version 1. SI throughout; null where something is not defined. */
export interface Result {
  readonly format: 'channelwright-result';
  readonly version: 1;
  readonly chip: string;
  readonly status: 'solved';
  readonly junctions: 'solved' | 'ideal' | 'mixed';
  readonly fluid: { readonly viscosity: number | null; readonly density: number };
  readonly ports: readonly PortResult[];
  readonly channels: readonly ChannelResult[];
  readonly cells: readonly CellResult[];
  readonly routes: readonly RouteResult[];
  readonly targets: readonly TargetResult[];
  readonly limits: readonly LimitResult[];
  /** Of every port that is driven. */
  readonly pumps?: readonly PumpResult[];
  /** Where reservoirs empty over the assay. */
  readonly drift?: DriftResult;
  readonly balance: {
    readonly conservationResidual: number;
    readonly powerIn: number;
    readonly dissipation: number;
  };
  /** How far the numbers may be off, as far as the solver knows; absent where it cannot be said. */
  readonly bands?: Bands;
  /** The widest that the tolerances of making do; absent where none are given. */
  readonly making?: MakingOfChip;
  readonly findings: readonly Finding[];
}

/**
 * Relative errors, the worst of the chip: to first order, every resistance and junction off by its own
 * error in the direction that harms most. Tolerances of making are not in it: those are `Making`.
 */
export interface Bands {
  /** Of the share of the flow that a port takes. */
  readonly share: number;
  /** Of the flow at a port. */
  readonly flow: number;
  /** Of peak wall shear. */
  readonly shear: number;
  /** Of the pressure that drives a given flow. */
  readonly pressure: number;
}

/** What the tolerances of making do to a figure, relative to it and to first order. */
export interface Making {
  /** Every tolerance used up, each in the direction that harms most. */
  readonly worst: number;
  /** Root of the sum of squares of independent errors: as likely to hold as the tolerances are. */
  readonly likely: number;
  /** What does most of it, and its part of the square of `likely`; absent where nothing does. */
  readonly chief?: {
    readonly what: 'depth' | 'width';
    /** A layer where it is off alike all over it, else one channel. */
    readonly of: 'layer' | 'channel';
    readonly id: string;
    readonly part: number;
  };
}

export interface MakingOfPort {
  readonly flow: Making;
  readonly share: Making;
  /** At the chip's side of the tubing, where a flow is imposed. */
  readonly pressure?: Making;
}

export interface MakingOfChip {
  readonly share: Making;
  readonly flow: Making;
  readonly shear: Making;
  readonly pressure: Making;
}

export interface PortResult {
  readonly id: string;
  /** Pa at the chip's side of the tubing. */
  readonly pressure: number;
  /** m^3/s into the chip; null where below what can be resolved. */
  readonly flow: number | null;
  /** Of the total that enters the chip. */
  readonly share: number | null;
  /** Relative errors of flow and share, as `Bands`. */
  readonly band?: { readonly flow: number; readonly share: number };
  readonly making?: MakingOfPort;
}

export interface ChannelResult {
  readonly id: string;
  readonly pieces: readonly PieceResult[];
}

export interface PieceResult {
  /** "port:in", "junction:3", "chamber:well", "via:v1", "end:2" (a dead end), "bend:4", "step:5" */
  readonly from: string;
  readonly to: string;
  readonly length: number;
  readonly resistance: number;
  /** Positive along the channel's path. */
  readonly flow: number | null;
  readonly pressureDrop: number;
  readonly meanVelocity: number | null;
  readonly peakVelocity: number | null;
  readonly reynolds: number | null;
  readonly peakWallShear: number | null;
  readonly meanWallShear: number | null;
  readonly residenceTime: number | null;
  /** Distances along the channel at which the piece starts and stops, m. */
  readonly along?: readonly [number, number];
  /** Relative error of the resistance as the section solve knows it. */
  readonly accuracy?: number;
  /** Of its flow, of the share that is of all that enters, and of peak wall shear. */
  readonly making?: { readonly flow: Making; readonly share: Making; readonly shear: Making };
  /**
   * Relative errors of its flow, of its share of all that enters, and of its wall shear, as `Bands`; absent in
   * large chips, where those of the chip stand for all.
   */
  readonly band?: { readonly flow: number; readonly share: number; readonly shear: number };
}

export interface CellResult {
  readonly id: string;
  readonly kind: string;
  readonly at: readonly [number, number];
  /** Names of the pieces (or "port:in") at its faces, in the order of the port matrix. */
  readonly faces: readonly string[];
  /** m^3/s/Pa: flow from the channel at face i into the cell, per unit pressure on face j. */
  readonly portMatrix: readonly (readonly number[])[];
  readonly peakWallShear: number | null;
  readonly peakAt: readonly [number, number] | null;
  /** Bound of the relative error of the port matrix; 1 where the cell is not solved and counts as ideal. */
  readonly accuracy: number;
  /** Pressure at each face, Pa. */
  readonly pressures?: readonly number[];
  /** Bound of the relative error of the peak, where there is one. */
  readonly peakError?: number;
  /** Of the peak, as of the channels around the cell. */
  readonly making?: Making;
  /** Relative error of the peak, flows around it included; absent as for pieces. */
  readonly band?: { readonly shear: number };
  /** Where limits are given: the fastest stretching inside, and viscous dissipation per volume, W/m^3. */
  readonly stretch?: StretchResult;
  readonly dissipation?: { readonly mean: number; readonly peak: number | null };
}

/** All that goes from one inlet to one outlet, whichever way; junctions divide what comes in by the flows out. */
export interface RouteResult {
  readonly from: string;
  readonly to: string;
  /** Of the total that enters the chip. */
  readonly share: number;
  /**
   * Relative errors, as `Bands`: of its share, of its times, of its peak wall shear, and of what a cell along the
   * wall meets, where paths through junctions were followed in a pattern of flow rounded by a few per cent.
   */
  readonly band?: {
    readonly share: number;
    readonly time: number;
    readonly shear: number;
    readonly wall: number;
  };
  /** Mean over the flow. */
  readonly residenceTime: number | null;
  /** What the fastest hundredth of the flow stays below, and the slowest above, s. */
  readonly fastest?: number;
  readonly slowest?: number;
  readonly peakWallShear: number | null;
  /** Piece or cell of that peak; with no peak, where it is unbounded. */
  readonly peakAt?: string;
  /** Where fluid is pulled apart fastest: rate (1/s) and scalar stress of the full rate of strain (Pa) there. */
  readonly stretch?: StretchResult & { readonly where: string };
  /** Of the path that carries most: its share of the route's flow, and what it crosses, with time and pressure behind. */
  readonly pathShare?: number;
  readonly path?: readonly { readonly name: string; readonly time: number; readonly pressure: number }[];
  /** A ball along the wall, one for each cell diameter that limits name; the first is also `wallHugging`. */
  readonly wallHugging?: WallHuggingResult;
  readonly wallHuggings?: readonly WallHuggingResult[];
  /** Shares, by law limits that cover the route. */
  readonly damage: readonly {
    readonly limit: string;
    readonly mean: number | null;
    readonly wallHugging: number | null;
    /** Relative error of both, by those of stress and time; the law’s own is another matter. */
    readonly band?: number;
  }[];
}

/** null where the cell does not fit through. */
export interface WallHuggingResult {
  readonly cellDiameter: number;
  readonly residenceTime: number | null;
  readonly peakShear: number | null;
}

export interface StretchResult {
  /** Rate at which a line along the flow grows, 1/s. */
  readonly rate: number;
  /** µ √(2 e:e), Pa */
  readonly stress: number;
  readonly at: readonly [number, number];
}

/** What a driven port asks of what stands behind it. */
export interface PumpResult {
  readonly port: string;
  /** Pa at the far end of the tubing, and m^3/s into the chip. */
  readonly pressure: number;
  readonly flow: number;
  /** What the pump can do, as the chip states it. */
  readonly ratedPressure?: number;
  readonly ratedFlow?: number;
  /** Of a syringe, m/s. */
  readonly plungerSpeed?: number;
  /** s until what it holds is gone (or full); null where that is not stated or nothing flows. */
  readonly runTime: number | null;
  /** null where nothing is stated that it could be judged by. */
  readonly met: boolean | null;
}

/** The end of the assay, when reservoirs have emptied and filled. */
export interface DriftResult {
  readonly time: number;
  /** Heads at start and end, m. */
  readonly levels: readonly { readonly port: string; readonly from: number; readonly to: number }[];
  /** Flow and share at the end, and by how much the share changed. */
  readonly ports: readonly {
    readonly port: string;
    readonly flow: number;
    readonly share: number | null;
    readonly drift: number | null;
  }[];
}

export interface TargetResult {
  readonly port?: string;
  readonly channel?: string;
  readonly wanted: number;
  readonly got: number | null;
  readonly met: boolean;
  /** Of `got`. */
  readonly making?: Making;
  /** Relative error of `got`, as `Bands`. */
  readonly band?: number;
}

export interface LimitResult {
  readonly name: string;
  readonly limit: number | null;
  readonly worst: number | null;
  /** Relative error of `worst`, as `Bands`; of stresses, and of damage by a law. */
  readonly band?: number;
  readonly where: string;
  /** null where it could not be judged; a finding says why. */
  readonly met: boolean | null;
  /** Route on which the worst was found, where the limit is one of routes. */
  readonly route?: readonly [string, string];
  /** Whether fluid on the mean or a cell along the wall met the worst. */
  readonly path?: 'mean' | 'wall-hugging';
}
