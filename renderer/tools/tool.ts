import type { Chamber, Channel, Chip, KeepOut, Port, Via } from '../../solver/chip/chip.ts';
import type { TopOf } from '../../solver/chip/schema-chip.ts';
import type { Xy } from '../geometry/vector.ts';
import type { Spatial } from '../sheet/spatial.ts';
import type { Ref } from '../state/ref.ts';

/** A part with its kind, as a tool makes or changes it. */
export type PartValue =
  | { readonly kind: 'channel'; readonly value: Channel }
  | { readonly kind: 'chamber'; readonly value: Chamber }
  | { readonly kind: 'via'; readonly value: Via }
  | { readonly kind: 'port'; readonly value: Port }
  | { readonly kind: 'keep-out'; readonly value: KeepOut };

/** What is of the chip as a whole. */
export type Whole = Partial<
  Pick<Chip, 'name' | 'note' | 'outline' | 'layers' | 'fluid' | 'targets' | 'limits' | 'lengthUnit'> &
    Pick<TopOf, 'process' | 'accepted' | 'rating' | 'assay'>
>;

/** A wish to change the chip: parts to put (new, or in place of those that bear their ids), parts to drop. */
export interface Alteration {
  /** Read after "undo": "widen 3 channels". */
  readonly label: string;
  readonly put?: readonly PartValue[];
  readonly drop?: readonly Ref[];
  readonly set?: Whole;
  /** Parts (or "layer:flow") that get another id; what speaks of them follows. */
  readonly rename?: readonly { readonly ref: Ref; readonly to: string }[];
}

/**
 * What a hand or a keyboard does, without a screen: places are of the plan, in nm. The same list of events
 * always does the same.
 */
export type ToolEvent =
  | {
      readonly kind: 'down' | 'move' | 'up';
      readonly at: Xy;
      /** Snapping held off. */
      readonly free?: boolean;
      /** Added to what is selected; channels go on through what they meet. */
      readonly extend?: boolean;
    }
  | { readonly kind: 'type'; readonly text: string }
  | { readonly kind: 'rub' }
  /** To the next figure that can be typed. */
  | { readonly kind: 'next' }
  | { readonly kind: 'arrow'; readonly direction: Xy; readonly far?: boolean }
  /** The verb of the tool at hand once more. */
  | { readonly kind: 'again' }
  | { readonly kind: 'accept' }
  | { readonly kind: 'leave' };

export type PlaceEvent = Extract<ToolEvent, { readonly at: Xy }>;

/** What a tool sees. */
export interface Scope {
  readonly chip: Chip;
  readonly spatial: Spatial;
  /** What is drawn next lies here. */
  readonly layer: string;
  readonly selection: readonly Ref[];
  /** Parts that are not to be moved. */
  readonly locked?: ReadonlySet<Ref>;
  /** nm: how near the pointer must come, and the step of the grid. */
  readonly reach: number;
  readonly grid: number;
  /** Widths and sizes that were used last. */
  readonly habits: Habits;
  /** Where the keyboard's cursor begins. */
  readonly centre: Xy;
}

export interface Habits {
  readonly channelWidth: number;
  /** Of the bends of channels. */
  readonly bendRadius: number;
  readonly portDiameter: number;
  readonly viaDiameter: number;
}

export const FIRST_HABITS: Habits = {
  channelWidth: 200_000,
  bendRadius: 0,
  portDiameter: 750_000,
  viaDiameter: 400_000,
};

/** What comes of an event. */
export interface Outcome<S> {
  readonly state: S;
  readonly alter?: Alteration;
  readonly select?: readonly Ref[];
  readonly habits?: Partial<Habits>;
  /** Another tool is wanted, or the card to be typed into. */
  readonly goes?: 'select' | 'card';
  /** Why something was not done. */
  readonly says?: string;
}

/** One figure at the pointer; those that can be typed over say what was typed. */
export interface ReadoutLine {
  readonly name: string;
  readonly figure: string;
  /** What is being typed here, where this is the field at hand. */
  readonly typing?: string;
  readonly fault?: string;
}

/** What a tool shows beside the chip. */
export interface Preview {
  /** The chip as it would be; drawn in place of the parts that bear the same ids. */
  readonly parts?: readonly PartValue[];
  readonly hides?: readonly Ref[];
  readonly guide?: readonly [Xy, Xy] | null;
  readonly box?: readonly [Xy, Xy] | null;
  /** A place to mark with a cross. */
  readonly cursor?: Xy | null;
  readonly readout?: readonly ReadoutLine[];
  /** One sentence: what the next step is. */
  readonly hint?: string;
}

export interface Tool<S> {
  readonly name: ToolName;
  start(scope: Scope): S;
  on(state: S, event: ToolEvent, scope: Scope): Outcome<S>;
  preview(state: S, scope: Scope): Preview;
}

export const TOOL_NAMES = [
  'select',
  'channel',
  'chamber',
  'port',
  'via',
  'serpentine',
  'split tree',
  'gradient tree',
  'row of chambers',
  'posts',
  'measure',
  'keep-out',
] as const;
export type ToolName = (typeof TOOL_NAMES)[number];

/** "channel 3": the first number under which no part of the chip is known. */
export function freshId(chip: Chip, stem: string, taken?: ReadonlySet<string>): string {
  const ids = taken ?? takenIds(chip);
  for (let n = 1; ; n += 1) {
    const id = `${stem} ${n}`;
    if (!ids.has(id)) return id;
  }
}

/** Every id that parts of the chip bear; layers have their own. */
export function takenIds(chip: Chip): Set<string> {
  const ids = new Set<string>();
  for (const list of [chip.channels, chip.chambers, chip.vias, chip.ports, chip.keepOuts ?? []])
    for (const part of list) ids.add(part.id);
  return ids;
}
