import type { Client } from '../../main/contract/client.ts';
import type { Kind } from '../../solver/chip/units.ts';
import { KINDS } from '../../solver/chip/units.ts';
import type { SchemeChoice } from '../look/theme.ts';
import { showIn, type UnitHabit } from '../words/figure.ts';
import { createStore, type Store } from './store.ts';

/** What a person likes, kept for the person and not in the project. */
export interface Likes {
  readonly keys: Readonly<Record<string, string>>;
  readonly units: UnitHabit;
  readonly scheme: SchemeChoice;
}

export interface Preferences {
  readonly store: Store<Likes>;
  read(): Promise<void>;
  /** '' takes the key away, null gives back the one it had at first. */
  setKey(command: string, key: string | null): void;
  clearKeys(): void;
  setUnit(kind: Kind, unit: string | null): void;
}

export function createPreferences(client: Client): Preferences {
  const store = createStore<Likes>({ keys: {}, units: {}, scheme: 'system' });
  const write = (patch: Record<string, Record<string, string>>): void => {
    client.call('preferences.set', { patch }).catch(() => undefined);
  };
  return {
    store,
    async read() {
      const { preferences } = await client.call('preferences.get', {});
      const { keys, units, scheme } = preferences;
      store.set({
        keys: texts(keys),
        units: Object.fromEntries(
          Object.entries(texts(units)).filter(
            ([kind, unit]) =>
              kind in KINDS && (KINDS[kind as Kind].units as readonly string[]).includes(unit),
          ),
        ),
        scheme: scheme === 'light' || scheme === 'dark' ? scheme : 'system',
      });
      showIn(store.get().units);
    },
    setKey(command, key) {
      const { [command]: _, ...others } = store.get().keys;
      const keys = key === null ? others : { ...others, [command]: key };
      store.patch({ keys });
      write({ keys });
    },
    clearKeys() {
      store.patch({ keys: {} });
      write({ keys: {} });
    },
    setUnit(kind, unit) {
      const { [kind]: _, ...rest } = store.get().units;
      const units = unit === null ? rest : { ...rest, [kind]: unit };
      store.patch({ units });
      showIn(units);
      write({ units });
    },
  };
}

/** The texts among what was stored; anything else may have been written by another version. */
function texts(value: unknown): Record<string, string> {
  if (typeof value !== 'object' || value === null) return {};
  return Object.fromEntries(
    Object.entries(value).filter((entry): entry is [string, string] => typeof entry[1] === 'string'),
  );
}
