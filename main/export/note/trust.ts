import { kindOfFinding } from '../../../solver/checks/kinds.ts';
import type { Chip } from '../../../solver/chip/chip.ts';
import type { Making, Result } from '../../../solver/chip/result.ts';
import { formatQuantity } from '../../../solver/chip/units-format.ts';
import type { Finding } from '../../../solver/problem/finding.ts';
import { type Block, figure, placed, plain, type Run, type Section, strong, unbroken } from './blocks.ts';

/** What was found, what was accepted and why, how far the numbers can be trusted, and what is to be minded. */

/** Findings beyond this many are counted, not told. */
const MOST_TOLD = 120;

const SEVERITY = { stop: 'Stop', warn: 'Warning', note: 'Note' } as const;
const ORDER = ['stop', 'warn', 'note'] as const;

const isMade = ({ kind }: Finding): boolean => kindOfFinding(kind)?.of === 'made';

const sentence = (text: string): string => {
  const trimmed = text.trim();
  return trimmed === '' || /[.!?…]$/.test(trimmed) ? trimmed : `${trimmed}.`;
};

function told(finding: Finding): Run[] {
  const kind = kindOfFinding(finding.kind);
  const { where, at } = finding;
  const place = where ? `, ${placed(where, at && new Map([[where, at]]))}` : '';
  const rule =
    kind && finding.threshold !== undefined ? ` Held against: ${kind.threshold} (${kind.source}).` : '';
  return [
    strong(`${SEVERITY[finding.severity]}${place}: `),
    unbroken(`${finding.says} ${finding.do}${rule}`),
  ];
}

function listed(all: readonly Finding[], line: (finding: Finding) => Run[]): Block[] {
  const sorted = ORDER.flatMap((severity) => all.filter((finding) => finding.severity === severity));
  const shown = sorted.slice(0, MOST_TOLD);
  const more = sorted.length - shown.length;
  return [
    { kind: 'list', items: shown.map(line) },
    ...(more > 0
      ? [
          {
            kind: 'words',
            runs: [`And ${more.toLocaleString('en')} more, less severe or of the same kinds.`],
          } as const,
        ]
      : []),
  ];
}

export function madeSection({ process }: Chip, { findings }: Result): Section {
  const made = findings.filter(isMade);
  const open = made.filter(({ accepted }) => accepted === undefined);
  const accepted = findings.filter((finding) => finding.accepted !== undefined);
  return {
    id: 'buildability',
    title: 'Can it be made',
    blocks: [
      ...(open.length === 0
        ? [
            {
              kind: 'words',
              runs: [
                process
                  ? 'Nothing stands against making it by the stated process.'
                  : 'Nothing was found; without a stated process only the drawing itself was checked.',
              ],
            } as const,
          ]
        : listed(open, told)),
      ...(accepted.length > 0
        ? [
            { kind: 'words', runs: [strong('Accepted by the designer, with the reason given:')] } as const,
            ...listed(accepted, (finding) => [
              ...told(finding),
              ' ',
              strong('Accepted: '),
              sentence(finding.accepted!),
            ]),
          ]
        : []),
    ],
  };
}

const JUNCTIONS = {
  ideal: 'Junctions are ideal: no pressure is lost in them and their wall shear is not known.',
  mixed: 'Junctions are partly solved in three dimensions; the others are ideal.',
  solved: 'Junctions are solved in three dimensions.',
} as const;

const FLUIDS = {
  water: 'water',
  'glycerol-water': 'glycerol and water',
  saline: 'saline',
  'culture-medium': 'culture medium',
  plasma: 'plasma',
  blood: 'blood',
} as const;

export function fluidWords({ fluid: spec }: Chip, { fluid }: Result): string {
  const name = 'name' in spec ? FLUIDS[spec.name] : 'table' in spec ? 'a measured fluid' : 'a fluid';
  const at =
    'temperature' in spec ? ` at ${formatQuantity(spec.temperature, 'temperature', { digits: 3 })}` : '';
  const viscosity =
    fluid.viscosity === null
      ? 'viscosity by shear rate'
      : `viscosity ${formatQuantity(fluid.viscosity, 'viscosity')}`;
  return `${name}${at}, ${viscosity}, density ${formatQuantity(fluid.density, 'density')}`.replaceAll(
    /(?<=\d) (?=[a-zA-Zµ°])/g,
    '\u00a0',
  );
}

function highestReynolds({ channels }: Result): { value: number; where: string } | null {
  let best: { value: number; where: string } | null = null;
  for (const { id, pieces } of channels)
    for (const [i, { reynolds }] of pieces.entries())
      if (reynolds !== null && (!best || reynolds > best.value))
        best = { value: reynolds, where: `${id}#${i + 1}` };
  return best;
}

function chiefWords({ chief }: Making): string {
  if (!chief || chief.part < 0.3) return '';
  return `; most of the shares’ by the ${chief.what} of ${chief.of} ${chief.id}`;
}

