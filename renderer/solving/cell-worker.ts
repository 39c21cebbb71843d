import { memoryStore } from '../../solver/cell/store.ts';
import { warmUp } from '../../solver/cell/warm-up.ts';
import { orderedSteps } from '../../solver/lump/cell-order.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { CellNews, CellOrder } from './messages.ts';
import { afterMessages } from './turn.ts';

interface Scope {
  postMessage(news: CellNews): void;
  addEventListener(kind: 'message', listener: (event: MessageEvent<CellOrder>) => void): void;
}
const scope = globalThis as unknown as Scope;

/** What this thread solved itself: copies of one shape in one chip are asked for one after the other. */
const kept = memoryStore(32e6);
const later = afterMessages();

/** Orders begun, the newest last: it goes on first. */
let begun: { readonly id: number; readonly steps: ReturnType<typeof orderedSteps> }[] = [];
let going = false;
/** ms: until then nothing is done. */
let heldUntil = 0;
let timer: ReturnType<typeof setTimeout> | undefined;

const goOn = (): void => {
  const job = begun.at(-1);
  const wait = heldUntil - performance.now();
  going = job !== undefined && wait <= 0;
  clearTimeout(timer);
  if (!job) return;
  if (wait > 0) {
    timer = setTimeout(goOn, wait);
    return;
  }
  const step = job.steps.next();
  if (step.done) {
    begun = begun.filter((other) => other !== job);
    const found = step.value;
    if (found instanceof Problem) {
      const { kind, what, where, remedy } = found;
      scope.postMessage({ id: job.id, problem: { kind, what, where, remedy } });
    } else scope.postMessage({ id: job.id, ...found });
  }
  later(goOn);
};

scope.addEventListener('message', ({ data }) => {
  if (data.kind === 'drop') {
    begun = begun.filter(({ id }) => id !== data.id);
    return;
  }
  if (data.kind === 'hold') {
    heldUntil = performance.now() + data.ms;
    if (!going) goOn();
    return;
  }
  const { id, shape, name, accuracy } = data;
  begun.push({ id, steps: orderedSteps(shape, accuracy, name, kept) });
  if (!going) goOn();
});

/** Junctions solved while nobody asks for any, so that the first that is asked for takes half as long. */
const EXERCISES = 24;

const exercise = (round: number): void => {
  // what waits already is exercise enough
  if (going || begun.length > 0 || round >= EXERCISES) return;
  warmUp(1);
  later(() => exercise(round + 1));
};
later(() => exercise(0));
