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
}
