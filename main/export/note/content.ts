import { createHash } from 'node:crypto';
import { PROCESSES } from '../../../solver/checks/process.ts';
import type { Chip } from '../../../solver/chip/chip.ts';
import { writeDescription } from '../../../solver/chip/description-write.ts';
import { readGraph } from '../../../solver/chip/read-graph.ts';
import type { Result } from '../../../solver/chip/result.ts';
import { metres } from '../../../solver/chip/units.ts';
import {
  type Block,
  counted,
  plain,
  type Run,
  type Section,
  strong,
  type Table,
  unbroken,
} from './blocks.ts';
import { type Paper, planPicture, size } from './drawing.ts';
import { channelsSection, channelsTable, portsTable } from './drawn.ts';
import { driftTable, drivesTable, startWords } from './drives.ts';
import { layersTable, processBlocks } from './making.ts';
import { measuredSection } from './measured.ts';
import type { Picture } from './picture.ts';
import { routesSection } from './routes.ts';
import { sectionPicture } from './section-picture.ts';
import { splitTable, splitWords } from './split.ts';
import { cautionsSection, fluidWords, madeSection, signaturesSection, trustSection } from './trust.ts';

/** The fabrication note as plain data: what the mask shop, the clean room and the person at the pump need. */
export interface Note {
  readonly kind: 'note' | 'flow split';
  readonly title: string;
  /** "Fabrication note" */
  readonly subtitle: string;
  /** The designer's remark; '' where none. */
  readonly remark: string;
  /** Program, chip hash and date, for the foot of every page. */
  readonly origin: { readonly program: string; readonly hash: string; readonly date: string };
  readonly sections: readonly Section[];
  /** Tables that are only in the comma-separated values, or there in full. */
  readonly tables: readonly Table[];
}

export interface NoteOptions {
  /** Program and version, "Channelwright 0.1.0". */
  readonly program: string;
  readonly date: Date;
  /** What the drawings may take of a page, mm. */
  readonly paper: Paper;
}

/** SHA-256 of the chip's description as the program saves it, so that anyone can check it with any tool. */
export const chipHash = (chip: Chip): string =>
  createHash('sha256').update(writeDescription(chip)).digest('hex');

const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
] as const;

/** "1 December 2026, 20:15 UTC": read alike everywhere. */
export function dateWords(date: Date): string {
  const two = (value: number): string => String(value).padStart(2, '0');
  return `${date.getUTCDate()} ${MONTHS[date.getUTCMonth()]} ${date.getUTCFullYear()}, ${two(date.getUTCHours())}:${two(date.getUTCMinutes())} UTC`;
}

const originOf = (chip: Chip, { program, date }: NoteOptions): Note['origin'] => ({
  program,
  hash: chipHash(chip),
  date: dateWords(date),
});

/** Drawings of more layers than this would fill a book. */
const MOST_LAYERS = 12;

function pictures(chip: Chip, paper: Paper): Picture[] {
  const graph = readGraph(chip);
  const ids = chip.layers.map(({ id }) => id).filter((id) => used(chip, id));
  if (ids.length <= 1)
    return [planPicture(chip, graph, { layers: ids, paper, numbers: true, caption: 'The chip.' })];
  return [
    planPicture(chip, graph, {
      layers: ids,
      paper,
      numbers: false,
      caption: `All layers: ${ids[0]} filled, ${ids.length === 2 ? `${ids[1]} as an outline` : 'the others as outlines'}.`,
    }),
    ...ids
      .slice(0, MOST_LAYERS)
      .map((id) => planPicture(chip, graph, { layers: [id], paper, numbers: true, caption: `Layer ${id}.` })),
  ];
}

const used = ({ channels, chambers, ports, vias }: Chip, id: string): boolean =>
  channels.some(({ layer }) => layer === id) ||
  chambers.some(({ layer }) => layer === id) ||
  ports.some(({ layer }) => layer === id) ||
  vias.some(({ layers }) => layers.includes(id));

