import { cellHand } from './cell-hand.ts';
import type { News, Order } from './messages.ts';
import { solvingThread } from './thread.ts';

// The thread's global scope, as far as it is used here; the page's own types have no worker.
interface Scope {
  postMessage(news: News): void;
  addEventListener(kind: 'message', listener: (event: MessageEvent<Order>) => void): void;
}
const scope = globalThis as unknown as Scope;

const ports = new MessageChannel();
const waiting: (() => void)[] = [];
ports.port1.onmessage = () => waiting.shift()?.();
// a message to oneself comes after the messages that wait already, without the delay of a timer
const later = (work: () => void): void => {
  waiting.push(work);
  ports.port2.postMessage(null);
};

const order = solvingThread((news) => scope.postMessage(news), later, cellHand());
scope.addEventListener('message', (event) => order(event.data));
