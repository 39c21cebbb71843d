/**
 * What stops the program from going on: always three parts (what, where, what to do) and a kind
 * from a closed list. Thrown, caught at the edge (command line, host, page) and shown whole;
 * no stack reaches a person.
 */
export const PROBLEM_KINDS = [
  'not-readable', // the file is not there, or not text
  'syntax', // not JSON
  'format', // not this format, or a newer version of it
  'unknown-key',
  'missing',
  'quantity', // not a quantity, wrong dimension, wrong unit
  'range', // a number outside what is physical or supported
  'too-many', // counts or sizes beyond the bounds
  'duplicate',
  'reference', // an id that nothing bears
  'shape', // a path or outline that encloses nothing, crosses itself, doubles back
  'profile', // a cross-section that cannot be made
  'place', // a port or via where there is no fluid
  'drive', // none, two, or drives that contradict
  'reference-pressure', // no pressure is given anywhere in a connected part
  'fluid',
  'no-flow', // a yield stress that no wall reaches
  'not-converged',
  'memory', // larger than what the machine can hold
  'project', // the project file: newer, foreign, damaged, in use
  'output', // cannot be written
] as const;

export type ProblemKind = (typeof PROBLEM_KINDS)[number];

export class Problem extends Error {
  readonly kind: ProblemKind;
  /** What is wrong, one sentence. */
  readonly what: string;
  /** Where: a key path of the description, an id on the chip, or a file name; '' for the whole. */
  readonly where: string;
  /** What to do about it, one sentence. */
  readonly remedy: string;

  constructor(kind: ProblemKind, what: string, where: string, remedy: string) {
    super(`${where ? `${where}: ` : ''}${what} ${remedy}`);
    this.name = 'Problem';
    this.kind = kind;
    this.what = what;
    this.where = where;
    this.remedy = remedy;
  }
}
