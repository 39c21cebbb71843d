import type { Chip, Layer } from '../../../solver/chip/chip.ts';
import { drawingOf } from '../../../solver/chip/read-graph-drawing.ts';
import { metres } from '../../../solver/chip/units.ts';
import { type Column, figures, NONE, plain, planFigures, type Section, type Table, words } from './blocks.ts';
import { held } from './making.ts';

/** What is drawn, in tables: channels, chambers, vias, ports and their holes. */

/** Channels beyond this many are told by width on the pages; the comma-separated values hold each. */
const MOST_CHANNELS = 300;

function ownTolerance(tolerance: Layer['tolerance'], depth: number | null, width: number): string {
  const parts = [
    ...(tolerance?.depth ? [`depth ${held(tolerance.depth, depth)}`] : []),
    ...(tolerance?.width ? [`width ${held(tolerance.width, width)}`] : []),
  ];
  return parts.length === 0 ? NONE : parts.join(', ');
}

/** Lengths of the centrelines, nm. */
function lengthsOf(chip: Chip): number[] {
  const { elements } = drawingOf(chip);
  return chip.channels.map((_, index) => elements.total(index));
}

const numbers = (count: number): string[] => Array.from({ length: count }, (_, i) => String(i + 1));

export function channelsTable(chip: Chip): Table {
  const { channels } = chip;
  const lengths = lengthsOf(chip);
  const tapered = channels.some(({ width }) => width[0] !== width[1]);
  const round = channels.some(({ bendRadius }) => bendRadius > 0);
  const severalLayers = chip.layers.length > 1;
  const columns: Column[] = [
    words('no.', numbers(channels.length)),
    words(
      'channel',
      channels.map(({ id }) => id),
    ),
    ...(severalLayers
      ? [
          words(
            'layer',
            channels.map(({ layer }) => layer),
          ),
        ]
      : []),
    planFigures(
      tapered ? 'width at its start' : 'width',
      channels.map(({ width }) => width[0]),
      'um',
    ),
    ...(tapered
      ? [
          planFigures(
            'at its end',
            channels.map(({ width }) => width[1]),
            'um',
          ),
        ]
      : []),
    planFigures('length', lengths, 'mm', 3),
    ...(channels.some(({ depth }) => depth !== undefined)
      ? [
          words(
            'its own depth',
            channels.map(({ depth }) => (depth === undefined ? NONE : plain(metres(depth), 'length'))),
          ),
        ]
      : []),
    ...(channels.some(({ tolerance }) => tolerance)
      ? [
          words(
            'its own tolerances',
            channels.map(({ tolerance, depth, width }) => ownTolerance(tolerance, depth ?? null, width[0])),
          ),
        ]
      : []),
    ...(round
      ? [
          planFigures(
            'bend radius',
            channels.map(({ bendRadius }) => bendRadius),
            'um',
          ),
        ]
      : []),
  ];
  return {
    id: 'channels',
    title: 'Channels',
    rows: channels.length,
    columns,
    foot: `Numbers are those of the drawing. Length along the centreline, ends included.${round ? ' A bend radius is that of the centreline; 0 is a mitred corner.' : ''}`,
  };
}

/** Of many channels: how many of each width there are on each layer, with their length in all. */
export function widthsTable(chip: Chip): Table {
  const lengths = lengthsOf(chip);
  const rows = new Map<
    string,
    { layer: string; width: readonly [number, number]; count: number; length: number }
  >();
  for (const [i, { layer, width }] of chip.channels.entries()) {
    const key = JSON.stringify([layer, width]);
    const row = rows.get(key) ?? { layer, width, count: 0, length: 0 };
    row.count += 1;
    row.length += lengths[i]!;
    rows.set(key, row);
  }
  const all = [...rows.values()].sort((a, b) => a.layer.localeCompare(b.layer) || a.width[0] - b.width[0]);
  return {
    id: 'widths',
    title: 'Channels by width',
    rows: all.length,
    columns: [
      words(
        'layer',
        all.map(({ layer }) => layer),
      ),
      planFigures(
        'width at its start',
        all.map(({ width }) => width[0]),
        'um',
      ),
      planFigures(
        'at its end',
        all.map(({ width }) => width[1]),
        'um',
      ),
      figures(
        'channels',
        'number',
        all.map(({ count }) => count),
        { digits: 6 },
      ),
      planFigures(
        'length in all',
        all.map(({ length }) => length),
        'mm',
        3,
      ),
    ],
    foot: `All ${chip.channels.length.toLocaleString('en')} channels one by one are in the comma-separated values and on the mask.`,
  };
}

