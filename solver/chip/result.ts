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
  readonly balance: {
    readonly conservationResidual: number;
    readonly powerIn: number;
    readonly dissipation: number;
  };
  readonly findings: readonly Finding[];
}

export interface PortResult {
  readonly id: string;
  /** Pa at the chip's side of the tubing. */
  readonly pressure: number;
  /** m^3/s into the chip; null where below what can be resolved. */
  readonly flow: number | null;
  /** Of the total that enters the chip. */
  readonly share: number | null;
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
  /** Relative error of the resistance as the section solve knows it. */
  readonly accuracy?: number;
}

export interface CellResult {
  readonly id: string;
  readonly kind: string;
  readonly at: readonly [number, number];
  /** Names of the pieces (or "port:in") at its faces, in the order of the port matrix. */
  readonly faces: readonly string[];
  /** m^3/s/Pa: flow out of face i per unit pressure on face j. */
  readonly portMatrix: readonly (readonly number[])[];
  readonly peakWallShear: number | null;
  readonly peakAt: readonly [number, number] | null;
  /** Bound of the relative error of the port matrix; 1 where the cell is not solved and counts as ideal. */
  readonly accuracy: number;
  /** Bound of the relative error of the peak, where there is one. */
  readonly peakError?: number;
}

export interface RouteResult {
  readonly from: string;
  readonly to: string;
  readonly share: number;
  readonly residenceTime: number | null;
  readonly peakWallShear: number | null;
  readonly wallHugging?: {
    readonly cellDiameter: number;
    readonly residenceTime: number | null;
    readonly peakShear: number | null;
  };
  readonly damage: readonly {
    readonly limit: string;
    readonly mean: number | null;
    readonly wallHugging: number | null;
  }[];
}

export interface TargetResult {
  readonly port?: string;
  readonly channel?: string;
  readonly wanted: number;
  readonly got: number | null;
  readonly met: boolean;
}

export interface LimitResult {
  readonly name: string;
  readonly limit: number | null;
  readonly worst: number | null;
  readonly where: string;
  /** null where it could not be judged; a finding says why. */
  readonly met: boolean | null;
}
