import type { Order } from './messages.ts';
import type { Thread } from './solver.ts';

/** A thread that can be kept from beginning. */
export interface PatientThread extends Thread {
  /** From now on a chip is not begun to be solved, until it is released or somebody asks for more than that. */
  hold(): void;
  release(): void;
}

/** Orders that nobody waits for while the answers to the chip are known already. */
const CAN_WAIT: ReadonlySet<Order['kind']> = new Set(['load', 'look', 'speak']);

export function patient(thread: Thread): PatientThread {
  let holding = false;
  let held: Order[] = [];
  const release = (): void => {
    holding = false;
    const orders = held;
    held = [];
    for (const order of orders) thread.post(order);
  };
  return {
    ...thread,
    hold() {
      holding = true;
    },
    release,
    post(order) {
      if (holding && CAN_WAIT.has(order.kind)) {
        held.push(order);
        return;
      }
      if (holding) release();
      thread.post(order);
    },
  };
}
