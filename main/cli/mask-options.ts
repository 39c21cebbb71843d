import { parseArgs } from 'node:util';
import { type Kind, NM_PER_M, quantityOrNull } from '../../solver/chip/units.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { MASK_FORMATS, type MaskFormat, type MaskOptions, maskOptions } from '../contract/mask.ts';
import { COMMAND } from './options.ts';

export const MASK_USAGE = `Makes masks of a chip: each layer, and the holes of its ports and vias, as drawings in true size.

  npm run mask -- FILE [--format dxf,gdsii,svg,pdf] [--out PLACE] [options]

  FILE         a chip description (JSON) or a project (.chw)
  --format     dxf (the usual), gdsii, svg, pdf; several with commas
  --out        a folder, or a file whose name the masks take; this folder where absent
  --layer      only this layer; once for each
  --chord      how far a chord may lie off its arc where a format has no arcs; "0.1 um"
  --undercut   what the etch takes under the mask on each side: "5 um" for all layers, or "flow=5 um", once for
               each; where absent as the chip's process and depths have it; 0 for none
  --shrink     how much the part shrinks off its mould: "1.5 %", or "flow=1.5 %", once for each layer
  --mirror     mirrored left to right, for the side of the mould
  --polarity   dark-field (the usual: what is drawn is clear) or clear-field
  --pads       the holes of ports and vias in their layers too
  --lane       width of the dicing lane; "200 um"; 0 for none
  --wafer      an array on a wafer of this diameter, such as "100 mm"
  --edge       ring of the wafer that is kept free; "3 mm"
  --pitch      from chip to chip on the wafer, "24 mm, 16 mm"; as close as can be where absent
  --separate   a file for each layer also in dxf, gdsii and pdf
  --no-marks, --no-labels, --no-outline    leave these out
  --json       writes what was made, and how it read back, as JSON; - for standard output

Exit codes: 0 made and read back the same, 1 made, but finer than the process holds, 2 not readable or not
possible (nothing is written). Every file is read back and compared with the drawing before it is written.
`;

export interface MaskCliOptions {
  readonly file: string;
  readonly out: string;
  readonly json?: string;
  readonly formats: readonly MaskFormat[];
  readonly options: MaskOptions;
}

const HELP = 'Run "npm run mask -- --help" for how to call it.';
const EDGE = 3_000_000;

function parsed(argv: readonly string[]) {
  try {
    return parseArgs({
      args: [...argv],
      allowPositionals: true,
      options: {
        format: { type: 'string', multiple: true },
        out: { type: 'string' },
        json: { type: 'string' },
        layer: { type: 'string', multiple: true },
        chord: { type: 'string' },
        undercut: { type: 'string', multiple: true },
        shrink: { type: 'string', multiple: true },
        mirror: { type: 'boolean' },
        polarity: { type: 'string' },
        pads: { type: 'boolean' },
        lane: { type: 'string' },
        wafer: { type: 'string' },
        edge: { type: 'string' },
        pitch: { type: 'string' },
        separate: { type: 'boolean' },
        'no-marks': { type: 'boolean' },
        'no-labels': { type: 'boolean' },
        'no-outline': { type: 'boolean' },
        help: { type: 'boolean', short: 'h' },
      },
    });
  } catch (error) {
    const [first] = (error as Error).message.split(/\n|\. To specify/);
    throw new Problem('unknown-key', `${first!.replace(/\.$/, '')}.`, COMMAND, HELP);
  }
}

