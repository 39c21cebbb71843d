import type { z } from 'zod';
import { BOUNDS } from './bounds.ts';
import type { LengthUnit } from './chip.ts';
import { defined } from './description-parts.ts';
import { type Acceptance, PROCESS_KINDS, type Process } from './making.ts';
import { field, nm, si } from './schema-data.ts';
import { choice, keyed, list, plan, quantity, text } from './schema-fields.ts';
import { parseWith } from './schema-parse.ts';

/** The process and what is accepted: as a description has them and as data has them. */

const NEEDS = { kind: '"film-mask"' };

export const process = (unit: LengthUnit) =>
  keyed(
    {
      kind: choice(PROCESS_KINDS),
      leastWidth: plan(unit).optional(),
      leastGap: plan(unit).optional(),
      toolRadius: plan(unit).optional(),
      edge: plan(unit).optional(),
      alignment: plan(unit).optional(),
      deepest: quantity('number').optional(),
      widest: quantity('number').optional(),
      wall: quantity('number').optional(),
      undercut: quantity('number').optional(),
      modulus: quantity('modulus').optional(),
    },
    NEEDS,
  ).transform((value): Process => defined(value));

export const processData: z.ZodType<Process> = keyed(
  {
    kind: choice(PROCESS_KINDS),
    leastWidth: nm.exactOptional(),
    leastGap: nm.exactOptional(),
    toolRadius: nm.exactOptional(),
    edge: nm.exactOptional(),
    alignment: nm.exactOptional(),
    deepest: si.exactOptional(),
    widest: si.exactOptional(),
    wall: si.exactOptional(),
    undercut: si.exactOptional(),
    modulus: si.exactOptional(),
  },
  NEEDS,
);

const acceptance: z.ZodType<Acceptance> = keyed(
  { kind: text(BOUNDS.id), where: text(BOUNDS.name), reason: text(BOUNDS.note, true) },
  { kind: '"least-width"', where: '"feed"', reason: '"made so before"' },
);
export const accepted = list(acceptance, BOUNDS.accepted, 1);

/** `null` in an edit takes the key away. */
export const orNone = <T>(shape: z.ZodType<T>): z.ZodType<T | null> =>
  field((value) => (value === null ? null : parseWith(shape, value)));
