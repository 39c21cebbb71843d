import type { Chip } from '../../solver/chip/chip.ts';
import type { Solver } from '../solving/solver.ts';
import type { Answer, Margin, Run, Standing } from '../verdict/answer.ts';
import { verdicts } from '../verdict/verdicts.ts';
import type { UnitHabit } from '../words/figure.ts';
import type { Desk } from './desk.ts';
import { keptBy } from './kept-by.ts';

/**
 * The five answers as they were when the project was last at rest, kept with its view: they stand on screen
 * while the chip is solved anew, where it is the same chip, answered by the same build of the program.
 */
export interface KeptAnswers {
  /** The build of the page that set them in words. */
  readonly by: string;
  readonly units: UnitHabit;
  /** What the chip was, by `fingerprint`. */
  readonly of: string;
  readonly answers: readonly Answer[];
}

/** Beyond this many channels to look whether it is the same chip takes longer than it is worth. */
const MOST_CHANNELS = 20_000;
/** ms without news after which answers are kept. */
const QUIET = 2000;

/**
 * Tells chips apart by 64 bits of a hash over all they hold. Walks the data itself, whatever the order of its
 * keys: it is asked for before the page is first drawn, and writing a large description would be a good part of that.
 */
export function fingerprint(chip: Chip): string {
  const lane = (seed: number): string => (hashOf(chip, seed) >>> 0).toString(36);
  return `${lane(0x1b873593)}-${lane(0x2545f491)}`;
}

const real = new Float64Array(1);
const halves = new Uint32Array(real.buffer);

function mixed(hash: number, with32: number): number {
  const h = Math.imul(hash ^ with32, 0x9e3779b1);
  return Math.imul(h ^ (h >>> 15), 0x85ebca77);
}

function hashOf(value: unknown, seed: number): number {
  if (typeof value === 'number') {
    // files know no negative nought
    real[0] = value + 0;
    return mixed(mixed(seed, halves[0]!), halves[1]!);
  }
  if (typeof value === 'string') {
    let h = mixed(seed, value.length);
    for (let i = 0; i < value.length; i += 1) h = mixed(h, value.charCodeAt(i));
    return h;
  }
  if (Array.isArray(value)) {
    let h = mixed(seed, ~value.length);
    for (const entry of value) h = hashOf(entry, h);
    return h;
  }
  if (typeof value !== 'object' || value === null) return mixed(seed, value === null ? 1 : value ? 2 : 3);
  let sum = mixed(seed, 4);
  for (const key in value) {
    const entry = (value as Record<string, unknown>)[key];
    if (entry !== undefined) sum = (sum + hashOf(entry, mixed(seed, keyHash(key)))) | 0;
  }
  return mixed(sum, 5);
}

const keyHashes = new Map<string, number>();
/** Keys are few; names of parts are values. */
function keyHash(key: string): number {
  const known = keyHashes.get(key);
  if (known !== undefined) return known;
  const found = hashOf(key, 0x3c6ef372);
  if (keyHashes.size < 1000) keyHashes.set(key, found);
  return found;
}

/** The kept answers that hold for this chip as this build and these units tell it; null where there are none. */
export function answersKept(
  view: unknown,
  now: { readonly by: string; readonly units: UnitHabit; readonly chip: Chip },
): readonly Answer[] | null {
  if (keptBy(view) !== now.by || now.chip.channels.length > MOST_CHANNELS) return null;
  const { units, of, answers } = (view as { answers: Record<string, unknown> }).answers;
  if (JSON.stringify(units) !== JSON.stringify(now.units) || of !== fingerprint(now.chip)) return null;
  return Array.isArray(answers) && answers.length > 0 && answers.every(isAnswer) ? answers : null;
}

/** Keeps the answers with the project whenever it has come to rest with others than are kept. */
export function keepAnswers(
  desk: Pick<Desk, 'chip' | 'project' | 'keptView' | 'keepView'> & {
    readonly solver: Pick<Solver, 'solved'>;
  },
  now: { readonly by: string; units(): UnitHabit },
  quiet = QUIET,
): () => void {
  let timer: ReturnType<typeof setTimeout> | undefined;
  const keep = (): void => {
    const { chip, result, busy, waiting } = desk.solver.solved.get();
    if (!chip || !result || busy || waiting > 0 || chip !== desk.chip()) return;
    if (desk.project.get()?.mode === 'read-only' || chip.channels.length > MOST_CHANNELS) return;
    const answers: KeptAnswers = {
      by: now.by,
      units: now.units(),
      of: fingerprint(chip),
      answers: verdicts({ chip, result, trouble: '', waiting: 0 }),
    };
    const text = JSON.stringify(answers);
    if (text !== JSON.stringify(desk.keptView().answers)) desk.keepView({ answers: JSON.parse(text) });
  };
  const stop = desk.solver.solved.subscribe(() => {
    clearTimeout(timer);
    timer = setTimeout(keep, quiet);
  });
  return () => {
    clearTimeout(timer);
    stop();
  };
}

// A project file comes from anywhere: what is not an answer as this build sets them is not shown.

const STANDINGS: readonly Standing[] = ['yes', 'no', 'not asked', 'unknown'];
type Loose = Readonly<Record<string, unknown>>;
const isLoose = (value: unknown): value is Loose => typeof value === 'object' && value !== null;
const isText = (value: unknown): value is string => typeof value === 'string';
const isNumber = (value: unknown): value is number => typeof value === 'number' && Number.isFinite(value);
const isRun = (value: unknown): value is Run => isText(value) || (isLoose(value) && isText(value.strong));
const all = (value: unknown, is: (entry: unknown) => boolean): boolean =>
  Array.isArray(value) && value.every(is);

function isMargin(value: unknown): value is Margin {
  if (!isLoose(value)) return false;
  switch (value.kind) {
    case 'dots':
      return (
        all(value.dots, (dot) => isLoose(dot) && isNumber(dot.at)) &&
        isNumber(value.allowed) &&
        all(value.ends, isText)
      );
    case 'bar':
      return (
        isNumber(value.filled) &&
        (value.limit === null || isNumber(value.limit)) &&
        all(value.labels, (label) => isLoose(label) && isNumber(label.at) && isText(label.text))
      );
    case 'band':
      return isNumber(value.half) && isText(value.label);
    default:
      return false;
  }
}

const isAnswer = (value: unknown): value is Answer =>
  isLoose(value) &&
  isText(value.question) &&
  STANDINGS.some((standing) => standing === value.standing) &&
  all(value.says, isRun) &&
  (value.margin === null || isMargin(value.margin)) &&
  (value.culprit === null || isText(value.culprit));
