import { overBytes, type Transport } from './client.ts';

/** What the desktop's preload puts on the page as `window.channelwright`: named functions, no more. */
export interface Bridge {
  /** One request and its reply, both as `wire.ts` writes them. */
  call(name: string, body: Uint8Array): Promise<Uint8Array>;
  /** Events as name and JSON text. */
  listen(listener: (name: string, data: string) => void): () => void;
  /** Where a file dropped on the window lies; '' where it has no place. */
  pathOf(file: unknown): string;
}

/** Requests and events through the preload. */
export function desktopTransport(bridge: Bridge): Transport {
  return {
    call: overBytes((name, body) => bridge.call(name, body)),
    listen: (listener) => bridge.listen((name, data) => listener(name, JSON.parse(data))),
  };
}
