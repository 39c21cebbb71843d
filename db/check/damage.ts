/** What is wrong with a file, in words for a person; thrown where the content cannot be relied on. */
export class Damage extends Error {
  readonly reasons: readonly string[];

  constructor(reasons: readonly string[]) {
    super(reasons.join('; '));
    this.name = 'Damage';
    this.reasons = reasons;
  }
}
