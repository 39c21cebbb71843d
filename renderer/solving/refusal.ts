import { Problem } from '../../solver/problem/problem.ts';
import type { Refused } from './messages.ts';

/** Why there is no answer, in words that may be sent from thread to thread. */
export function refused(error: unknown): Refused {
  if (error instanceof Problem) return { what: error.what, where: error.where, remedy: error.remedy };
  return {
    what: 'The solver stopped at something it was not made for.',
    where: '',
    remedy: 'Undo the last change; the chip itself is kept.',
  };
}
