import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { Ref } from '../state/ref.ts';

/** What the five questions are answered from. */
export interface Evidence {
  readonly chip: Chip;
  /** Null while nothing is solved. */
  readonly result: Result | null;
  /** Why there is no result, one sentence that ends with a full stop; '' where there is one or none was tried. */
  readonly trouble: string;
  /** Junctions still being solved; they count as ideal meanwhile. */
  readonly waiting?: number;
  /** Of something that is being dragged: junctions are solved to preview accuracy alone. */
  readonly preview?: boolean;
}

/**
 * yes and no as they say; 'not asked' where nothing was demanded, so that nothing can be missed; 'unknown'
 * where it could not be judged. Only a no has colour.
 */
export type Standing = 'yes' | 'no' | 'not asked' | 'unknown';

/** A run of a sentence; the worst figure is strong. */
export type Run = string | { readonly strong: string };

/** The margin drawn: how far the answer is from tipping. Shares of the graph's width, 0 to 1. */
export type Margin =
  /** Dots on a track around the middle tick. */
  | {
      readonly kind: 'dots';
      readonly dots: readonly { readonly at: number; readonly worst: boolean; readonly out: boolean }[];
      /** Half width of what is allowed, as a share of half the track. */
      readonly allowed: number;
      readonly ends: readonly [string, string];
    }
  /** A bar from the left and a tick where the limit lies. */
  | {
      readonly kind: 'bar';
      readonly filled: number;
      readonly limit: number | null;
      readonly over: boolean;
      readonly labels: readonly { readonly at: number; readonly text: string }[];
    }
  /** A band around the middle tick, half as wide as `half`. */
  | { readonly kind: 'band'; readonly half: number; readonly label: string };

export interface Answer {
  readonly question: string;
  readonly standing: Standing;
  readonly says: readonly Run[];
  readonly margin: Margin | null;
  /** Where a click leads. */
  readonly culprit: Ref | null;
}

export const strong = (figure: string): Run => ({ strong: figure });

export const plainText = (runs: readonly Run[]): string =>
  runs.map((run) => (typeof run === 'string' ? run : run.strong)).join('');

/** The question that stands first. */
export const FIRST = 'Does it split right?';

/** The answer while there is no result. */
export function unsolved(question: string, { chip, trouble }: Evidence): Answer {
  const empty = chip.channels.length === 0 && chip.chambers.length === 0;
  // the reason is told once, at the question that the flow itself answers
  const why = question === FIRST ? `Not known: ${trouble}` : 'Not known either, for the same reason.';
  const says = empty ? 'Nothing is drawn yet.' : trouble ? why : 'Not solved yet.';
  return { question, standing: 'unknown', says: [says], margin: null, culprit: null };
}

/** Words that a sentence would swallow as its own: "at in" is said as "at port in". */
const LITTLE = /^(in|out|to|at|of|on|up|down|left|right|top|end|a|b|[0-9]+)$/i;

/** A name as people say it: "junction 3" of "junction:3", "well 1" of "port:well 1", "feed" of "feed#1". */
export function placeName(where: string): string {
  if (where === '') return 'the chip';
  const colon = where.indexOf(':');
  if (colon > 0) {
    const kind = where.slice(0, colon);
    const id = where.slice(colon + 1);
    // a name may say what it is of: "channel 1"
    const says = id.startsWith(`${kind} `) || ((kind === 'port' || kind === 'chamber') && !LITTLE.test(id));
    return says ? id : `${kind} ${id}`;
  }
  return where.replace(/#\d+$/, '');
}

/** The reference of a place as results name it: pieces and plain ids are channels. */
export function placeRef(where: string, chip: Chip): Ref | null {
  if (where === '') return null;
  if (where.includes(':')) return where;
  const id = where.replace(/#\d+$/, '');
  for (const [kind, parts] of [
    ['channel', chip.channels],
    ['port', chip.ports],
    ['chamber', chip.chambers],
    ['via', chip.vias],
    ['keep-out', chip.keepOuts ?? []],
  ] as const)
    if (parts.some((part) => part.id === id)) return `${kind}:${id}`;
  return null;
}
