import { cellHand } from './cell-hand.ts';
import type { News, Order } from './messages.ts';
import { solvingThread } from './thread.ts';
import { afterMessages } from './turn.ts';

// The thread's global scope, as far as it is used here; the page's own types have no worker.
interface Scope {
  postMessage(news: News, transfer?: Transferable[]): void;
  addEventListener(kind: 'message', listener: (event: MessageEvent<Order>) => void): void;
}
const scope = globalThis as unknown as Scope;

const order = solvingThread(
  // what is to be kept is large and not looked at again
  (news) => scope.postMessage(news, news.kind === 'keep' ? [news.cell.bytes.buffer as ArrayBuffer] : []),
  afterMessages(),
  cellHand(),
);
scope.addEventListener('message', (event) => order(event.data));
