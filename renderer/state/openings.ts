import type { Client } from '../../main/contract/client.ts';
import type { ProjectState } from '../../main/contract/contract.ts';
import type { Desk } from './desk.ts';

const OPENING = 'Opening …';

/**
 * Shows what the host opens in this window, each opening once: what is told may have been in the answer
 * to a question already. Resolves when what was open from the start is shown.
 */
export function followOpenings(
  client: Client,
  desk: Pick<Desk, 'open' | 'opening' | 'say'>,
  first: Promise<ProjectState | null>,
): Promise<void> {
  let shown = 0;
  const show = async (asked: Promise<ProjectState | null>): Promise<void> => {
    desk.opening.set(OPENING);
    try {
      const state = await asked;
      if (!state || state.opening === shown) return;
      shown = state.opening;
      await desk.open(OPENING, async () => state);
    } catch (error) {
      desk.say(error instanceof Error ? error.message : '');
    } finally {
      desk.opening.set('');
    }
  };
  const begun = show(first);
  let last = begun;
  client.on('opened', ({ opening }) => {
    last = last.then(async () => {
      if (opening === shown) return;
      await show(client.call('project.state', {}).then(({ state }) => state));
    });
  });
  return begun;
}
