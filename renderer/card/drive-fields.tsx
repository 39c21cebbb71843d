import type { Drive } from '../../solver/chip/chip.ts';
import { QuantityField } from './quantity-field.tsx';
import { ChoiceField } from './text-field.tsx';

const DRIVES = [
  ['pressure', 'a pressure'],
  ['flow', 'a flow'],
  ['head', 'a reservoir'],
  ['closed', 'closed'],
] as const satisfies readonly (readonly [Drive['kind'], string])[];

/** What a drive begins with, to be typed over. */
const FIRST: Readonly<Record<Drive['kind'], Drive>> = {
  pressure: { kind: 'pressure', pressure: 0 },
  flow: { kind: 'flow', flow: 1e-8 / 60 },
  head: { kind: 'head', head: 0.1 },
  closed: { kind: 'closed' },
};

const amountOf = (drive: Drive): number => {
  if (drive.kind === 'pressure') return drive.pressure;
  if (drive.kind === 'flow') return drive.flow;
  return drive.kind === 'head' ? drive.head : 0;
};

/** What imposes a flow or a pressure at one port, or at several at once. */
export function DriveFields({
  drives,
  onDrive,
}: {
  readonly drives: readonly Drive[];
  readonly onDrive: (drive: Drive) => string | null;
}) {
  const [first] = drives;
  if (!first) return null;
  const kind = drives.every((drive) => drive.kind === first.kind) ? first.kind : '';
  const own = amountOf(first);
  const amount = drives.every((drive) => amountOf(drive) === own) ? own : null;
  return (
    <>
      <ChoiceField
        label="Driven by"
        value={kind}
        choices={DRIVES}
        onAccept={(next) => onDrive(FIRST[next])}
      />
      {kind === 'pressure' && (
        <QuantityField
          label="Pressure"
          value={amount}
          kind="pressure"
          onAccept={(pressure) => onDrive({ kind: 'pressure', pressure })}
        />
      )}
      {kind === 'flow' && (
        <QuantityField
          label={drives.length > 1 ? 'Flow into the chip, each' : 'Flow into the chip'}
          value={amount}
          kind="flow"
          unit="uL/min"
          onAccept={(flow) => onDrive({ kind: 'flow', flow })}
        />
      )}
      {kind === 'head' && (
        <QuantityField
          label="Surface above the chip"
          value={amount}
          kind="length"
          unit="mm"
          onAccept={(head) => onDrive({ kind: 'head', head })}
        />
      )}
    </>
  );
}