/** The whole at a glance, above the drawing. */
function glance(chip: Chip, result: Result): Block {
  const missed = result.targets.filter(({ met }) => !met).length;
  const over = result.limits.filter(({ met }) => met === false).length;
  const open = result.limits.filter(({ met }) => met === null).length;
  const cannot = (result.pumps ?? []).filter(({ met }) => met === false).length;
  const parts = (count: number, bad: number, one: string, unknown = 0): Run[] => {
    if (count === 0) return [`no ${one} is set`];
    const rest = unknown > 0 ? [`, ${unknown} not judged`] : [];
    if (bad > 0)
      return [
        strong(count === 1 ? `the ${one} is missed` : `${bad} of ${counted(count, one)} missed`),
        ...rest,
      ];
    const all = unknown === 0 ? 'all met' : `${count - unknown} met`;
    return [`${counted(count, one)}, ${all}`, ...rest];
  };
  return {
    kind: 'facts',
    rows: [
      {
        name: 'Chip',
        value: [
          `${size(chip)}, ${counted(chip.layers.length, 'layer')}, ${counted(chip.channels.length, 'channel')}, ${counted(chip.ports.length, 'port')}`,
        ],
      },
      {
        name: 'Depth',
        value: [chip.layers.map(({ id, depth }) => `${id} ${plain(metres(depth), 'length')}`).join(', ')],
      },
      { name: 'Process', value: [chip.process ? PROCESSES[chip.process.kind].name : 'not stated'] },
      { name: 'Fluid', value: [fluidWords(chip, result)] },
      { name: 'Flow split', value: parts(result.targets.length, missed, 'target') },
      {
        name: 'Limits',
        value: parts(result.limits.length, over, 'limit', open),
      },
      ...(cannot > 0
        ? [{ name: 'Pumps', value: [strong(`${counted(cannot, 'pump')} cannot do what is asked`)] }]
        : []),
    ],
  };
}

export function noteOf(chip: Chip, result: Result, options: NoteOptions): Note {
  const origin = originOf(chip, options);
  const drift = driftTable(result);
  const sections: Section[] = [
    {
      id: 'chip',
      title: 'The chip',
      blocks: [glance(chip, result), { kind: 'pictures', pictures: pictures(chip, options.paper) }],
    },
    {
      id: 'ports',
      title: 'Ports and tubing',
      blocks: [{ kind: 'table', table: portsTable(chip) }],
    },
    {
      id: 'layers',
      title: 'Layers and process',
      blocks: [
        { kind: 'table', table: layersTable(chip) },
        {
          kind: 'pictures',
          pictures: chip.layers.flatMap((layer) => sectionPicture(chip, layer) ?? []).slice(0, MOST_LAYERS),
        },
        ...processBlocks(chip),
      ],
    },
    channelsSection(chip),
    {
      id: 'flow-split',
      title: 'Flow split',
      blocks: [splitWords(result), { kind: 'table', table: splitTable(chip, result) }],
    },
    {
      id: 'drives',
      title: 'Drives and pump settings',
      blocks: [
        { kind: 'table', table: drivesTable(chip, result) },
        startWords(chip, result),
        ...(drift ? [{ kind: 'table', table: drift } as const] : []),
      ],
    },
    routesSection(chip, result),
    madeSection(chip, result),
    trustSection(chip, result),
    cautionsSection(chip, result),
    measuredSection(chip, result),
    signaturesSection,
    documentSection(origin),
  ];
  return {
    kind: 'note',
    title: chip.name,
    subtitle: 'Fabrication note',
    remark: unbroken(chip.note),
    origin,
    sections,
    tables: [channelsTable(chip)],
  };
}

/** The flow-split table alone, as a document of one section. */
export function splitNote(chip: Chip, result: Result, options: NoteOptions): Note {
  return {
    kind: 'flow split',
    title: chip.name,
    subtitle: 'Flow split',
    remark: '',
    origin: originOf(chip, options),
    sections: [
      {
        id: 'flow-split',
        title: 'Flow split',
        blocks: [
          splitWords(result),
          { kind: 'table', table: splitTable(chip, result) },
          { kind: 'words', runs: [`Fluid: ${fluidWords(chip, result)}.`], soft: true },
        ],
      },
    ],
    tables: [],
  };
}

function documentSection({ program, hash, date }: Note['origin']): Section {
  return {
    id: 'document',
    title: 'This document',
    blocks: [
      {
        kind: 'facts',
        rows: [
          { name: 'Program', value: [program] },
          { name: 'Date', value: [date] },
          { name: 'Chip hash', value: [hash] },
        ],
      },
      {
        kind: 'words',
        soft: true,
        runs: [
          'The hash is SHA-256 of the chip description as the program saves it: a chip that differs in anything has another.',
        ],
      },
    ],
  };
}

/** Every table of a note once, in its order; those left out of the pages in full. */
export function tablesOf({ sections, tables }: Note): Table[] {
  const found = new Map<string, Table>();
  for (const { blocks } of sections)
    for (const block of blocks) if (block.kind === 'table') found.set(block.table.id, block.table);
  for (const table of tables) found.set(table.id, table);
  return [...found.values()];
}
