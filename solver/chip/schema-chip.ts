import type { z } from 'zod';
import type { FluidSpec } from '../fluid/spec.ts';
import { BOUNDS } from './bounds.ts';
import type { Chip, Limit, Target } from './chip.ts';
import type { Acceptance, Process } from './making.ts';
import type { Assay, Rating } from './running.ts';
import { checkChip } from './schema-check.ts';
import { nm } from './schema-data.ts';
import { PART } from './schema-data-parts.ts';
import { fluid, limits, targets } from './schema-data-terms.ts';
import { Fault, faultToProblem } from './schema-fault.ts';
import { choice, keyed, list, text } from './schema-fields.ts';
import { accepted, orNone, processData } from './schema-making.ts';
import { parseWith } from './schema-parse.ts';
import { assayData, ratingData } from './schema-running.ts';

/** The keys of a chip that are set whole. */
export interface TopOf {
  readonly name: string;
  readonly note: string;
  readonly lengthUnit: Chip['lengthUnit'];
  readonly outline: Chip['outline'];
  readonly fluid: FluidSpec;
  readonly targets: readonly Target[];
  readonly limits: readonly Limit[];
  /** Null takes the key away. */
  readonly process: Process | null;
  readonly accepted: readonly Acceptance[] | null;
  readonly rating: Rating | null;
  readonly assay: Assay | null;
}
export type TopKey = keyof TopOf;

export const TOP: { readonly [K in TopKey]: z.ZodType<TopOf[K]> } = {
  name: text(BOUNDS.name),
  note: text(BOUNDS.note, true),
  lengthUnit: choice(['nm', 'um', 'mm', 'cm', 'm']),
  outline: keyed({ width: nm, height: nm }, { width: '76000000', height: '26000000' }),
  fluid,
  targets,
  limits,
  process: orNone(processData),
  accepted: orNone(accepted),
  rating: orNone(ratingData),
  assay: orNone(assayData),
};

const { process: _process, accepted: _accepted, rating: _rating, assay: _assay, ...NEEDED } = TOP;

const whole = keyed(
  {
    ...NEEDED,
    process: processData.exactOptional(),
    accepted: accepted.exactOptional(),
    rating: ratingData.exactOptional(),
    assay: assayData.exactOptional(),
    keepOuts: list(PART.keepOuts, BOUNDS.keepOuts).exactOptional(),
    layers: list(PART.layers, BOUNDS.layers),
    channels: list(PART.channels, BOUNDS.channels),
    chambers: list(PART.chambers, BOUNDS.chambers),
    vias: list(PART.vias, BOUNDS.vias),
    ports: list(PART.ports, BOUNDS.ports),
  },
  Object.fromEntries(
    [...Object.keys(NEEDED), 'layers', 'channels', 'chambers', 'vias', 'ports'].map((key) => [
      key,
      'its value',
    ]),
  ),
);

/** A chip that came as data, checked like one that a person wrote. Throws `Problem`. */
export function readChip(value: unknown): Chip {
  try {
    const { keepOuts, ...drawn } = parseWith(whole, value);
    const chip: Chip = keepOuts?.length ? { ...drawn, keepOuts } : drawn;
    checkChip(chip);
    return chip;
  } catch (error) {
    if (error instanceof Fault) throw faultToProblem(error, value, 'The chip');
    throw error;
  }
}
