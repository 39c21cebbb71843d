import type { Chip } from '../../../solver/chip/chip.ts';
import type { Result } from '../../../solver/chip/result.ts';
import { formatQuantity } from '../../../solver/chip/units-format.ts';
import { blank, planFigures, type Section, type Table, words } from './blocks.ts';

/** Places to write down what is measured on the made chip. */

/** Measured outlets, and channels, beyond this many are for a spreadsheet. */
const MOST_MEASURED = 48;
const MOST_WIDTHS = 24;

/** What can be measured, to be filled in: as a table of measurements is read when the made chip is compared. */
function sizesTable(chip: Chip): Table {
  const used = new Set(chip.channels.map(({ layer }) => layer));
  const even = chip.channels.filter(({ width: [first, last] }) => first === last);
  const rows = [
    ...chip.layers
      .filter(({ id }) => used.has(id))
      .map(({ id, depth }) => ({ id, what: 'depth', nm: depth })),
    ...even.slice(0, MOST_WIDTHS).map(({ id, width: [nm] }) => ({ id, what: 'width', nm })),
  ];
  return {
    id: 'measured',
    title: 'Depths and widths',
    rows: rows.length,
    columns: [
      words(
        'part',
        rows.map(({ id }) => id),
      ),
      words(
        'what',
        rows.map(({ what }) => what),
      ),
      planFigures(
        'drawn',
        rows.map(({ nm }) => nm),
        'um',
      ),
      blank('reading', rows.length, 'um'),
      blank('±', rows.length, 'um'),
      blank('along', rows.length, 'mm'),
      blank('note', rows.length),
    ],
    foot:
      (even.length > MOST_WIDTHS ? `The first ${MOST_WIDTHS} of ${even.length} channels. ` : '') +
      'Along: how far from the channel’s first point. What is left empty is taken as drawn. The CSV of this table, filled in, is what the program compares the made chip by.',
  };
}

export function measuredSection(chip: Chip, result: Result): Section {
  const outlets = result.ports.filter(({ flow }) => flow !== null && flow < 0).slice(0, MOST_MEASURED);
  return {
    id: 'measured',
    title: 'Measured on the made chip',
    blocks: [
      { kind: 'table', table: sizesTable(chip) },
      ...(outlets.length > 0
        ? [
            {
              kind: 'table',
              table: {
                id: 'measured-flows',
                title: 'Flows',
                rows: outlets.length,
                columns: [
                  words(
                    'outlet',
                    outlets.map(({ id }) => id),
                  ),
                  words(
                    'reckoned',
                    outlets.map(({ flow }) => formatQuantity(-flow!, 'flow')),
                  ),
                  words(
                    'share',
                    outlets.map(({ share }) => (share === null ? '' : formatQuantity(share, 'share'))),
                  ),
                  blank('measured', outlets.length),
                  blank('±', outlets.length),
                  blank('how, and by whom', outlets.length),
                ],
              },
            } as const,
          ]
        : []),
    ],
  };
}
