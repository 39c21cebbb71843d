import { Problem } from '../../solver/problem/problem.ts';
import type { Refusal } from '../contract/contract.ts';

/** What a page may be told of an error: a problem whole, anything else only that it happened. */
export function refusal(error: unknown): Refusal {
  if (error instanceof Problem)
    return { kind: error.kind, what: error.what, where: error.where, remedy: error.remedy };
  if (error instanceof SyntaxError || error instanceof RangeError)
    return {
      kind: 'format',
      what: 'The request cannot be read.',
      where: '',
      remedy: 'Reload the page and try again.',
    };
  return {
    kind: 'output',
    what: 'The program could not do this; what was acknowledged is kept.',
    where: '',
    remedy: 'Try again; if it fails again, save the project under another name and report what you did.',
  };
}
