import { Problem } from '../../solver/problem/problem.ts';

/** What a drawing may hold at most; more is refused by name before it costs memory or time. */
export const LIMITS = {
  /** Bytes of a file. */
  bytes: 64 * 1024 * 1024,
  /** Entities, those of references counted as often as they are placed. */
  entities: 200_000,
  /** Pairs of group code and value of a DXF: of one entity, and of all that are kept. */
  groups: 1_000_000,
  allGroups: 3_000_000,
  /** Vertices of all of them together, curves cut to chords. */
  vertices: 2_000_000,
  /** References inside references. */
  depth: 16,
  /** Elements inside elements of an SVG. */
  nesting: 64,
  layers: 256,
  /** Sorts of things not understood that are told apart; further ones are counted together. */
  notes: 200,
  /** Characters of a name. */
  name: 64,
  /** Everything lies within this of the origin, in drawing units. */
  coordinate: 1e12,
} as const;

export type Stage = 'reading' | 'uniting' | 'recognising' | 'comparing';

/** Told now and then how far the work is; `share` from 0 to 1 within the stage. */
export type Watch = (stage: Stage, share: number) => void;

/** The clock is looked at once in so many ticks. */
const TICKS = 2048;

/** Counts what is made of a file and stops the work where a bound or the time is passed. */
export class Work {
  entities = 0;
  vertices = 0;
  readonly #watch: Watch;
  readonly #end: number;
  readonly #seconds: number;
  #groups = 0;
  #ticks = 0;
  #told = -1;
  #stage: Stage = 'reading';

  /** `seconds`: how long the thread may work on it in all. */
  constructor(watch: Watch = () => undefined, seconds = 60) {
    this.#watch = watch;
    this.#seconds = seconds;
    this.#end = processorTime() + seconds * 1e6;
  }

  stage(stage: Stage): void {
    this.#stage = stage;
    this.#told = -1;
    this.at(0);
  }

  /** Tells how far the stage is, where that has moved by a hundredth. */
  at(share: number): void {
    this.tick(32);
    const hundredth = Math.floor(Math.min(1, Math.max(0, share)) * 100);
    if (hundredth === this.#told) return;
    this.#told = hundredth;
    this.#watch(this.#stage, hundredth / 100);
  }

  tick(count = 1): void {
    this.#ticks += count;
    if (this.#ticks < TICKS) return;
    this.#ticks = 0;
    if (processorTime() < this.#end) return;
    throw new Problem(
      'too-many',
      `Bringing in this drawing took more than ${this.#seconds} s of work and was stopped.`,
      '',
      'Leave out layers that are not needed, or split the drawing.',
    );
  }

  entity(where: string): void {
    this.entities += 1;
    this.tick();
    if (this.entities <= LIMITS.entities) return;
    throw tooMany('entities', LIMITS.entities, where);
  }

  /** Refuses `count` vertices to come before they are built. */
  room(count: number, where: string): void {
    if (this.vertices + count > LIMITS.vertices) throw tooMany('vertices', LIMITS.vertices, where);
  }

  /** `count` more groups of a DXF entity. */
  group(count: number, where: string): void {
    this.#groups += count;
    if (this.#groups > LIMITS.allGroups) throw tooMany('groups', LIMITS.allGroups, where);
  }

  /** `count` more vertices. */
  points(count: number, where: string): void {
    this.vertices += count;
    this.tick(count >> 4);
    if (this.vertices <= LIMITS.vertices) return;
    throw tooMany('vertices', LIMITS.vertices, where);
  }
}

/** Microseconds that this thread has worked: a busy machine does not count against a drawing. */
function processorTime(): number {
  const { user, system } = process.threadCpuUsage();
  return user + system;
}

function tooMany(what: string, most: number, where: string): Problem {
  return new Problem(
    'too-many',
    `The drawing holds more than ${most.toLocaleString('en')} ${what}, counting every placed reference.`,
    where,
    'Leave out what is not part of the fluid, or split the drawing.',
  );
}
