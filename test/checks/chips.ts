import type { FindingKind } from '../../solver/checks/kinds.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Finding } from '../../solver/problem/finding.ts';
import { type SolveOptions, solve } from '../../solver/solve.ts';

type Json = Record<string, unknown>;

/** A plain slide with one straight channel of 200 by 100 µm between two ports; lengths in µm. */
export function chipOf(parts: Json = {}): Chip {
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'test',
      outline: { width: 75000, height: 27000 },
      layers: [{ id: 'flow', depth: 100, fillet: 5 }],
      channels: [line('a', 12000)],
      ports: ends('a', 12000),
      fluid: { viscosity: '1 mPa.s', density: 1000 },
      ...parts,
    }),
  );
}

/** A channel along the chip at height y. */
export const line = (id: string, y: number, width: number | number[] = 200, more: Json = {}): Json => ({
  id,
  layer: 'flow',
  path: [
    [6000, y],
    [66000, y],
  ],
  width,
  ...more,
});

export const port = (id: string, at: number[], drive: Json, diameter = 1000): Json => ({
  id,
  at,
  layer: 'flow',
  diameter,
  drive,
});

/** Ports at both ends of such a channel, on the grid of the interface guideline. */
export const ends = (id: string, y: number, flow: unknown = '1 uL/min', diameter = 1000): Json[] => [
  port(`${id} in`, [6000, y], { flow }, diameter),
  port(`${id} out`, [66000, y], { pressure: 0 }, diameter),
];

export const findings = (chip: Chip, options: SolveOptions = { junctions: 'ideal' }): readonly Finding[] =>
  solve(chip, options).findings;
export const ofKind = (chip: Chip, kind: string): Finding[] =>
  findings(chip).filter((finding) => finding.kind === kind);

/**
 * A kind with what just passes and what just fails, a chip or what is found of something else; where the
 * finding has them, the number and its threshold as worked out by hand; how it is solved, if not as ideal.
 */
export type Case = readonly [
  kind: FindingKind,
  passes: Chip | (() => readonly Finding[]),
  fails: Chip | (() => readonly Finding[]),
  value?: number | undefined,
  threshold?: number | undefined,
  options?: SolveOptions | undefined,
];
