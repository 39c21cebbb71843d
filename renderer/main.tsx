import '@fontsource-variable/commissioner/wght.css';
import '@fontsource-variable/literata/wght.css';
import './look/page.css';
import './look/frame.css';
import './look/parts.css';
import './look/rows.css';
import './look/start.css';
import { createRoot } from 'react-dom/client';
import { createClient } from '../main/contract/client.ts';
import { type Bridge, desktopTransport } from '../main/contract/desktop.ts';
import { loopbackTransport } from '../main/contract/loopback.ts';
import { createCommands } from './commands/commands.ts';
import { startKeyboard } from './commands/keyboard.ts';
import { chooseScheme, startTheme } from './look/theme.ts';
import { App } from './page/app.tsx';
import { PageContext } from './page/context.tsx';
import { createSolver, workerThread } from './solving/solver.ts';
import { createDesk } from './state/desk.ts';
import { followHand } from './state/live.ts';
import { createPreferences } from './state/preferences.ts';
import { createWorkbench } from './state/workbench.ts';

startTheme();

/** This window's own name, which stays while it is loaded anew. */
function windowName(): string {
  const key = 'channelwright-window';
  const name = sessionStorage.getItem(key) ?? crypto.randomUUID();
  sessionStorage.setItem(key, name);
  return name;
}

const { channelwright } = window as unknown as { readonly channelwright?: Bridge };
const client = createClient(
  channelwright ? desktopTransport(channelwright) : loopbackTransport({ origin: '', window: windowName() }),
);
const desk = createDesk(
  client,
  createSolver(workerThread(), {
    get: (keys) =>
      client.call('cells.get', { keys: [...keys] }).then(
        ({ found }) => found,
        () => [],
      ),
    put: (cell) => void client.call('cells.put', { entries: [cell] }).catch(() => undefined),
  }),
);
const bench = createWorkbench(desk);
const preferences = createPreferences(client);
const commands = createCommands(desk, bench, () => preferences.store.get().keys);
const page = { desk, bench, commands, preferences };

client.on('project', (standing) => desk.stand(standing));
client.on('opened', ({ state }) => void desk.open('Opening …', async () => state));
client.on('command', ({ name }) => commands.all.some((command) => command.id === name) && commands.run(name));
client.on('problem', ({ what, remedy }) => desk.say(`${what} ${remedy}`));
client.on('closing', ({ says }) => desk.say(says));
startKeyboard(page);
followHand(desk, bench);

createRoot(document.getElementById('page')!).render(
  <PageContext value={page}>
    <App />
  </PageContext>,
);

void preferences
  .read()
  .then(() => chooseScheme(preferences.store.get().scheme))
  .catch(() => undefined);
// what this window had open before it was loaded anew
void client
  .call('project.state', {})
  .then(({ state }) => state && desk.open('Opening …', async () => state))
  .catch((error: unknown) => desk.say(error instanceof Error ? error.message : ''));
