import { parseArgs } from 'node:util';
import { quantityOrNull } from '../../solver/chip/units.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { SolveOptions } from '../../solver/solve.ts';

export const USAGE = `Solves a chip: flow, pressure and wall shear in every channel, against its targets and limits.

  npm run solve -- FILE [--csv FILE] [--json FILE] [--junctions ideal|solved] [--accuracy 0.01]

  FILE         a chip description (JSON) or a project (.chw)
  --csv        writes the tables as CSV; - for standard output
  --json       writes the result as JSON, in SI units; - for standard output
  --junctions  ideal: no pressure is lost in them; solved: each is solved in three dimensions
  --accuracy   relative accuracy asked of the solved junctions, such as 0.01 or "1 %"

Exit codes: 0 all met, 1 a target or limit is missed, 2 not readable or not solvable (nothing is written).
`;

export interface CliOptions {
  readonly file: string;
  readonly csv?: string;
  readonly json?: string;
  readonly solve: SolveOptions;
}

/** Where a fault of the call itself lies. */
export const COMMAND = 'the command';

const HELP = 'Run "npm run solve -- --help" for how to call it.';

function values(argv: readonly string[]): {
  readonly positionals: readonly string[];
  readonly values: Readonly<Record<'csv' | 'json' | 'junctions' | 'accuracy', string | undefined>> & {
    readonly help: boolean | undefined;
  };
} {
  try {
    const { positionals, values: given } = parseArgs({
      args: [...argv],
      allowPositionals: true,
      options: {
        csv: { type: 'string' },
        json: { type: 'string' },
        junctions: { type: 'string' },
        accuracy: { type: 'string' },
        help: { type: 'boolean', short: 'h' },
      },
    });
    const { csv, json, junctions, accuracy, help } = given;
    return { positionals, values: { csv, json, junctions, accuracy, help } };
  } catch (error) {
    const [first] = (error as Error).message.split(/\n|\. To specify/);
    throw new Problem('unknown-key', `${first!.replace(/\.$/, '')}.`, COMMAND, HELP);
  }
}

/** The options of a call, or null where only help is asked for. Throws `Problem`. */
export function cliOptions(argv: readonly string[]): CliOptions | null {
  const { positionals, values: given } = values(argv);
  if (given.help) return null;
  const [file, ...more] = positionals;
  if (file === undefined || file === '') throw new Problem('missing', 'No file is named.', COMMAND, HELP);
  if (more.length > 0) {
    throw new Problem('too-many', `More than one file is named: ${positionals.join(', ')}.`, COMMAND, HELP);
  }
  const { csv, json, junctions, accuracy } = given;
  for (const [name, value] of Object.entries({ '--csv': csv, '--json': json })) {
    if (value === '') throw new Problem('missing', `${name} names no file.`, COMMAND, HELP);
  }
  if (junctions !== undefined && junctions !== 'ideal' && junctions !== 'solved') {
    throw new Problem(
      'quantity',
      `--junctions takes ideal or solved, not "${junctions}".`,
      COMMAND,
      'Choose one of the two.',
    );
  }
  let share: number | undefined;
  if (accuracy !== undefined) {
    share = quantityOrNull(accuracy, 'share', '') ?? Number.NaN;
    if (!(share >= 1e-4 && share <= 0.2)) {
      throw new Problem(
        'range',
        `--accuracy takes a share from 0.0001 to 0.2, not "${accuracy}".`,
        COMMAND,
        'Give it as 0.01 or "1 %".',
      );
    }
  }
  return {
    file,
    ...(csv === undefined ? {} : { csv }),
    ...(json === undefined ? {} : { json }),
    solve: {
      ...(junctions === undefined ? {} : { junctions }),
      ...(share === undefined ? {} : { accuracy: share }),
    },
  };
}
