/** One thing that the checks of buildability or validity have to say about a chip that can be solved. */
export type Severity = 'stop' | 'warn' | 'note';

export interface Finding {
  /** From the closed list of the room that raises it. */
  readonly kind: string;
  readonly severity: Severity;
  /** An id ("feed", "port:in", "junction:3", "feed#2") or '' for the whole chip. */
  readonly where: string;
  /** What was found, with the number and the threshold, one or two sentences. */
  readonly says: string;
  /** What to do about it, one sentence. */
  readonly do: string;
  /** Place on the chip in metres, where there is one. */
  readonly at?: readonly [number, number];
  /** The number found and the one it is held against, SI. */
  readonly value?: number;
  readonly threshold?: number;
  /** Likely relative error of flow or shear, where it can be said. */
  readonly error?: number;
  /** The edit that does what `do` says, where that is a number: `ChipEdit` as plain data. */
  readonly remedy?: { readonly label: string; readonly changes: readonly object[] };
  /** Why the designer takes it as it is: it goes on being listed, but no longer decides. */
  readonly accepted?: string;
}
