import { z } from 'zod';
import { Fault } from './schema-fault.ts';

/** A step of a schema that may throw a `Fault`. */
export const step =
  <I, O>(build: (value: I) => O) =>
  (value: I, ctx: z.RefinementCtx): O => {
    try {
      return build(value);
    } catch (error) {
      if (!(error instanceof Fault)) throw error;
      ctx.issues.push({ code: 'custom', input: value, params: { fault: error } });
      return z.NEVER;
    }
  };

/** The value that `schema` makes of `input`, or the first fault it finds. */
export function parseWith<T>(schema: z.ZodType<T>, input: unknown): T {
  const result = schema.safeParse(input);
  if (result.success) return result.data;
  const [issue] = result.error.issues;
  const path = (issue?.path ?? []).filter((key) => typeof key !== 'symbol');
  const fault: unknown = issue?.code === 'custom' ? issue.params?.fault : undefined;
  if (fault instanceof Fault) throw new Fault(fault.kind, fault.what, fault.remedy, [...path, ...fault.path]);
  throw new Fault(
    'quantity',
    'is not what is expected here.',
    'See the format of the chip description.',
    path,
  );
}
