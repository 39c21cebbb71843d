import type { Chip } from '../../solver/chip/chip.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
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

/** Tells chips apart by their descriptions: their length and 53 bits of a hash (cyrb53) over them. */
export function fingerprint(chip: Chip): string {
  const text = writeDescription(chip);
  let a = 0xdeadbeef;
  let b = 0x41c6ce57;
  for (let i = 0; i < text.length; i += 1) {
    const code = text.charCodeAt(i);
    a = Math.imul(a ^ code, 2654435761);
    b = Math.imul(b ^ code, 1597334677);
  }
  a = Math.imul(a ^ (a >>> 16), 2246822507) ^ Math.imul(b ^ (b >>> 13), 3266489909);
  b = Math.imul(b ^ (b >>> 16), 2246822507) ^ Math.imul(a ^ (a >>> 13), 3266489909);
  return `${text.length}-${(4294967296 * (2097151 & b) + (a >>> 0)).toString(36)}`;
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
