import type { Transport } from './client.ts';
import type { Reply } from './contract.ts';

/** What the desktop's preload puts on the page as `window.channelwright`: two named functions, no more. */
export interface Bridge {
  call(name: string, input: unknown): Promise<Reply>;
  listen(listener: (name: string, data: unknown) => void): () => void;
  /** Where a file dropped on the window lies; '' where it has no place. */
  pathOf(file: unknown): string;
}

/** Requests and events through the preload; byte arrays pass as they are. */
export function desktopTransport(bridge: Bridge): Transport {
  return { call: (name, input) => bridge.call(name, input), listen: (listener) => bridge.listen(listener) };
}
