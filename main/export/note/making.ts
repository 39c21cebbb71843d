import { PROCESSES, type Rule, rulesOf } from '../../../solver/checks/process.ts';
import type { Chip, Layer, Tolerance } from '../../../solver/chip/chip.ts';
import type { ProcessNumbers } from '../../../solver/chip/making.ts';
import { metres } from '../../../solver/chip/units.ts';
import {
  type Block,
  counted,
  figure,
  NONE,
  plain,
  planFigures,
  strong,
  type Table,
  words,
} from './blocks.ts';

/** What the shop makes it by: layers with their cross-sections and tolerances, and the process. */

export const held = (tolerance: Tolerance | undefined, nominal: number | null): string => {
  if (!tolerance) return NONE;
  if ('length' in tolerance) return `± ${plain(metres(tolerance.length), 'length')}`;
  const share = `± ${plain(tolerance.share, 'share', '%')}`;
  return nominal === null
    ? share
    : `${share} (${figure(tolerance.share * metres(nominal), 'length', 2).replace(/\.?0+(?=\D*$)/, '')})`;
};

export function profileWords({ profile }: Layer): string {
  switch (profile.kind) {
    case 'trapezoid':
      return `trapezoid, walls at ${plain(profile.wallAngle, 'angle', 'deg')} to the floor`;
    case 'rounded':
      return 'rounded by an isotropic etch: the mask width and a quarter circle of the depth at both sides';
    case 'circle':
      return 'circle, bore = width';
    case 'triangle':
      return 'triangle, tip at the depth';
    case 'polygon':
      return `as measured, ${counted(profile.points.length, 'point')}`;
    default:
      return profile.kind;
  }
}

export function layersTable({ layers }: Chip): Table {
  return {
    id: 'layers',
    title: 'Layers',
    rows: layers.length,
    columns: [
      words(
        'layer',
        layers.map(({ id }) => id),
      ),
      planFigures(
        'depth',
        layers.map(({ depth }) => depth),
        'um',
      ),
      words(
        'depth within',
        layers.map(({ tolerance, depth }) => held(tolerance?.depth, depth)),
      ),
      words('cross-section', layers.map(profileWords)),
      words(
        'width within',
        layers.map(({ tolerance }) => held(tolerance?.width, null)),
      ),
      words(
        'fillet of inner corners',
        layers.map(({ fillet }) => (fillet === 0 ? 'sharp' : plain(metres(fillet), 'length'))),
      ),
    ],
    foot: 'Widths are those of the mask. A tolerance that is not given (–) was not reckoned with.',
  };
}

const RULES: Readonly<Record<keyof ProcessNumbers, readonly [words: string, isLength: boolean]>> = {
  leastWidth: ['least width of a channel', true],
  leastGap: ['least wall between channels', true],
  toolRadius: ['radius of the tool', true],
  edge: ['material left to the edge', true],
  alignment: ['layers off each other by at most', true],
  deepest: ['greatest depth over width', false],
  widest: ['greatest width over depth under a roof', false],
  wall: ['greatest height over thickness of a wall', false],
  undercut: ['etch sideways over depth', false],
  modulus: ['Young’s modulus of the lid', false],
};

const ruleValue = (name: keyof ProcessNumbers, { number }: Rule): string =>
  name === 'modulus'
    ? plain(number, 'modulus')
    : RULES[name][1]
      ? plain(metres(number), 'length')
      : plain(number, 'number');

export function processBlocks({ process, layers }: Chip): Block[] {
  const roofs = layers.filter(({ roof }) => roof);
  const lids: Block[] = roofs.map(({ id, roof }) => ({
    kind: 'words',
    runs: [
      `The lid over layer ${id} is soft: Young’s modulus ${plain(roof!.modulus, 'modulus')}, ${plain(roof!.thickness, 'length')} thick, Poisson’s ratio ${plain(roof!.poisson, 'number')}.`,
    ],
  }));
  if (!process)
    return [
      { kind: 'words', runs: ['No process is stated: what a shop can hold was not checked.'] },
      ...lids,
    ];
  const rules = rulesOf(process);
  const named = (Object.keys(RULES) as (keyof ProcessNumbers)[]).filter((name) => rules[name]);
  return [
    { kind: 'words', runs: ['Made by ', strong(PROCESSES[process.kind].name), '.'] },
    ...lids,
    {
      kind: 'table',
      table: {
        id: 'process',
        title: 'What the process is taken to hold',
        rows: named.length,
        columns: [
          words(
            'rule',
            named.map((name) => RULES[name][0]),
          ),
          words(
            'number',
            named.map((name) => ruleValue(name, rules[name]!)),
          ),
          words(
            'whose number',
            named.map((name) => rules[name]!.source),
          ),
        ],
      },
    },
  ];
}
