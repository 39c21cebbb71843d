/** One edit of the chip: a label people read ("widen 3 channels") and the changes it makes, in order. */
export interface ChipEdit {
  readonly label: string;
  readonly changes: readonly unknown[];
}
