import { z } from 'zod';
import { BOUNDS } from './bounds.ts';
import type { Chip, LengthUnit } from './chip.ts';
import { FORMAT, VERSION } from './description-format.ts';
import { parseJson } from './description-json.ts';
import { readPlanLists } from './description-lists.ts';
import { fluid, keepOut, layer, port, via } from './description-parts.ts';
import { limit, target } from './description-terms.ts';
import { checkChip } from './schema-check.ts';
import { Fault, faultToProblem, valueInWords } from './schema-fault.ts';
import { choice, keyed, list, plan, readKeys, text } from './schema-fields.ts';
import { accepted, process } from './schema-making.ts';
import { parseWith } from './schema-parse.ts';
import { assay, rating } from './schema-running.ts';

/** The chip description: JSON text, version 1, which converts to the chip and back without loss. */

const LENGTH_UNITS = ['nm', 'um', 'mm', 'cm', 'm'] as const satisfies readonly LengthUnit[];

const KEYS: ReadonlySet<string> = new Set([
  'format',
  'version',
  'name',
  'note',
  'lengthUnit',
  'outline',
  'layers',
  'channels',
  'chambers',
  'vias',
  'ports',
  'fluid',
  'targets',
  'limits',
  'process',
  'accepted',
  'rating',
  'assay',
  'keepOuts',
]);

const NEEDS = {
  outline: '{ "width": 76000, "height": 26000 }',
  layers: '[{ "id": "flow", "depth": 50 }]',
  ports: '[{ "id": "in", "at": [1000, 13000], "layer": "flow", "drive": { "flow": "10 uL/min" } }]',
  fluid: '{ "name": "water", "temperature": "25 degC" }',
};

const head = z.object({
  name: text(BOUNDS.name).optional(),
  note: text(BOUNDS.note, true).optional(),
  lengthUnit: choice(LENGTH_UNITS).optional(),
});

/** What comes in small numbers, with plan lengths in `unit`. */
function rest(unit: LengthUnit) {
  return z.object({
    outline: keyed({ width: plan(unit), height: plan(unit) }, { width: '76000', height: '26000' }),
    layers: list(layer(unit), BOUNDS.layers),
    vias: list(via(unit), BOUNDS.vias).optional(),
    ports: list(port(unit), BOUNDS.ports),
    fluid,
    targets: list(target, BOUNDS.targets).optional(),
    limits: list(limit, BOUNDS.limits).optional(),
    process: process(unit).optional(),
    accepted: accepted.optional(),
    rating: rating.optional(),
    assay: assay.optional(),
    keepOuts: list(keepOut(unit), BOUNDS.keepOuts).optional(),
  });
}

/** Made when the first description in that unit comes: making all of them takes longer than reading one. */
const made = new Map<LengthUnit, ReturnType<typeof rest>>();
function restIn(unit: LengthUnit): ReturnType<typeof rest> {
  const schema = made.get(unit) ?? rest(unit);
  made.set(unit, schema);
  return schema;
}

function checkVersion(raw: Record<string, unknown>): void {
  if (raw.format !== FORMAT) {
    throw new Fault(
      'format',
      raw.format === undefined ? 'is missing.' : `is not "${FORMAT}"; ${valueInWords(raw.format)}.`,
      `Write "format": "${FORMAT}" if this is a chip description.`,
      ['format'],
    );
  }
  const { version } = raw;
  if (version === VERSION) return;
  const newer = typeof version === 'number' && version > VERSION;
  throw new Fault(
    'format',
    version === undefined
      ? 'is missing.'
      : newer
        ? `is ${version}; this program reads version ${VERSION}.`
        : `takes ${VERSION}; ${valueInWords(version)}.`,
    newer ? 'Open it with a newer release of this program.' : `Write "version": ${VERSION}.`,
    ['version'],
  );
}

function chipOf(value: unknown, fallbackName: string): Chip {
  if (value === null || typeof value !== 'object' || Array.isArray(value)) {
    throw new Fault(
      'format',
      `takes a group of keys; ${valueInWords(value)}.`,
      `Begin with {"format": "${FORMAT}", …}.`,
    );
  }
  checkVersion(value as Record<string, unknown>);
  const raw = readKeys(value, KEYS, NEEDS);
  const { name = fallbackName, note = '', lengthUnit = 'um' } = parseWith(head, raw);
  const parts = parseWith(restIn(lengthUnit), raw);
  const { channels, chambers } = readPlanLists(raw.channels, raw.chambers, lengthUnit);
  return {
    name,
    note,
    lengthUnit,
    outline: parts.outline,
    layers: parts.layers,
    channels,
    chambers,
    vias: parts.vias ?? [],
    ports: parts.ports,
    fluid: parts.fluid,
    targets: parts.targets ?? [],
    limits: parts.limits ?? [],
    ...(parts.process && { process: parts.process }),
    ...(parts.accepted && { accepted: parts.accepted }),
    ...(parts.rating && { rating: parts.rating }),
    ...(parts.assay && { assay: parts.assay }),
    ...(parts.keepOuts?.length && { keepOuts: parts.keepOuts }),
  };
}

/**
 * The chip of a description. `name` is taken where the text gives none. Throws one `Problem`, the first
 * met: JSON first, then keys and quantities, then what holds between them.
 */
export function readDescription(text: string, name = 'untitled'): Chip {
  const value = parseJson(text);
  try {
    const chip = chipOf(value, name);
    checkChip(chip);
    return chip;
  } catch (error) {
    if (error instanceof Fault) throw faultToProblem(error, value, 'The description');
    throw error;
  }
}
