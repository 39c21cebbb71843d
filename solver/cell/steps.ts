/** Work in steps: between them something else may be done, or it may be left for good. */
export type Steps<T> = Generator<undefined, T>;

/** What work in steps comes to, done in one go. */
export function finished<T>(steps: Steps<T>): T {
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
  }
}
