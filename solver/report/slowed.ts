import type { Chip, Drive, Port } from '../chip/chip.ts';
import { formatQuantity } from '../chip/units-format.ts';
import type { Finding } from '../problem/finding.ts';

/** The drive with its number times a factor. */
function times(drive: Drive, factor: number): Drive {
  switch (drive.kind) {
    case 'flow':
      return { kind: 'flow', flow: drive.flow * factor };
    case 'pressure':
      return { kind: 'pressure', pressure: drive.pressure * factor };
    case 'head':
      return { kind: 'head', head: drive.head * factor };
    default:
      return drive;
  }
}

function drives(drive: Drive): boolean {
  if (drive.kind === 'flow') return drive.flow !== 0;
  if (drive.kind === 'pressure') return drive.pressure !== 0;
  return drive.kind === 'head' && drive.head !== 0;
}

function spelt(drive: Drive): string {
  if (drive.kind === 'flow') return `flow at PORT to ${formatQuantity(drive.flow, 'flow', { digits: 3 })}`;
  if (drive.kind === 'head')
    return `surface at PORT to ${formatQuantity(drive.head, 'length', { digits: 3 })}`;
  return `pressure at PORT to ${drive.kind === 'pressure' ? formatQuantity(drive.pressure, 'pressure', { digits: 3 }) : '0'}`;
}

/**
 * The edit that lowers every drive alike, so that all pressures and flows come down by `factor` and how the flow
 * divides stays as it is: creeping flow of a Newtonian fluid between rigid walls is linear. Null where nothing drives.
 */
export function slowed(chip: Chip, factor: number): NonNullable<Finding['remedy']> | null {
  const ports = chip.ports.filter(({ drive }) => drives(drive));
  if (ports.length === 0 || !(factor > 0 && factor < 1)) return null;
  // A little lower, so that rounding does not leave it above.
  const by = Math.floor(factor * 1000 - 1e-9) / 1000 || factor * 0.99;
  const put = ports.map((port): Port => ({ ...port, drive: times(port.drive, by) }));
  const [only] = put;
  const label =
    put.length === 1
      ? `lower the ${spelt(only!.drive).replace('PORT', only!.id)}`
      : `lower all drives to ${formatQuantity(by, 'share', { digits: 3 })} of what they are`;
  return {
    label: label.slice(0, 200),
    changes: put.map((part) => ({ kind: 'put', list: 'ports', id: part.id, part })),
  };
}
