import type { Chip } from '../../../solver/chip/chip.ts';
import { metres } from '../../../solver/chip/units.ts';
import { Problem } from '../../../solver/problem/problem.ts';
import type { MaskFormat, MaskOptions, MaskPlaneReport, MaskReport } from '../../contract/mask.ts';
import { PARTS, shifts } from './cells.ts';
import { compare } from './compare.ts';
import { openingFindings } from './findings.ts';
import { FORMATS } from './formats.ts';
import { Loops } from './loops.ts';
import { type MaskModel, type MaskPlane, maskModel } from './model.ts';
import { fileName } from './names.ts';
import { unreadable } from './read.ts';
import { type MaskSettings, maskSettings } from './settings.ts';
import { areaOf, perimeterOf } from './shapes.ts';

export interface MaskFile {
  readonly name: string;
  readonly content: Uint8Array;
}

export interface Masks {
  /** One for each of the report's files, in the same order. */
  readonly files: readonly MaskFile[];
  readonly report: MaskReport;
}

export interface MaskRequest {
  readonly formats: readonly MaskFormat[];
  readonly options: MaskOptions;
  /** Of the program, for the notes on the masks. */
  readonly version: string;
  readonly made: Date;
  readonly onStep?: (part: number, says: string) => void;
}

/**
 * Masks of a chip in the formats asked for: drawn, written as bytes, read back and compared. Throws a
 * `Problem` where one cannot be made, or does not read back as it was to be drawn; writes nothing.
 */
export async function makeMasks(chip: Chip, request: MaskRequest): Promise<Masks> {
  const { formats, options, version, made, onStep } = request;
  onStep?.(0, 'Reading the drawing.');
  const settings = maskSettings(chip, options);
  const model = maskModel(chip, settings, { version, made });
  const jobs = [...new Set(formats)].flatMap((format) =>
    parts(model, FORMATS[format].onePlane).map((some) => ({ format, ...some })),
  );
  const files: MaskFile[] = [];
  const told: MaskReport['files'] = [];
  for (const [i, { format, model: some, suffix }] of jobs.entries()) {
    const { extension, unit, fileUnit, write, read } = FORMATS[format];
    onStep?.((i + 0.5) / (jobs.length + 0.5), `Writing and reading back ${extension.toUpperCase()}.`);
    const content = await write(some);
    const compared = checked(some, await read(content), FORMATS[format].arcs, format);
    const name = `${fileName(chip.name)}.${suffix}mask-${fileUnit}.${extension}`;
    files.push({ name, content });
    told.push({ name, path: null, format, size: content.length, unit, compared });
  }
  onStep?.(1, 'Done.');
  return { files, report: reportOf(chip, model, told) };
}

/** The whole model, or one of each drawing. */
function parts(model: MaskModel, onePlane: boolean): { model: MaskModel; suffix: string }[] {
  if (!onePlane && !model.settings.separate) return [{ model, suffix: '' }];
  return model.planes.map((plane) => ({
    model: { ...model, planes: [plane] },
    suffix: `${plane.key.toLowerCase().replaceAll('_', '-')}.`,
  }));
}

/** What `read` found against the model; throws where the file would not make what was drawn. */
function checked(
  model: MaskModel,
  found: Awaited<ReturnType<(typeof FORMATS)[MaskFormat]['read']>>,
  arcs: number,
  format: MaskFormat,
): MaskReport['files'][number]['compared'] {
  const { planes, settings } = model;
  const places = shifts(model);
  const key = ([x, y]: readonly [number, number]): string => `${Math.round(x)} ${Math.round(y)}`;
  const got = new Set(found.shifts.map(key));
  if (got.size !== places.length || places.some((place) => !got.has(key(place))))
    throw unreadable('the chips are not where they were set');
  return planes.flatMap((plane) =>
    PARTS.flatMap((part) => {
      const shapes = plane[part];
      const loops = found.loops.get(FORMATS[format].layer(plane, part)) ?? new Loops();
      if (shapes.length === 0) return [];
      const { difference, allowed } = compare(shapes, loops, settings.chordError, arcs, found.offArc);
      if (!(difference <= allowed)) {
        throw new Problem(
          'output',
          `As ${format.toUpperCase()}, ${part} of "${plane.name}" read back differ from the drawing by ${squareUm(difference)}, more than the ${squareUm(allowed)} that the chord error allows. Nothing was written.`,
          plane.name,
          'This is a fault of the program; keep the chip so that it can be found.',
        );
      }
      if (part !== 'cavities') return [];
      return [{ plane: plane.name, difference: squareMetres(difference), allowed: squareMetres(allowed) }];
    }),
  );
}

const squareMetres = (nm2: number): number => metres(metres(nm2));
const squareUm = (nm2: number): string => `${(nm2 / 1e6).toPrecision(3)} µm²`;

function reportOf(chip: Chip, model: MaskModel, files: MaskReport['files']): MaskReport {
  const { planes, settings, wafer, centre, notes } = model;
  return {
    format: 'channelwright-masks',
    version: 1,
    chip: chip.name,
    options: optionsOf(settings),
    planes: planes.map(planeReport),
    placed: (wafer?.centres ?? [centre]).map(([x, y]) => [metres(x), metres(y)] as [number, number]),
    files,
    findings: openingFindings(chip, settings),
    notes: [...planes.flatMap((plane) => plane.notes.map((note) => `${plane.name}: ${note}`)), ...notes],
  };
}

function planeReport({ name, kind, number, cavities, undercut, scale }: MaskPlane): MaskPlaneReport {
  return {
    name,
    kind,
    number,
    cavities: cavities.length,
    area: squareMetres(areaOf(cavities)),
    perimeter: metres(perimeterOf(cavities)),
    undercut: metres(undercut),
    scale,
  };
}

/** Settings as numbers a script can use, lengths in m. */
function optionsOf(settings: MaskSettings): MaskReport['options'] {
  const {
    layers,
    chordError,
    lane,
    markUnit,
    wafer,
    mirror,
    polarity,
    pads,
    marks,
    labels,
    outline,
    separate,
  } = settings;
  return {
    layers: layers.map(({ layer }) => layer.id),
    chordError: metres(chordError),
    undercut: Object.fromEntries(layers.map(({ layer, undercut }) => [layer.id, metres(undercut)])),
    shrink: Object.fromEntries(layers.map(({ layer, shrink }) => [layer.id, shrink])),
    mirror,
    polarity,
    pads,
    marks,
    markLine: metres(markUnit),
    labels,
    outline,
    lane: metres(lane),
    wafer: wafer && {
      diameter: metres(wafer.diameter),
      edge: metres(wafer.edge),
      ...(wafer.pitch ? { pitch: wafer.pitch.map(metres) } : {}),
    },
    separate,
  };
}
