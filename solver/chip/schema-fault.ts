import { Problem, type ProblemKind } from '../problem/problem.ts';

export type Path = (string | number)[];

/**
 * What is wrong at one place of a description or edit. `what` goes on with a sentence that begins with
 * the name of the place: "takes a length; 3 kPa is a pressure."
 */
export class Fault extends Error {
  readonly kind: ProblemKind;
  readonly what: string;
  readonly remedy: string;
  /** From the value that was looked at to the place. */
  readonly path: Path;

  constructor(kind: ProblemKind, what: string, remedy: string, path: Path = []) {
    super(what);
    this.kind = kind;
    this.what = what;
    this.remedy = remedy;
    this.path = path;
  }
}

/** Runs `work`; a fault in it lies at `path` of the value at hand. */
export function at<T>(path: Path, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (error instanceof Fault) error.path.unshift(...path);
    throw error;
  }
}

/** Text from outside as a message may show it: short, on one line. */
export function shown(value: string): string {
  const line = value.slice(0, 80).replace(/[\p{Cc}\p{Zl}\p{Zp}\u202a-\u202e\u2066-\u2069]+/gu, ' ');
  return line.length > 40 ? `${line.slice(0, 40)}…` : line;
}

export const quoted = (value: string): string => `"${shown(value)}"`;

/** A value in a sentence, whatever it is: "3", "null", "the text "wide"", "a list". */
export function valueInWords(value: unknown): string {
  if (typeof value === 'string') return `"${shown(value)}" is text`;
  if (Array.isArray(value)) return 'this is a list';
  if (value !== null && typeof value === 'object') return 'this is a group of keys';
  return `this is ${String(value)}`;
}

/** `["channels", 3, "path", 1]` as channels[3].path[1]. */
function pathText(path: readonly (string | number)[]): string {
  return path
    .map((key, i) =>
      typeof key === 'number'
        ? `[${key}]`
        : `${i === 0 ? '' : '.'}${/^[\w$-]{1,40}$/.test(key) ? key : `"${shown(key)}"`}`,
    )
    .join('');
}

/** The innermost id, or name of a limit, along a path. */
function idAlong(root: unknown, path: readonly (string | number)[]): string | undefined {
  let value = root;
  let id: string | undefined;
  for (const key of path) {
    if (value === null || typeof value !== 'object' || !Object.hasOwn(value, key)) break;
    value = (value as Record<string | number, unknown>)[key];
    if (value === null || typeof value !== 'object') break;
    const { id: own, name } = value as { id?: unknown; name?: unknown };
    if (typeof own === 'string') id = own;
    else if (path[0] === 'limits' && typeof name === 'string') id = name;
  }
  return id;
}

/** A fault as the one message that a person reads; `whole` names the root, as in "The description". */
export function faultToProblem(fault: Fault, root: unknown, whole: string): Problem {
  const last = fault.path.findLastIndex((key) => typeof key === 'string');
  const name = fault.path.length === 0 ? whole : pathText(fault.path.slice(Math.max(0, last)));
  const id = idAlong(root, fault.path);
  const where = pathText(fault.path) + (id === undefined || id.trim() === '' ? '' : ` (${shown(id)})`);
  return new Problem(fault.kind, `${name} ${fault.what}`, where, fault.remedy);
}
