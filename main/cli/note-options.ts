import { parseArgs } from 'node:util';
import { quantityOrNull } from '../../solver/chip/units.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { SolveOptions } from '../../solver/solve.ts';
import type { PaperName } from '../export/note/pdf-page.ts';
import { COMMAND } from './options.ts';

export const NOTE_USAGE = `Writes the fabrication note of a chip: what the mask shop, the clean room and the person at the pump need.

  npm run note -- FILE [--pdf FILE] [--html FILE] [--csv FILE] [--split FILE] [--json FILE]
                       [--paper A4|letter] [--junctions ideal|solved] [--accuracy 0.01]

  FILE         a chip description (JSON) or a project (.chw)
  --pdf        writes the note as PDF
  --html       writes the note as one page of HTML that needs nothing else; - for standard output
  --csv        writes its tables as CSV, each to a file of its own: "chip.csv" gives "chip flow-split.csv", …
  --split      writes the flow-split table alone, by the ending of its name: .csv, .pdf or .html;
               - for CSV on standard output
  --json       writes the result as JSON, in SI units, as the command solve does; - for standard output
  --paper      A4 (the default) or letter
  --junctions  ideal: no pressure is lost in them; solved (the default): each is solved in three dimensions
  --accuracy   relative accuracy asked of the solved junctions, such as 0.01 or "1 %"

Exit codes: 0 all met, 1 a target or limit is missed (the note says so), 2 not readable, not solvable or not
to be written (nothing is written, what was there before stays).
`;

export const OUTPUTS = ['pdf', 'html', 'csv', 'split', 'json'] as const;
export type OutputName = (typeof OUTPUTS)[number];

export interface NoteCall {
  readonly file: string;
  readonly outputs: Readonly<Partial<Record<OutputName, string>>>;
  readonly paper: PaperName;
  readonly solve: SolveOptions;
}

const HELP = 'Run "npm run note -- --help" for how to call it.';

function parsed(argv: readonly string[]) {
  try {
    const text = { type: 'string' } as const;
    return parseArgs({
      args: [...argv],
      allowPositionals: true,
      options: {
        pdf: text,
        html: text,
        csv: text,
        split: text,
        json: text,
        paper: text,
        junctions: text,
        accuracy: text,
        help: { type: 'boolean', short: 'h' },
      },
    });
  } catch (error) {
    const [first] = (error as Error).message.split(/\n|\. To specify/);
    throw new Problem('unknown-key', `${first!.replace(/\.$/, '')}.`, COMMAND, HELP);
  }
}

/** The endings that `--split` takes. */
export const splitFormat = (path: string): 'csv' | 'pdf' | 'html' | null => {
  if (path === '-') return 'csv';
  const end = /\.(csv|pdf|html?)$/i.exec(path)?.[1]?.toLowerCase();
  return end === undefined ? null : end === 'htm' ? 'html' : (end as 'csv' | 'pdf' | 'html');
};

function outputsOf(values: Readonly<Record<string, unknown>>): NoteCall['outputs'] {
  const outputs: Partial<Record<OutputName, string>> = {};
  for (const name of OUTPUTS) {
    const path = values[name];
    if (typeof path !== 'string') continue;
    if (path === '') throw new Problem('missing', `--${name} names no file.`, COMMAND, HELP);
    outputs[name] = path;
  }
  if (Object.keys(outputs).length === 0)
    throw new Problem(
      'missing',
      'Nothing is to be written.',
      COMMAND,
      'Say what and where, such as --pdf note.pdf.',
    );
  const { pdf, csv, split } = outputs;
  if (pdf === '-' || csv === '-')
    throw new Problem(
      'output',
      `--${pdf === '-' ? 'pdf' : 'csv'} cannot go to standard output.`,
      COMMAND,
      pdf === '-' ? 'Give it a file.' : 'Give it a file; its tables go to one file each.',
    );
  if (split !== undefined && splitFormat(split) === null)
    throw new Problem(
      'output',
      `--split takes a file that ends in .csv, .pdf or .html, not "${split}".`,
      COMMAND,
      'Name it by what it is to be.',
    );
  if (Object.values(outputs).filter((path) => path === '-').length > 1)
    throw new Problem('output', 'Two outputs are standard output.', COMMAND, 'Give one of them a file.');
  return outputs;
}

/** The options of a call, or null where only help is asked for. Throws `Problem`. */
export function noteCall(argv: readonly string[]): NoteCall | null {
  const { positionals, values } = parsed(argv);
  if (values.help) return null;
  const [file, ...more] = positionals;
  if (file === undefined || file === '') throw new Problem('missing', 'No file is named.', COMMAND, HELP);
  if (more.length > 0)
    throw new Problem('too-many', `More than one file is named: ${positionals.join(', ')}.`, COMMAND, HELP);
  const { paper = 'A4', junctions, accuracy } = values;
  const chosen = ({ a4: 'A4', letter: 'letter' } as const)[paper.toLowerCase()];
  if (!chosen)
    throw new Problem(
      'quantity',
      `--paper takes A4 or letter, not "${paper}".`,
      COMMAND,
      'Choose one of the two.',
    );
  if (junctions !== undefined && junctions !== 'ideal' && junctions !== 'solved')
    throw new Problem(
      'quantity',
      `--junctions takes ideal or solved, not "${junctions}".`,
      COMMAND,
      'Choose one of the two.',
    );
  let share: number | undefined;
  if (accuracy !== undefined) {
    share = quantityOrNull(accuracy, 'share', '') ?? Number.NaN;
    if (!(share >= 1e-4 && share <= 0.2))
      throw new Problem(
        'range',
        `--accuracy takes a share from 0.0001 to 0.2, not "${accuracy}".`,
        COMMAND,
        'Give it as 0.01 or "1 %".',
      );
  }
  return {
    file,
    outputs: outputsOf(values),
    paper: chosen,
    solve: {
      ...(junctions === undefined ? {} : { junctions }),
      ...(share === undefined ? {} : { accuracy: share }),
    },
  };
}
