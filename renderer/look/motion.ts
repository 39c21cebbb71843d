import { wish } from './media.ts';

const still = wish('(prefers-reduced-motion: reduce)');

/** Whether the system lets things move. */
export const motionAllowed = (): boolean => !still.holds();

/** Calls `listener` when that changes; returns how to stop. */
export const onMotion = still.listen;
