import { useEffect } from 'react';
import { flushSync } from 'react-dom';
import { createRoot } from 'react-dom/client';
import type { Client } from '../../main/contract/client.ts';
import type { ProjectState } from '../../main/contract/contract.ts';
import { createCommands } from '../commands/commands.ts';
import { startKeyboard } from '../commands/keyboard.ts';
import { bringReading } from '../edits/reading.ts';
import { chooseScheme } from '../look/theme.ts';
import type { Solver } from '../solving/solver.ts';
import { createDesk } from '../state/desk.ts';
import { answersKept, keepAnswers } from '../state/kept-answers.ts';
import { followHand } from '../state/live.ts';
import { followOpenings } from '../state/openings.ts';
import { createPreferences } from '../state/preferences.ts';
import { tidiedWhenOpened } from '../state/tidied.ts';
import { createWorkbench } from '../state/workbench.ts';
import { App } from './app.tsx';
import { PageContext } from './context.tsx';

/** ms that the first picture waits for the host, so that it is of the project and in the person's own units. */
const PATIENCE = 250;
/** ms after which the start is over, and what is brought in later is: it is there when it is needed. */
const STARTED = 3000;
/** ms after which a page that paints nothing goes on all the same. */
const UNSEEN = 1000;

export interface Beginning {
  readonly client: Client;
  readonly solver: Solver;
  /** What the window has open already. */
  readonly first: Promise<ProjectState | null>;
  /** Names this build of the page. */
  readonly build: string;
  /** Called when the page has been drawn. */
  shown(): void;
}

/** Joins everything to one page and puts it on the screen. */
export function showPage({ client, solver, first, build, shown }: Beginning): void {
  const preferences = createPreferences(client);
  const units = () => preferences.store.get().units;
  const desk = createDesk(client, solver, ({ view, chip }) =>
    answersKept(view, { by: build, units: units(), chip }),
  );
  const bench = createWorkbench(desk);
  const commands = createCommands(desk, bench, () => preferences.store.get().keys);
  const page = { desk, bench, commands, preferences };
  const known = preferences
    .read()
    .then(() => chooseScheme(preferences.store.get().scheme))
    .catch(() => undefined);
  const opened = followOpenings(
    client,
    desk,
    known.then(() => first),
  );
  keepAnswers(desk, { by: build, units });
  client.on('project', (standing) => desk.stand(standing));
  client.on(
    'command',
    ({ name }) => commands.all.some((command) => command.id === name) && commands.run(name),
  );
  client.on('problem', ({ what, remedy }) => desk.say(`${what} ${remedy}`));
  client.on('closing', ({ says }) => desk.say(says));
  window.addEventListener('pagehide', () => desk.leave());
  startKeyboard(page);
  followHand(desk, bench);
  tidiedWhenOpened(desk);
  // what the hand does next is done to what is there, whether or not it was shown yet
  const tell = ({ type, target }: Event): void => {
    // a list of choices would be drawn with the old one before its field has read the new; it tells by itself
    if (type !== 'input' || !(target instanceof HTMLSelectElement)) flushSync(desk.project.tell);
  };
  for (const kind of ['keydown', 'pointerdown', 'wheel', 'input'])
    window.addEventListener(kind, tell, { capture: true, passive: true });

  setTimeout(() => void bringReading().catch(() => undefined), STARTED);
  const late = new Promise((done) => setTimeout(done, PATIENCE));
  void Promise.race([Promise.all([known, opened]), late]).then(() =>
    createRoot(document.getElementById('page')!).render(
      <PageContext value={page}>
        <App />
        <Drawn then={shown} />
      </PageContext>,
    ),
  );
}

/** Calls once what stands beside it is on the screen, or would be if anybody saw it. */
function Drawn({ then }: { then(): void }) {
  useEffect(() => {
    const unseen = setTimeout(then, UNSEEN);
    requestAnimationFrame(() =>
      requestAnimationFrame(() => {
        clearTimeout(unseen);
        then();
      }),
    );
  }, [then]);
  return null;
}
