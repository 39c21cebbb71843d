import '@fontsource-variable/commissioner/wght.css';
import '@fontsource-variable/literata/wght.css';
import './look/page.css';
import './look/frame.css';
import './look/parts.css';
import './look/rows.css';
import './look/start.css';
import { createClient } from '../main/contract/client.ts';
import { type Bridge, desktopTransport } from '../main/contract/desktop.ts';
import { loopbackTransport } from '../main/contract/loopback.ts';
import { startTheme } from './look/theme.ts';
import { patient } from './solving/patience.ts';
import { createSolver, workerThread } from './solving/solver.ts';
import { solvesEarly } from './state/early.ts';
import { keptBy } from './state/kept-by.ts';

/**
 * What takes longest begins first: the host is asked what is open while the page itself is still being read. The
 * solving thread starts when it is known what is open, or when the page is there and still waits for that; where
 * the answers are known already, when they are drawn.
 */
const solving = workerThread();
const thread = patient(solving);
/** This build of the page: the name of the file bears a hash over everything the page brings in. */
const build = new URL(import.meta.url).pathname.split('/').at(-1)!;
const { channelwright } = window as unknown as { readonly channelwright?: Bridge };
const client = createClient(
  channelwright ? desktopTransport(channelwright) : loopbackTransport({ origin: '', window: windowName() }),
);
const { solver, early } = solvesEarly(
  createSolver(thread, {
    get: (keys) =>
      client.call('cells.get', { keys: [...keys] }).then(
        ({ found }) => found,
        () => [],
      ),
    put: (cell) => void client.call('cells.put', { entries: [cell] }).catch(() => undefined),
  }),
);
// what this window had open before it was loaded anew, or what the program was started with
let told = false;
const first = client.call('project.state', {}).then(({ state }) => {
  told = true;
  const known = state !== null && keptBy(state.view) === build;
  if (known) thread.hold();
  else solving.begin();
  if (state) early(state.chip);
  return state;
});
startTheme();
void import('./page/show.tsx').then(({ showPage }) => {
  if (!told) solving.begin();
  showPage({ client, solver, first, build, shown: thread.release });
});

/** This window's own name, which stays while it is loaded anew. */
function windowName(): string {
  const key = 'channelwright-window';
  const name = sessionStorage.getItem(key) ?? crypto.randomUUID();
  sessionStorage.setItem(key, name);
  return name;
}
