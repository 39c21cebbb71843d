import { useState } from 'react';
import { KINDS, type Kind } from '../../solver/chip/units.ts';
import { unitInPrint } from '../../solver/chip/units-format.ts';
import { ChoiceField } from '../card/text-field.tsx';
import { keyShown, keyText } from '../commands/command.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';

const UNITS_OF = ['pressure', 'stress', 'flow', 'velocity', 'time'] as const satisfies readonly Kind[];
const UNIT_NAMES: Readonly<Record<(typeof UNITS_OF)[number], string>> = {
  pressure: 'Pressure',
  stress: 'Wall shear',
  flow: 'Flow',
  velocity: 'Speed',
  time: 'Time',
};

/** Every command with its key, to be changed; and the units in which figures are shown. */
export function KeysPanel() {
  const { commands, preferences } = usePage();
  const own = useStore(preferences.store);
  const [asking, setAsking] = useState('');
  const [says, setSays] = useState('');
  /** Another key, none, or the one it had at first. */
  const give = (id: string, key: string | null): void => {
    setAsking('');
    const other = key ? commands.forKey(key) : null;
    preferences.setKey(id, key);
    setSays(
      key === ''
        ? `${commands.byId(id).title} has no key now; it is in the list of commands as ever.`
        : other && other.id !== id
          ? `${keyShown(key!)} no longer means ${other.title.toLowerCase()} first.`
          : '',
    );
  };
  const take = (id: string, event: React.KeyboardEvent): void => {
    if (['Shift', 'Control', 'Alt', 'Meta', 'Tab'].includes(event.key)) return;
    event.preventDefault();
    event.stopPropagation();
    if (event.key === 'Escape') setAsking('');
    else give(id, keyText(event));
  };
  return (
    <>
      <section aria-label="Units" className="fields">
        <h3>Units</h3>
        {UNITS_OF.map((kind) => (
          <ChoiceField
            key={kind}
            label={UNIT_NAMES[kind]}
            value={own.units[kind] ?? 'best'}
            choices={[
              ['best', 'whichever suits'],
              ...KINDS[kind].units.map((unit) => [unit, unitInPrint(unit)] as const),
            ]}
            onAccept={(unit) => preferences.setUnit(kind, unit === 'best' ? null : unit)}
          />
        ))}
      </section>
      <h3>Keys</h3>
      <p className="soft small">
        Press a key’s button, then the new key, or take the key away; Escape leaves it as it was.
      </p>
      {says && <p role="status">{says}</p>}
      <ul className="keys">
        {commands.all.map((command) => (
          <li key={command.id}>
            <span>{command.title}</span>
            {asking === command.id && (
              <span>
                <button type="button" className="quiet" onClick={() => give(command.id, '')}>
                  No key
                </button>
                {own.keys[command.id] !== undefined && (
                  <button type="button" className="quiet" onClick={() => give(command.id, null)}>
                    As at first
                  </button>
                )}
              </span>
            )}
            <button
              type="button"
              aria-label={`Key of ${command.title}: ${commands.keyOf(command.id) || 'none'}`}
              onClick={() => setAsking(command.id)}
              onKeyDown={(event) => asking === command.id && take(command.id, event)}
            >
              <kbd>{asking === command.id ? 'press a key' : keyShown(commands.keyOf(command.id)) || '–'}</kbd>
            </button>
          </li>
        ))}
      </ul>
      <button type="button" className="quiet" onClick={() => preferences.clearKeys()}>
        All keys as at first
      </button>
    </>
  );
}
