import type { Port } from '../chip/chip.ts';

/** Standard acceleration of free fall, m/s^2 (CGPM 1901). */
export const GRAVITY = 9.80665;

/** What a port imposes on its node. */
export interface PortDrive {
  readonly kind: 'pressure' | 'flow';
  /** Pa at the outer end of the tubing, or m^3/s into the chip. */
  readonly value: number;
  /** Resistance of the tubing, Pa s/m^3. */
  readonly series: number;
}

/** Hagen-Poiseuille for a row of tubes, per viscosity: sum of 128 L / (pi d^4), m^-3. */
export function tubingResistance(tubing: Port['tubing']): number {
  let sum = 0;
  for (const { bore, length } of tubing) sum += (128 * length) / (Math.PI * bore ** 4);
  return sum;
}

/** null where the port is closed. */
export function driveOf(port: Port, viscosity: number, density: number): PortDrive | null {
  const series = viscosity * tubingResistance(port.tubing);
  const { drive } = port;
  switch (drive.kind) {
    case 'pressure':
      return { kind: 'pressure', value: drive.pressure, series };
    case 'head':
      return { kind: 'pressure', value: density * GRAVITY * drive.head, series };
    case 'flow':
      return { kind: 'flow', value: drive.flow, series };
    case 'closed':
      return null;
  }
}