function chambersTable({ chambers }: Chip): Table {
  const box = chambers.map(({ outline }) => {
    const xs = outline.map(([x]) => x);
    const ys = outline.map(([, y]) => y);
    const [left, bottom] = [Math.min(...xs), Math.min(...ys)];
    return { left, bottom, width: Math.max(...xs) - left, height: Math.max(...ys) - bottom };
  });
  return {
    id: 'chambers',
    title: 'Chambers',
    rows: chambers.length,
    columns: [
      words(
        'chamber',
        chambers.map(({ id }) => id),
      ),
      words(
        'layer',
        chambers.map(({ layer }) => layer),
      ),
      planFigures(
        'left edge x',
        box.map(({ left }) => left),
      ),
      planFigures(
        'lower edge y',
        box.map(({ bottom }) => bottom),
      ),
      planFigures(
        'width',
        box.map(({ width }) => width),
      ),
      planFigures(
        'height',
        box.map(({ height }) => height),
      ),
      words(
        'corners',
        chambers.map(({ outline }) => String(outline.length)),
      ),
    ],
    foot: 'Width and height over all; the outline is on the drawing and the mask.',
  };
}

function viasTable({ vias }: Chip): Table {
  return {
    id: 'vias',
    title: 'Vias',
    rows: vias.length,
    columns: [
      words(
        'via',
        vias.map(({ id }) => id),
      ),
      words(
        'from layer',
        vias.map(({ layers }) => layers[0]),
      ),
      words(
        'to layer',
        vias.map(({ layers }) => layers[1]),
      ),
      planFigures(
        'x',
        vias.map(({ at }) => at[0]),
      ),
      planFigures(
        'y',
        vias.map(({ at }) => at[1]),
      ),
      planFigures(
        'diameter',
        vias.map(({ diameter }) => diameter),
        'um',
      ),
    ],
  };
}

export function channelsSection(chip: Chip): Section {
  const many = chip.channels.length > MOST_CHANNELS;
  return {
    id: 'channels',
    title: 'Channels, chambers, vias',
    blocks: [
      { kind: 'table', table: many ? widthsTable(chip) : channelsTable(chip) },
      ...(chip.chambers.length > 0 ? [{ kind: 'table', table: chambersTable(chip) } as const] : []),
      ...(chip.vias.length > 0 ? [{ kind: 'table', table: viasTable(chip) } as const] : []),
    ],
  };
}

const tubingWords = (tubing: Chip['ports'][number]['tubing']): string =>
  tubing.length === 0
    ? NONE
    : tubing
        .map(({ bore, length }) => `${plain(bore, 'length')} bore, ${plain(length, 'length', 'mm')}`)
        .join('; then ');

export function portsTable(chip: Chip): Table {
  const { ports } = chip;
  return {
    id: 'ports',
    title: 'Positions for drilling',
    rows: ports.length,
    columns: [
      words('no.', numbers(ports.length)),
      words(
        'port',
        ports.map(({ id }) => id),
      ),
      ...(chip.layers.length > 1
        ? [
            words(
              'layer',
              ports.map(({ layer }) => layer),
            ),
          ]
        : []),
      planFigures(
        'x',
        ports.map(({ at }) => at[0]),
      ),
      planFigures(
        'y',
        ports.map(({ at }) => at[1]),
      ),
      planFigures(
        'hole',
        ports.map(({ diameter }) => diameter),
      ),
      words(
        'tubing, from the chip outward',
        ports.map(({ tubing }) => tubingWords([...tubing].reverse())),
      ),
    ],
    foot: 'Centres, from the marked corner of the drawing. A hole of 0 is none: the channel ends there.',
  };
}
