import { COLUMNS } from '../../solver/asbuilt/measured.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { inUnit, metres } from '../../solver/chip/units.ts';

/** More rows than anybody types over by hand. */
const MOST = 200;

const cell = (text: string): string => (/[",;\t\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);

/** A table of all that can be measured, with the drawn sizes to be typed over and rows to be taken out. */
export function templateOf(chip: Chip): string {
  const size = (nm: number): string => String(Number(inUnit(metres(nm), 'um').toPrecision(7)));
  const used = new Set(chip.channels.map(({ layer }) => layer));
  const rows = [
    ...chip.layers.filter(({ id }) => used.has(id)).map(({ id, depth }) => [id, 'depth', size(depth), '']),
    ...chip.channels
      .filter(({ width: [first, last] }) => first === last)
      .map(({ id, width: [width] }) => [id, 'width', size(width), '']),
  ];
  const head = [COLUMNS.part[0], COLUMNS.what[0], `${COLUMNS.value[0]} (um)`, COLUMNS.uncertainty[0]];
  return [head, ...rows.slice(0, MOST)].map((row) => row.map(cell).join(',')).join('\n');
}
