import { parseArgs } from 'node:util';
import type { AsBuiltOptions } from '../../solver/asbuilt/as-built.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { COMMAND, cliOptions } from './options.ts';

export const AS_BUILT_USAGE = `What a made chip does: measured depths and widths in place of the drawn ones, with their uncertainty.

  npm run as-built -- FILE MEASUREMENTS [--set PORT,PORT] [--json FILE] [--chip FILE]
                      [--junctions ideal|solved] [--accuracy 0.01]

  FILE          a chip description (JSON) or a project (.chw)
  MEASUREMENTS  a table as CSV, separated by commas, semicolons or tabs; its first row names the columns:
                part (a channel or a layer), what (depth, width, or bias: by how much all widths of a layer
                came out larger), value, and where known uncertainty, along (distance along the channel),
                x and y (place on the chip), note
  --set         ports whose drives may be set to restore the targets
  --json        writes both results and the drives as JSON, in SI units; - for standard output
  --chip        writes the description of the made chip, its drives as they are
  --junctions   ideal: no pressure is lost in them; solved: each is solved in three dimensions
  --accuracy    relative accuracy asked of the solved junctions, such as 0.01 or "1 %"

Exit codes: 0 the made chip meets all as it is driven, 1 a target or limit is missed, 2 not readable or not
solvable (nothing is written).
`;

export interface AsBuiltCall {
  readonly file: string;
  readonly measurements: string;
  readonly json?: string;
  readonly chip?: string;
  readonly options: AsBuiltOptions;
}

const HELP = 'Run "npm run as-built -- --help" for how to call it.';

/** The options of a call, or null where only help is asked for. Throws `Problem`. */
export function asBuiltCall(argv: readonly string[]): AsBuiltCall | null {
  let parsed: ReturnType<typeof parse>;
  try {
    parsed = parse(argv);
  } catch (error) {
    const [first] = (error as Error).message.split(/\n|\. To specify/);
    throw new Problem('unknown-key', `${first!.replace(/\.$/, '')}.`, COMMAND, HELP);
  }
  const { positionals, values } = parsed;
  if (values.help) return null;
  const [file, measurements, ...more] = positionals;
  if (!file) throw new Problem('missing', 'No chip is named.', COMMAND, HELP);
  if (!measurements) throw new Problem('missing', 'No table of measurements is named.', COMMAND, HELP);
  if (more.length > 0) {
    throw new Problem('too-many', `More than two files are named: ${positionals.join(', ')}.`, COMMAND, HELP);
  }
  for (const [name, value] of Object.entries({
    '--json': values.json,
    '--chip': values.chip,
    '--set': values.set,
  })) {
    if (value === '') throw new Problem('missing', `${name} names nothing.`, COMMAND, HELP);
  }
  // What both commands take is read in one place.
  const shared = (['junctions', 'accuracy'] as const).flatMap((name) =>
    values[name] === undefined ? [] : [`--${name}`, values[name]],
  );
  const { solve } = cliOptions([file, ...shared])!;
  const set = values.set
    ?.split(',')
    .map((id) => id.trim())
    .filter((id) => id !== '');
  return {
    file,
    measurements,
    ...(values.json === undefined ? {} : { json: values.json }),
    ...(values.chip === undefined ? {} : { chip: values.chip }),
    options: { ...solve, ...(set ? { set } : {}) },
  };
}

const parse = (argv: readonly string[]) =>
  parseArgs({
    args: [...argv],
    allowPositionals: true,
    options: {
      set: { type: 'string' },
      json: { type: 'string' },
      chip: { type: 'string' },
      junctions: { type: 'string' },
      accuracy: { type: 'string' },
      help: { type: 'boolean', short: 'h' },
    },
  });