function accuracyWords(result: Result): Block {
  const { bands, balance, making } = result;
  const solved = result.cells.filter(({ accuracy }) => accuracy < 1);
  const worst = solved.reduce((most, { accuracy }) => Math.max(most, accuracy), 0);
  const reynolds = highestReynolds(result);
  const share = (value: number): string => (value === 0 ? 'a millionth' : figure(value, 'share', 2, '%'));
  const moved = (value: number): string => (value === 0 ? 'not moved' : `±\u00a0${share(value)}`);
  return {
    kind: 'facts',
    rows: [
      { name: 'Junctions', value: [JUNCTIONS[result.junctions]] },
      ...(bands
        ? [
            {
              name: 'Shares are within',
              value: [strong(share(bands.share)), ', relative, the worst of the chip'],
            },
            { name: 'Flows at ports within', value: [share(bands.flow)] },
            { name: 'Pressures within', value: [share(bands.pressure)] },
            { name: 'Peak wall shear within', value: [share(bands.shear)] },
          ]
        : [
            {
              name: 'Error of the numbers',
              value: ['not summed up for this chip; see the findings below'],
            },
          ]),
      ...(making
        ? [
            {
              name: 'Tolerances of making',
              value: [
                `shares ${moved(making.share.likely)}${making.share.worst > 0 ? ` (at worst ${share(making.share.worst)})` : ''}, pressures ${moved(making.pressure.likely)}, peak wall shear ${moved(making.shear.likely)}${chiefWords(making.share)}`,
              ],
            },
          ]
        : []),
      ...(solved.length > 0
        ? [
            {
              name: 'Least exact junction',
              value: [`flow through it within ${share(worst)}, of ${solved.length} solved`],
            },
          ]
        : []),
      ...(reynolds
        ? [
            {
              name: 'Highest Reynolds number',
              value: [`${figure(reynolds.value, 'number', 2)}, in ${placed(reynolds.where)}`],
            },
          ]
        : []),
      {
        name: 'Flow is kept to',
        value: [
          `${figure(balance.conservationResidual, 'number', 2)} of the throughput; power in ${figure(balance.powerIn, 'power')}, dissipated ${figure(balance.dissipation, 'power')}`,
        ],
      },
    ],
  };
}

function assumptions({ layers, fluid, process }: Chip, result: Result): Run[][] {
  const soft = layers.some(({ roof }) => roof);
  return [
    [
      'Steady creeping flow of one fluid that wets and fills every channel, without bubbles, at one temperature.',
    ],
    [
      'shear' in fluid
        ? 'Shear-thinning by the stated law; a solved junction takes the viscosity of the channels around it.'
        : 'The viscosity does not depend on the shear rate.',
    ],
    [
      soft
        ? 'Soft lids bulge by their stated law; all other walls are rigid and do not slip.'
        : 'Walls are rigid and do not slip.',
    ],
    [
      'Each layer has its stated depth everywhere, each channel its drawn width; inner corners have the stated fillet.',
    ],
    ['Where streams meet, they are taken as mixed before they part again, for residence times and doses.'],
    ...(process
      ? [['What the process holds is as listed, whoever’s number it is; the shop’s own rules come first.']]
      : []),
    ...(result.drift ? [['Reservoirs empty and fill as stated; levels change slowly beside the flow.']] : []),
  ];
}

export function trustSection(chip: Chip, result: Result): Section {
  const doubts = result.findings.filter((finding) => !isMade(finding) && finding.accepted === undefined);
  return {
    id: 'trust',
    title: 'How far to trust it',
    blocks: [
      accuracyWords(result),
      { kind: 'words', runs: ['What the numbers take for granted:'] },
      { kind: 'list', items: assumptions(chip, result) },
      ...(doubts.length > 0
        ? [{ kind: 'words', runs: ['What was found that bears on them:'] } as const, ...listed(doubts, told)]
        : []),
    ],
  };
}

export const CAUTIONS: readonly string[] = [
  'Wall-shear limits vary with cell type, medium, passage, exposure and temperature. A computed pass is not evidence of viability: confirm it with your own cells.',
  'Not for diagnosis or treatment. Devices that touch patients fall under local medical-device rules and licensed review.',
  'Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection.',
  'Resists, etchants (hydrofluoric acid in particular) and solvents: follow local safety rules and trained supervision.',
];

export function cautionsSection({ rating }: Chip, result: Result): Section {
  const highest = result.ports.reduce((most, { pressure }) => Math.max(most, pressure), 0);
  const pumped = (result.pumps ?? []).reduce((most, { pressure }) => Math.max(most, pressure), highest);
  const pressure: Run[] = [
    'Highest pressure anywhere, gauge: ',
    strong(figure(pumped, 'pressure')),
    rating
      ? `; chip and fittings are stated to bear ${plain(rating.pressure, 'pressure')}.`
      : '; what chip and fittings bear is not stated.',
  ];
  return {
    id: 'cautions',
    title: 'Cautions',
    blocks: [
      { kind: 'words', runs: pressure },
      { kind: 'list', items: CAUTIONS.map((text) => [text]) },
    ],
  };
}

export const signaturesSection: Section = {
  id: 'signatures',
  title: 'Signatures',
  blocks: [
    {
      kind: 'lines',
      heads: ['name', 'date', 'signature'],
      rows: ['Designed', 'Checked', 'Made', 'Measured'],
    },
  ],
};
