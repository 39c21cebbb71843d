import { PROCESSES, type RuleName, rulesOf } from '../../solver/checks/process.ts';
import { PROCESS_KINDS, type Process, type ProcessKind } from '../../solver/chip/making.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';

const NONE = 'none';

/** Every number that a process may have, as people call it; lengths are whole nm in the chip. */
const FIELDS: readonly [name: RuleName, label: string, kind: 'length' | 'number' | 'modulus'][] = [
  ['leastWidth', 'Least width', 'length'],
  ['leastGap', 'Least wall', 'length'],
  ['toolRadius', 'Tool radius', 'length'],
  ['edge', 'Left at the edge', 'length'],
  ['alignment', 'Layers off by', 'length'],
  ['deepest', 'Depth over width, most', 'number'],
  ['widest', 'Width over depth, most', 'number'],
  ['wall', 'Wall height over thickness, most', 'number'],
  ['undercut', 'Undercut over depth', 'number'],
  ['modulus', 'Modulus of a soft lid', 'modulus'],
];

/** How the chip is made, and the numbers of that process with their sources; each may be the workshop's own. */
export function ProcessFields({
  process,
  onProcess,
}: {
  readonly process: Process | undefined;
  readonly onProcess: (process: Process | null) => string | null;
}) {
  const rules = process && rulesOf(process);
  return (
    <section aria-label="Process" className="fields">
      <h3>Process</h3>
      <ChoiceField
        label="Made by"
        value={process?.kind ?? NONE}
        choices={[
          [NONE, 'not said'],
          ...PROCESS_KINDS.map((kind): [string, string] => [kind, PROCESSES[kind].name]),
        ]}
        onAccept={(kind) => onProcess(kind === NONE ? null : { kind: kind as ProcessKind })}
      />
      {process &&
        FIELDS.map(([name, label, kind]) => {
          const rule = rules?.[name];
          if (!rule) return null;
          const scale = kind === 'length' ? 1e9 : 1;
          return (
            <div key={name} title={rule.source}>
              <QuantityField
                label={label}
                value={rule.number / scale}
                kind={kind}
                unit={kind === 'length' ? 'um' : kind === 'modulus' ? 'MPa' : ''}
                onAccept={(value) =>
                  onProcess({ ...process, [name]: kind === 'length' ? Math.round(value * scale) : value })
                }
              />
            </div>
          );
        })}
    </section>
  );
}
