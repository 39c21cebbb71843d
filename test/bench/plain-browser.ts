import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ARGUMENTS, browserPath } from '../page/browser.ts';

/**
 * A browser as a person has it. What drives it in tests watches every request, frame and thread of a page, and a
 * page that starts under its eyes takes up to twice as long; here nothing listens but one line for questions.
 */
export interface PlainBrowser {
  /**
   * Opens a page.
   * @param script run in the page before its own scripts
   */
  open(address: string, script: string): Promise<void>;
  /** What an expression is in the page; it must be plain data or a promise of that. */
  evaluate<T>(expression: string): Promise<T>;
  end(): Promise<void>;
}

/** ms that a browser has to start, and that it is left alone after that, as one that was open already. */
const STARTS = 30_000;
const SETTLES = 1500;

interface Answer {
  readonly id?: number;
  readonly result?: { readonly result?: { readonly value: unknown }; readonly exceptionDetails?: object };
  readonly error?: { readonly message: string };
}

export async function plainBrowser(): Promise<PlainBrowser> {
  const data = mkdtempSync(join(tmpdir(), 'channelwright-browser-'));
  const child = spawn(
    await browserPath(),
    [
      ...ARGUMENTS,
      '--headless=new',
      '--remote-debugging-port=0',
      `--user-data-dir=${data}`,
      '--window-size=1440,900',
      'about:blank',
    ],
    { stdio: 'ignore' },
  );
  const gone = new Promise((done) => child.once('exit', done));
  const pause = (ms: number): Promise<void> => new Promise((done) => setTimeout(done, ms));
  const port = await portIn(join(data, 'DevToolsActivePort'), pause);
  await pause(SETTLES);
  const targets = (await (await fetch(`http://127.0.0.1:${port}/json/list`)).json()) as {
    readonly type: string;
    readonly webSocketDebuggerUrl: string;
  }[];
  const line = new WebSocket(targets.find(({ type }) => type === 'page')!.webSocketDebuggerUrl);
  await new Promise((done) => line.addEventListener('open', done, { once: true }));
  const asked = new Map<number, (answer: Answer) => void>();
  let last = 0;
  line.addEventListener('message', ({ data: text }) => {
    const answer = JSON.parse(String(text)) as Answer;
    if (answer.id !== undefined) asked.get(answer.id)?.(answer);
  });
  const ask = async (method: string, params: object): Promise<NonNullable<Answer['result']>> => {
    last += 1;
    const id = last;
    const answer = await new Promise<Answer>((done) => {
      asked.set(id, done);
      line.send(JSON.stringify({ id, method, params }));
    });
    asked.delete(id);
    if (answer.error || answer.result?.exceptionDetails)
      throw new Error(`${method}: ${JSON.stringify(answer.error ?? answer.result?.exceptionDetails)}`);
    return answer.result!;
  };
  return {
    async open(url, script) {
      await ask('Page.enable', {});
      await ask('Page.addScriptToEvaluateOnNewDocument', { source: script });
      await ask('Page.navigate', { url });
    },
    async evaluate<T>(expression: string) {
      const { result } = await ask('Runtime.evaluate', {
        expression,
        awaitPromise: true,
        returnByValue: true,
      });
      return result?.value as T;
    },
    async end() {
      line.close();
      child.kill('SIGKILL');
      await gone;
      // its helpers end a moment after it
      rmSync(data, { recursive: true, force: true, maxRetries: 10, retryDelay: 100 });
    },
  };
}

/** The port that a browser chose, which it writes to a file when it listens. */
async function portIn(file: string, pause: (ms: number) => Promise<void>): Promise<number> {
  for (let waited = 0; waited < STARTS; waited += 50) {
    const port = existsSync(file) ? Number(readFileSync(file, 'utf8').split('\n')[0]) : 0;
    if (port > 0) return port;
    await pause(50);
  }
  throw new Error(`The browser did not start within ${STARTS / 1000} s.`);
}
