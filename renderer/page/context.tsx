import { createContext, useContext } from 'react';
import type { Commands } from '../commands/command.ts';
import type { Desk } from '../state/desk.ts';
import type { Preferences } from '../state/preferences.ts';
import type { Workbench } from '../state/workbench.ts';

/** What every part of the page works with. */
export interface Page {
  readonly desk: Desk;
  readonly bench: Workbench;
  readonly commands: Commands;
  readonly preferences: Preferences;
}

export const PageContext = createContext<Page | null>(null);

export function usePage(): Page {
  const page = useContext(PageContext);
  if (!page) throw new Error('outside of the page');
  return page;
}
