import type { Client } from '../../main/contract/client.ts';
import type { EventData } from '../../main/contract/contract.ts';

/** Work that the host does in a thread of its own, and how it ends. */

type JobEvent = 'note' | 'mask';

/**
 * Starts a job and resolves with its last state. The event may come before the reply that names the
 * job, so all that come meanwhile are kept.
 */
export async function follow<E extends JobEvent>(
  client: Client,
  event: E,
  start: () => Promise<{ readonly job: number }>,
  each: (state: EventData<E>) => void = () => undefined,
): Promise<EventData<E>> {
  const early: EventData<E>[] = [];
  let job: number | null = null;
  let done: (state: EventData<E>) => void = () => undefined;
  const ended = new Promise<EventData<E>>((resolve) => {
    done = resolve;
  });
  const take = (state: EventData<E>): void => {
    if (job === null) early.push(state);
    else if (state.job === job) {
      each(state);
      if (state.state !== 'running') done(state);
    }
  };
  const stop = client.on(event, take);
  try {
    ({ job } = await start());
    for (const state of early) take(state);
    return await ended;
  } finally {
    stop();
  }
}
