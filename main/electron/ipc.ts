import { type IpcMainInvokeEvent, ipcMain } from 'electron';
import { REQUESTS } from '../contract/contract.ts';
import { isOurs } from './scheme.ts';

/** The one channel by which the page asks, and the one by which it is told. */
export const REQUEST_CHANNEL = 'channelwright:request';
export const EVENT_CHANNEL = 'channelwright:event';

/** Bytes of one request. */
const MOST = 80 * 1024 * 1024;

/** Answers one request of the window with this number of contents. */
export type Answer = (contents: number, name: string, body: Uint8Array) => Promise<Uint8Array>;

/**
 * Takes requests of the page and of nothing else: from the main frame of a window of ours, showing our
 * page, for a request that the contract lists, with bytes of bearable length.
 */
export function takeRequests(answer: Answer): void {
  ipcMain.handle(REQUEST_CHANNEL, async (event, name: unknown, body: unknown): Promise<Uint8Array> => {
    if (!isOurPage(event)) throw new Error('refused');
    if (typeof name !== 'string' || !Object.hasOwn(REQUESTS, name)) throw new Error('refused');
    if (!(body instanceof Uint8Array) || body.length > MOST) throw new Error('refused');
    return await answer(event.sender.id, name, body);
  });
}

function isOurPage(event: IpcMainInvokeEvent): boolean {
  const frame = event.senderFrame;
  return frame !== null && frame === event.sender.mainFrame && isOurs(frame.url);
}
