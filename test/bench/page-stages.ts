import type { Page } from 'playwright-core';

/** ms of one step of a field, in the order in which they pass; a sum of medians is no median of sums. */
export interface Stages {
  /** From the key to the order posted to the solving thread. */
  readonly request: number;
  /** From there until that thread takes it up. */
  readonly there: number;
  /** The thread's own work, the five answers in words included. */
  readonly solve: number;
  /** From there until the page's thread hears it. */
  readonly back: number;
  /** From there to the changed words of the five answers. */
  readonly state: number;
  /** All of these. */
  readonly total: number;
  /** From the changed words until the frame that shows them is made. */
  readonly paint: number;
  /** From the changed words until ledger, card and sheet have the whole result. */
  readonly rest: number;
}

export const STAGES: readonly (readonly [keyof Stages, string])[] = [
  ['request', 'key to order'],
  ['there', 'order to the solving thread'],
  ['solve', 'solved there'],
  ['back', 'answer to the page'],
  ['state', 'answer to words'],
  ['paint', 'after that: words to frame'],
  ['rest', 'after that: words to the rest of the page'],
];

/** Steps a field of the card by its Up key and follows each step to the five answers and beyond. */
export const stepped = (page: Page, label: string, times: number): Promise<Stages[]> =>
  page.evaluate(
    async ([name, count]) => {
      interface Heard {
        kind: string;
        times?: { began: number; ready: number };
      }
      const bar = document.querySelector('.verdicts')!;
      const now = { posted: 0, heard: 0, began: 0, ready: 0, whole: 0 };
      const known = new Set<Worker>();
      const { postMessage } = Worker.prototype;
      // the thread is met when the first order is given; what it says is heard after the page has
      Worker.prototype.postMessage = function post(this: Worker, ...said: Parameters<typeof postMessage>) {
        if ((said[0] as Heard).kind === 'edit') now.posted = performance.now();
        if (!known.has(this)) {
          known.add(this);
          this.addEventListener('message', (event: MessageEvent<Heard>) => {
            const { kind, times } = event.data;
            if (kind === 'short' && now.heard === 0 && times) {
              now.heard = event.timeStamp;
              now.began = times.began - performance.timeOrigin;
              now.ready = times.ready - performance.timeOrigin;
            }
            if (kind === 'solved' && now.heard > 0 && now.whole === 0) now.whole = performance.now();
          });
        }
        return postMessage.apply(this, said);
      } as typeof postMessage;
      const frame = (): Promise<number> =>
        new Promise((done) => {
          requestAnimationFrame(() => {
            const { port1, port2 } = new MessageChannel();
            port1.onmessage = () => done(performance.now());
            port2.postMessage(null);
          });
        });
      const until = async (is: () => boolean): Promise<void> => {
        const began = performance.now();
        while (!is() && performance.now() - began < 5000) await new Promise((done) => setTimeout(done, 5));
      };
      const out: Stages[] = [];
      for (let i = 0; i < count; i += 1) {
        const input = [...document.querySelectorAll<HTMLInputElement>('.card .field input')].find(
          (element) => element.labels?.[0]?.textContent === name,
        )!;
        Object.assign(now, { posted: 0, heard: 0, began: 0, ready: 0, whole: 0 });
        const key = performance.now();
        const changed = new Promise<number>((done) => {
          const watch = new MutationObserver((records) => {
            // the marking as busy is no answer
            if (!records.some(({ type }) => type !== 'attributes')) return;
            watch.disconnect();
            done(performance.now());
          });
          watch.observe(bar, { childList: true, characterData: true, subtree: true });
          setTimeout(() => done(Number.NaN), 5000);
        });
        input.dispatchEvent(new KeyboardEvent('keydown', { key: 'ArrowUp', bubbles: true }));
        const words = await changed;
        const painted = await frame();
        await until(() => now.whole > 0);
        const { posted, began, ready, heard, whole } = now;
        out.push({
          request: posted - key,
          there: began - posted,
          solve: ready - began,
          back: heard - ready,
          state: words - heard,
          total: words - key,
          paint: painted - words,
          rest: whole - words,
        });
        // the junctions of the step before are solved, answered and out of the way
        for (let quiet = 0, began = performance.now(); quiet < 5 && performance.now() - began < 5000; ) {
          await new Promise((done) => setTimeout(done, 60));
          quiet = bar.getAttribute('aria-busy') === 'false' ? quiet + 1 : 0;
        }
      }
      Worker.prototype.postMessage = postMessage;
      return out;
    },
    [label, times] as const,
  );
