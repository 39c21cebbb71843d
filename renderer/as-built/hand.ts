import type { BuiltNews, BuiltOrder } from './messages.ts';

/** A thread that works out made chips, so that the sheet stays at hand meanwhile. */
export interface BuiltHand {
  /** The newest order's answer; null where it was stopped, or another took its place. */
  ask(order: Omit<BuiltOrder, 'id'>): Promise<BuiltNews | null>;
  stop(): void;
}

export function builtHand(): BuiltHand {
  let worker: Worker | null = null;
  let last = 0;
  let answer: ((news: BuiltNews | null) => void) | null = null;
  const stop = (): void => {
    worker?.terminate();
    worker = null;
    answer?.(null);
    answer = null;
  };
  const start = (): Worker => {
    const thread = new Worker(new URL('./worker.ts', import.meta.url), { type: 'module', name: 'as built' });
    thread.addEventListener('message', ({ data }: MessageEvent<BuiltNews>) => {
      if (data.id !== last) return;
      answer?.(data);
      answer = null;
    });
    return thread;
  };
  return {
    ask(order) {
      // What is under way is of no use any more.
      if (answer) stop();
      worker ??= start();
      last += 1;
      const id = last;
      return new Promise((resolve) => {
        answer = resolve;
        worker!.postMessage({ ...order, id } satisfies BuiltOrder);
      });
    },
    stop,
  };
}
