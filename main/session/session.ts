import type { EventData, EventName } from '../contract/contract.ts';
import type { SessionSettings } from './messages.ts';

/** What one window has open, in its own thread. */
export class Session {
  readonly settings: SessionSettings;
  readonly #send: (name: string, data: unknown) => void;

  constructor(settings: SessionSettings, send: (name: string, data: unknown) => void) {
    this.settings = settings;
    this.#send = send;
  }

  emit<N extends EventName>(name: N, data: EventData<N>): void {
    this.#send(name, data);
  }

  /** Closes what is open; everything acknowledged is kept. */
  async close(): Promise<void> {}
}
