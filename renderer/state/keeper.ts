import type { Client } from '../../main/contract/client.ts';
import type { Position } from '../../main/contract/contract.ts';
import type { ChipEdit } from '../../solver/chip/edit.ts';
import { Problem } from '../../solver/problem/problem.ts';

/** One thing to be kept by the host, in the order it was done. */
type Deed =
  | { readonly kind: 'edit'; readonly edit: ChipEdit }
  | { readonly kind: 'undo' }
  | { readonly kind: 'redo' };

export interface KeeperEvents {
  /** Acknowledged: it is kept. */
  kept(position: Position): void;
  /** Refused: what was done after it is not kept either; the host's state is the true one. */
  refused(problem: Problem): void;
}

/**
 * ms that a deed waits before it is handed over. The host and the page share the processor with the threads
 * that answer the deed, and the person waits for those.
 */
const AFTER = 30;

/** Hands every deed to the host, one after another; the hand never waits for it. */
export class Keeper {
  private readonly client: Client;
  private readonly events: KeeperEvents;
  private readonly queue: Deed[] = [];
  private seq = 0;
  private working: Promise<void> | null = null;
  /** Begins at once what waits; null where nothing does. */
  private begin: (() => void) | null = null;

  constructor(client: Client, events: KeeperEvents) {
    this.client = client;
    this.events = events;
  }

  /** Begins anew at the host's position. */
  start(seq: number): void {
    this.queue.length = 0;
    this.seq = seq;
  }

  /** True while something is not acknowledged yet. */
  get busy(): boolean {
    return this.queue.length > 0;
  }

  get position(): number {
    return this.seq;
  }

  add(deed: Deed): void {
    this.queue.push(deed);
    this.working ??= this.wait();
  }

  /** Hands over what waits, now: the page is left, or something needs it kept. */
  hurry(): void {
    this.begin?.();
  }

  /** Resolves when all that was added is acknowledged or refused, and has it done without waiting. */
  async settled(): Promise<void> {
    this.hurry();
    await this.quiet();
  }

  /** Resolves when all that was added is acknowledged or refused, in its own time. */
  async quiet(): Promise<void> {
    while (this.working) await this.working;
  }

  private wait(): Promise<void> {
    return new Promise((resolve) => {
      const timer = setTimeout(() => this.begin?.(), AFTER);
      this.begin = () => {
        clearTimeout(timer);
        this.begin = null;
        resolve(this.work());
      };
    });
  }

  private async work(): Promise<void> {
    try {
      for (let deed = this.queue[0]; deed; deed = this.queue[0]) {
        const position = await this.hand(deed);
        this.queue.shift();
        this.seq = position.seq;
        this.events.kept(position);
      }
    } catch (error) {
      this.queue.length = 0;
      this.events.refused(
        error instanceof Problem
          ? error
          : new Problem('output', 'The last change could not be kept.', '', 'Do it once more.'),
      );
    } finally {
      this.working = null;
    }
  }

  private async hand(deed: Deed): Promise<Position> {
    if (deed.kind === 'edit') return this.client.call('project.edit', { edit: deed.edit, seq: this.seq });
    return this.client.call(deed.kind === 'undo' ? 'project.undo' : 'project.redo', {});
  }
}
