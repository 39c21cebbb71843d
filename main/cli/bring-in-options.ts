import { parseArgs } from 'node:util';
import { NM_PER_M, quantityOrNull } from '../../solver/chip/units.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { BringInSettings, Role } from '../contract/bring-in.ts';
import { COMMAND } from './options.ts';

export const BRING_IN_USAGE = `Makes a chip of a drawing: DXF (ASCII), SVG or GDSII.

  npm run bring-in -- FILE --depth DEPTH -o CHIP.json [options]

  FILE         the drawing
  -o, --out    the chip description that is written; - for standard output
  --depth      depth of the cavities, such as "50 um"
  --unit       what the drawing's numbers are in, where the file does not say or says it wrongly: um, mm, in, "10 nm"
  --layer      what a layer of the drawing is, once for each: NAME=cavity, NAME=cavity:DEPTH, NAME=cavity:DEPTH:LAYER
               (of the chip), NAME=holes, NAME=outline or NAME=ignore; where absent as the name suggests
  --line-width makes channels of lines that have no width; "100 um"
  --no-ports   no ports at free ends where the drawing has no holes
  --json       writes what became of what, and how far it lies off, as JSON; - for standard output

Exit codes: 0 all of it is in the chip, 1 brought in, but something was not understood and is listed, 2 not
readable or not possible (nothing is written).
`;

export interface BringInCliOptions {
  readonly file: string;
  readonly out: string;
  readonly json?: string;
  readonly settings: BringInSettings;
}

const HELP = 'Run "npm run bring-in -- --help" for how to call it.';

function parsed(argv: readonly string[]) {
  try {
    return parseArgs({
      args: [...argv],
      allowPositionals: true,
      options: {
        out: { type: 'string', short: 'o' },
        depth: { type: 'string' },
        unit: { type: 'string' },
        layer: { type: 'string', multiple: true },
        'line-width': { type: 'string' },
        'no-ports': { type: 'boolean' },
        json: { type: 'string' },
        help: { type: 'boolean', short: 'h' },
      },
    });
  } catch (error) {
    const [first] = (error as Error).message.split(/\n|\. To specify/);
    throw new Problem('unknown-key', `${first.replace(/\.$/, '')}.`, COMMAND, HELP);
  }
}

/** The options of a call, or null where only help is asked for. Throws `Problem`. */
export function bringInCliOptions(argv: readonly string[]): BringInCliOptions | null {
  const { positionals, values } = parsed(argv);
  if (values.help) return null;
  const [file, ...more] = positionals;
  if (file === undefined || file === '') throw new Problem('missing', 'No drawing is named.', COMMAND, HELP);
  if (more.length > 0) {
    throw new Problem('too-many', `More than one file is named: ${positionals.join(', ')}.`, COMMAND, HELP);
  }
  if (!values.out)
    throw new Problem('missing', 'No place for the chip is named.', COMMAND, 'Give it with -o CHIP.json.');
  if (values.json === '') throw new Problem('missing', '--json names no file.', COMMAND, HELP);
  if (values.depth === undefined) {
    throw new Problem('missing', 'A drawing has no depth.', COMMAND, 'Give it with --depth "50 um".');
  }
  const depth = nmOf('--depth', values.depth);
  return {
    file,
    out: values.out,
    ...(values.json === undefined ? {} : { json: values.json }),
    settings: {
      unit: values.unit === undefined ? null : unitOf(values.unit),
      depth,
      roles: Object.fromEntries((values.layer ?? []).map((text) => roleOf(text, depth))),
      lineWidth: values['line-width'] === undefined ? null : nmOf('--line-width', values['line-width']),
      portsAtEnds: !values['no-ports'],
    },
  };
}

function nmOf(option: string, text: string): number {
  const length = quantityOrNull(text, 'length') ?? Number.NaN;
  const nm = Math.round(length * NM_PER_M);
  if (nm >= 1 && length <= 1) return nm;
  throw new Problem(
    'quantity',
    `${option} takes a length with its unit, up to 1 m, not "${text}".`,
    COMMAND,
    'Write it as "50 um".',
  );
}

/** "um", "in", or a length such as "10 nm"; metres. */
function unitOf(text: string): number {
  const length = quantityOrNull(/^[a-zµμ]+$/i.test(text.trim()) ? `1 ${text}` : text, 'length') ?? Number.NaN;
  if (length > 0 && length <= 1000) return length;
  throw new Problem(
    'quantity',
    `--unit takes a unit of length, not "${text}".`,
    COMMAND,
    'Write it as um, mm, in or mil.',
  );
}

function roleOf(text: string, usual: number): [string, Role] {
  const at = text.lastIndexOf('=');
  const name = text.slice(0, at);
  const [kind, depth, ...rest] = text.slice(at + 1).split(':');
  if (at > 0 && kind === 'cavity') {
    return [
      name,
      { kind, depth: depth ? nmOf('--layer', depth) : usual, layer: (rest.join(':') || name).slice(0, 64) },
    ];
  }
  if (at > 0 && (kind === 'holes' || kind === 'outline' || kind === 'ignore') && depth === undefined) {
    return [name, { kind }];
  }
  throw new Problem(
    'quantity',
    `--layer takes a layer and what it is, not "${text}".`,
    COMMAND,
    'Write it as NAME=cavity, NAME=cavity:50um, NAME=holes, NAME=outline or NAME=ignore.',
  );
}
