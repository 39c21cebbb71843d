import { readFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { gzipSync } from 'node:zlib';
import { answered, type Sitting, sit } from '../page/desk.ts';
import { startHost } from '../page/host.ts';
import { hostClient } from '../page/host-client.ts';
import { plainBrowser } from './plain-browser.ts';
import type { BenchRow } from './row.ts';

/** How the program starts with a file, and what it holds in memory. */

const DIST = resolve(import.meta.dirname, '../../dist/renderer');

/** ms in which a page that starts is not spoken to. */
const LEFT_ALONE = 5000;
const STARTS = 5;

const median = (values: readonly number[]): number =>
  [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? Number.NaN;

/** Run in a page before anything else: notes when it is drawn, answered and solved, in ms from its navigation. */
const WATCH = `window.noted = {};
  const look = () => {
    const bar = document.querySelector('.verdicts');
    const now = performance.now();
    if (document.querySelector('.sheet canvas') && document.querySelector('.grid-row')) noted.drawn ??= now;
    if (noted.drawn && bar && !bar.textContent.includes('Not solved yet')) noted.answered ??= now;
    if (noted.answered && bar.getAttribute('aria-busy') === 'false') noted.solved = now;
    else requestAnimationFrame(look);
  };
  requestAnimationFrame(look);`;

/** A promise of what was noted, for the same page. */
const NOTED = `new Promise((done) => {
    const look = () => (noted.solved ? done(noted) : setTimeout(look, 200));
    look();
  })`;

/** ms of starts with a file, stage by stage. */
interface Starts {
  readonly host: number[];
  readonly drawn: number[];
  readonly usable: number[];
  readonly solved: number[];
}

async function startsWith(file: string, count: number): Promise<Starts> {
  const starts: Starts = { host: [], drawn: [], usable: [], solved: [] };
  for (let i = 0; i < count; i += 1) {
    const browser = await plainBrowser();
    const host = await startHost([file]);
    try {
      await browser.open(host.address, WATCH);
      // asked only when all of it is past, for a question takes its time in the page
      await new Promise((done) => setTimeout(done, LEFT_ALONE));
      const noted = await browser.evaluate<Record<'drawn' | 'answered' | 'solved', number>>(NOTED);
      starts.host.push(host.startedIn);
      starts.drawn.push(noted.drawn);
      starts.usable.push(noted.answered);
      starts.solved.push(noted.solved);
    } finally {
      await browser.end();
      await host.stop();
    }
  }
  return starts;
}

/** The description as a project that has been solved and was at rest, as a person leaves it. */
async function leftAtRest(description: string, project: string): Promise<void> {
  const sitting = await sit({ files: [description] });
  try {
    await answered(sitting.page);
    const client = await hostClient(sitting);
    for (let state = null; !state?.view.answers; state = (await client.call('project.state', {})).state)
      await sitting.page.waitForTimeout(200);
    await client.call('project.saveAs', { path: project, replace: true });
  } finally {
    await sitting.end();
  }
}

/** @param description of a chip of 1000 channels */
export async function starting(folder: string, description: string): Promise<BenchRow[]> {
  const file = join(folder, 'start-1000.json');
  const project = join(folder, 'start-1000.chw');
  writeFileSync(file, description);
  // the first start compiles what the others find compiled
  await leftAtRest(file, project);
  const opened = await startsWith(project, STARTS);
  const described = await startsWith(file, STARTS);
  // what the page is begun with: the first script and the part it brings in at once
  const html = readFileSync(join(DIST, 'index.html'), 'utf8');
  const first = [...html.matchAll(/(?:src|href)="\.\/(assets\/[^"]+\.js)"/g)].map((found) => found[1]!);
  const files = new Set(first);
  for (const name of files) {
    const text = readFileSync(join(DIST, name), 'utf8');
    for (const [, part] of text.matchAll(/(?:from|import)\s*\(?\s*["'`]\.\/([\w.-]+\.js)["'`]/g))
      if (!/^(plots|from-outside)/.test(part!)) files.add(`assets/${part}`);
  }
  const bytes = [...files].reduce((sum, name) => sum + gzipSync(readFileSync(join(DIST, name))).length, 0);
  const row = (what: string, times: readonly number[], target?: number): BenchRow => ({
    what,
    median: median(times),
    unit: 'ms',
    runs: times.length,
    ...(target !== undefined && { target }),
  });
  return [
    row('start with a project of 1000 channels: process to host listening', opened.host),
    row('  navigation to the sheet drawn', opened.drawn),
    {
      ...row('  navigation to usable: sheet drawn, five answers told', opened.usable, 1500),
      note: 'as the project kept them',
    },
    row('  navigation to all of it solved anew', opened.solved),
    row('start with a description of 1000 channels: navigation to the sheet drawn', described.drawn),
    row('  navigation to usable: sheet drawn, first answer in the verdicts', described.usable, 1500),
    row('  navigation to all junctions solved', described.solved),
    {
      what: 'all scripts the page begins with, gzipped',
      median: bytes / 1e3,
      unit: 'kB',
      runs: 1,
      target: 600,
    },
  ];
}

/** MB of a process, what it shares with others counted in parts; NaN where there is no /proc to tell. */
function held(pid: number): number {
  try {
    const shared = /^Pss:\s+(\d+) kB/m.exec(readFileSync(`/proc/${pid}/smaps_rollup`, 'utf8'));
    return Number(shared?.[1]) / 1e3;
  } catch {
    return Number.NaN;
  }
}

/** MB that the page's process holds: the page, its solving thread and its junction threads. */
async function pageHeld(sitting: Sitting): Promise<number> {
  const cdp = await sitting.context.browser()!.newBrowserCDPSession();
  const { processInfo } = await cdp.send('SystemInfo.getProcessInfo');
  const renderers = processInfo.filter(({ type }) => type === 'renderer').map(({ id }) => held(id));
  return Math.max(...renderers.filter(Number.isFinite));
}

/** MB of what scripts hold in the page and in each of its threads, as it stands: garbage is not collected for it. */
async function heaps(sitting: Sitting): Promise<readonly (readonly [name: string, mb: number])[]> {
  const cdp = await sitting.context.newCDPSession(sitting.page);
  const mb = ({ usedSize, backingStorageSize }: { usedSize: number; backingStorageSize?: number }): number =>
    (usedSize + (backingStorageSize ?? 0)) / 1e6;
  const found: [string, number][] = [['the page', mb(await cdp.send('Runtime.getHeapUsage'))]];
  const threads: { readonly session: string; readonly name: string }[] = [];
  cdp.on('Target.attachedToTarget', ({ sessionId, targetInfo }) => {
    threads.push({ session: sessionId, name: `thread "${targetInfo.title}"` });
  });
  const answers = new Map<string, (answer: string) => void>();
  cdp.on('Target.receivedMessageFromTarget', ({ sessionId, message }) => answers.get(sessionId)?.(message));
  const attach = { autoAttach: true, waitForDebuggerOnStart: false, flatten: false };
  await cdp.send('Target.setAutoAttach', attach);
  await sitting.page.waitForTimeout(300);
  for (const { session, name } of threads) {
    const answer = await new Promise<string>((done) => {
      answers.set(session, done);
      const message = JSON.stringify({ id: 1, method: 'Runtime.getHeapUsage' });
      void cdp.send('Target.sendMessageToTarget', { sessionId: session, message });
      setTimeout(() => done('{}'), 5000);
    });
    const { result } = JSON.parse(answer) as { result?: { usedSize: number; backingStorageSize?: number } };
    found.push([name, result ? mb(result) : Number.NaN]);
  }
  await cdp.detach();
  return found;
}

/** s after which the browser has cleared up by itself. */
const REST = 25;

/** What the page's process and its host hold, right away and when the browser has cleared up. */
export async function memory(sitting: Sitting, what: string): Promise<BenchRow[]> {
  const row = (name: string, median: number, target?: number): BenchRow => ({
    what: name,
    median,
    unit: 'MB',
    runs: 1,
    ...(target !== undefined && { target }),
  });
  const now = await pageHeld(sitting);
  await sitting.page.waitForTimeout(1000 * REST);
  const rest = await pageHeld(sitting);
  return [
    row(`memory of the page's process, ${what}`, now, 400),
    row(`  at rest, ${REST} s later`, rest, 400),
    ...(await heaps(sitting)).map(([name, mb]) => row(`    of it scripts of ${name}`, mb)),
    row('  the host beside it', held(sitting.host.pid)),
  ];
}