/** The options of a call, or null where only help is asked for. Throws `Problem`. */
export function maskCliOptions(argv: readonly string[]): MaskCliOptions | null {
  const { positionals, values } = parsed(argv);
  if (values.help) return null;
  const [file, ...more] = positionals;
  if (file === undefined || file === '') throw new Problem('missing', 'No file is named.', COMMAND, HELP);
  if (more.length > 0) {
    throw new Problem('too-many', `More than one file is named: ${positionals.join(', ')}.`, COMMAND, HELP);
  }
  for (const [name, value] of Object.entries({ '--out': values.out, '--json': values.json })) {
    if (value === '') throw new Problem('missing', `${name} names no file.`, COMMAND, HELP);
  }
  if (values.wafer === undefined && (values.edge !== undefined || values.pitch !== undefined)) {
    throw new Problem('missing', '--edge and --pitch belong to a wafer.', COMMAND, 'Give --wafer too.');
  }
  const polarity = values.polarity;
  if (polarity !== undefined && polarity !== 'dark-field' && polarity !== 'clear-field') {
    throw new Problem(
      'quantity',
      `--polarity takes dark-field or clear-field, not "${polarity}".`,
      COMMAND,
      'Choose one of the two.',
    );
  }
  const options: MaskOptions = {
    ...(values.layer && { layers: values.layer }),
    ...(values.chord !== undefined && { chordError: lengthOf('--chord', values.chord) }),
    ...(values.undercut && { undercut: perLayer(values.undercut, (text) => lengthOf('--undercut', text)) }),
    ...(values.shrink && {
      shrink: perLayer(values.shrink, (text) => quantityOf('--shrink', text, 'share', '"1.5 %"')),
    }),
    ...(values.mirror && { mirror: true }),
    ...(polarity && { polarity }),
    ...(values.pads && { pads: true }),
    ...(values['no-marks'] && { marks: false }),
    ...(values['no-labels'] && { labels: false }),
    ...(values['no-outline'] && { outline: false }),
    ...(values.lane !== undefined && { lane: lengthOf('--lane', values.lane) }),
    ...(values.separate && { separate: true }),
    ...(values.wafer !== undefined && {
      wafer: {
        diameter: lengthOf('--wafer', values.wafer),
        edge: values.edge === undefined ? EDGE : lengthOf('--edge', values.edge),
        ...(values.pitch !== undefined && { pitch: pitchOf(values.pitch) }),
      },
    }),
  };
  const checked = maskOptions.safeParse(options);
  if (!checked.success) {
    const [issue] = checked.error.issues;
    throw new Problem('range', `${issue!.path.join(' ')}: ${issue!.message}.`, COMMAND, HELP);
  }
  return {
    file,
    out: values.out ?? './',
    ...(values.json === undefined ? {} : { json: values.json }),
    formats: formatsOf(values.format ?? ['dxf']),
    options: checked.data,
  };
}

function formatsOf(given: readonly string[]): MaskFormat[] {
  const names = given.flatMap((text) => text.split(',')).map((text) => text.trim().toLowerCase());
  return [...new Set(names)].map((name) => {
    const format = MASK_FORMATS.find((known) => known === name);
    if (format) return format;
    throw new Problem(
      'format',
      `No mask format "${name}" is known.`,
      COMMAND,
      `Take ${MASK_FORMATS.join(', ')}.`,
    );
  });
}

function quantityOf(name: string, text: string, kind: Kind, example: string): number {
  const value = text.trim() === '0' ? 0 : quantityOrNull(text, kind);
  if (value !== null) return value;
  throw new Problem(
    'quantity',
    `${name} takes a value with its unit, not "${text}".`,
    COMMAND,
    `Give it as ${example}.`,
  );
}

/** Whole nanometres. */
function lengthOf(name: string, text: string): number {
  return Math.round(quantityOf(name, text, 'length', '"5 um"') * NM_PER_M);
}

/** One value for all layers, or by layer: "flow=5 um". A layer's name may itself hold an equals sign. */
function perLayer(texts: readonly string[], read: (text: string) => number): number | Record<string, number> {
  if (texts.length === 1 && !texts[0]!.includes('=')) return read(texts[0]!);
  return Object.fromEntries(
    texts.map((text) => {
      const at = text.lastIndexOf('=');
      if (at > 0) return [text.slice(0, at).trim(), read(text.slice(at + 1))];
      throw new Problem(
        'quantity',
        `"${text}" names no layer.`,
        COMMAND,
        'Give one value for all layers, or one for each as flow="5 um".',
      );
    }),
  );
}

function pitchOf(text: string): [number, number] {
  const parts = text.split(',');
  if (parts.length > 2) {
    throw new Problem(
      'quantity',
      `--pitch takes two lengths, not "${text}".`,
      COMMAND,
      'Give it as "24 mm, 16 mm".',
    );
  }
  const [x, y = x] = parts.map((part) => lengthOf('--pitch', part));
  return [x!, y!];
}
