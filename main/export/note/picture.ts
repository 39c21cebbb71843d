/** A drawing as a list of things to draw, in millimetres of paper, x to the right and y down. */

export type Mm = number;
export type At = readonly [Mm, Mm];

/** What a line or body is made of, from darkest to paper. */
export type Tone = 'ink' | 'soft' | 'line' | 'body' | 'paper';

export type Item =
  | {
      readonly kind: 'shape';
      /** Loops of a body (outer and holes, even-odd), or open lines. */
      readonly loops: readonly (readonly At[])[];
      readonly closed: boolean;
      readonly fill?: Tone;
      readonly stroke?: Tone;
      /** Of the stroke, mm. */
      readonly weight?: Mm;
      readonly dashed?: boolean;
    }
  | {
      readonly kind: 'disc';
      readonly at: At;
      readonly radius: Mm;
      readonly fill?: Tone;
      readonly stroke?: Tone;
      readonly weight?: Mm;
    }
  | {
      readonly kind: 'label';
      /** Of the baseline's start, middle or end. */
      readonly at: At;
      readonly text: string;
      /** Of the type, mm. */
      readonly size: Mm;
      readonly anchor: 'start' | 'middle' | 'end';
      readonly tone?: Tone;
      readonly strong?: boolean;
      /** Paper behind it, so that it can be read over bodies. */
      readonly cleared?: boolean;
      /** Reads upward. */
      readonly upward?: boolean;
    };

export interface Picture {
  readonly width: Mm;
  readonly height: Mm;
  readonly items: readonly Item[];
  readonly caption: string;
  /** What it shows, in words, for those who do not see it. */
  readonly alt: string;
}

/** Millimetres of a point (1/72 inch). */
export const MM_PER_POINT = 25.4 / 72;
