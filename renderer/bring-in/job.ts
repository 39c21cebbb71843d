import type { BringInSettings } from '../../main/contract/bring-in.ts';
import type { Client } from '../../main/contract/client.ts';
import type { Input, Output } from '../../main/contract/contract.ts';

export interface Running {
  readonly taken: Promise<Output<'bringIn.take'> | null>;
  cancel(): void;
}

/** Runs one job to its end; null where it was cancelled, a `Problem` where it failed. */
export function runJob(
  client: Client,
  file: Input<'bringIn.start'>['file'],
  settings: BringInSettings | null,
  onStep: (part: number, says: string) => void,
): Running {
  let job = 0;
  let stopped = false;
  let settle: (done: 'ended' | 'cancelled') => void = () => undefined;
  const over = new Promise<'ended' | 'cancelled'>((done) => {
    settle = done;
  });
  // Small drawings may end before the answer that names their job.
  const early = new Map<number, string>();
  const stop = client.on('bringIn', (event) => {
    if (job === 0) early.set(event.job, event.state);
    if (event.job !== job) return;
    if (event.state === 'running') onStep(event.part, event.says);
    else settle(event.state === 'cancelled' ? 'cancelled' : 'ended');
  });
  const run = async (): Promise<Output<'bringIn.take'> | null> => {
    try {
      ({ job } = await client.call('bringIn.start', { file, settings }));
      const state = early.get(job);
      if (state && state !== 'running') settle('ended');
      if (stopped) await client.call('bringIn.cancel', { job }).catch(() => undefined);
      if ((await over) === 'cancelled' || stopped) return null;
      return await client.call('bringIn.take', { job });
    } finally {
      stop();
    }
  };
  return {
    taken: run(),
    cancel() {
      stopped = true;
      settle('cancelled');
      if (job > 0) void client.call('bringIn.cancel', { job }).catch(() => undefined);
    },
  };
}
