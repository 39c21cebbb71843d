import type { PieceResult, Result, TargetResult } from '../../solver/chip/result.ts';

/** Results for tests of wording: invented numbers, never shown to a person. */
export const piece = (more: Partial<PieceResult> = {}): PieceResult => ({
  from: 'port:in',
  to: 'junction:1',
  length: 0.015,
  resistance: 1e12,
  flow: 1e-10,
  pressureDrop: 100,
  meanVelocity: 0.01,
  peakVelocity: 0.02,
  reynolds: 1.2,
  peakWallShear: 0.8,
  meanWallShear: 0.5,
  residenceTime: 1.5,
  ...more,
});

export const target = (port: string, wanted: number, got: number | null, met: boolean): TargetResult => ({
  port,
  wanted,
  got,
  met,
});

export const resultOf = (more: Partial<Result> = {}): Result => ({
  format: 'channelwright-result',
  version: 1,
  chip: 'test',
  status: 'solved',
  junctions: 'solved',
  fluid: { viscosity: 0.00089, density: 997 },
  ports: [
    { id: 'in', pressure: 31_200, flow: 1e-8 / 60, share: 1 },
    { id: 'well 1', pressure: 0, flow: -0.5e-8 / 60, share: 0.5 },
    { id: 'well 2', pressure: 0, flow: -0.5e-8 / 60, share: 0.5 },
  ],
  channels: [{ id: 'feed', pieces: [piece()] }],
  cells: [],
  routes: [],
  targets: [],
  limits: [],
  balance: { conservationResidual: 0, powerIn: 0, dissipation: 0 },
  findings: [],
  ...more,
});
