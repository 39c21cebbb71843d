import { type Column, type Table, unitOf } from './blocks.ts';
import type { Face } from './font-files.ts';
import type { Element, Line, Sheet, Style } from './pdf-page.ts';

/** Tables: few rules, figures aligned on the point, the unit in the head, heads repeated on every page. */

const GAP = 12;
const PAD = 2.6;
const BODY: Style = { face: 'figure', size: 8, leading: 10.4 };
const HEAD: Style = { face: 'figure', size: 7.4, leading: 9.2, colour: 'soft' };
const TITLE: Style = { face: 'figure', size: 8.4, leading: 11 };
const FOOT: Style = { face: 'figure', size: 7.2, leading: 9.6, colour: 'soft' };
/** Room for a hand. */
const WRITTEN = { width: 46, height: 20 } as const;
/** A column of words is not squeezed below this, points. */
const LEAST = 44;

interface Set {
  readonly column: Column;
  readonly x: number;
  readonly width: number;
  readonly head: readonly Line[];
  /** Widths before the point and from it on. */
  readonly before: number;
  readonly after: number;
  readonly blank: boolean;
}

interface Want {
  readonly least: number;
  readonly most: number;
}

const isBlank = ({ texts, cells }: Column): boolean =>
  texts.every((text) => text === '') && cells.every((cell) => cell === null);

/** "12" and ".50" of 12.50: what stands before the point, and the rest. */
function atPoint(text: string): readonly [string, string] {
  const end = /^[−+\d]+/.exec(text)?.[0].length ?? text.length;
  return [text.slice(0, end), text.slice(end)];
}

function wantOf(sheet: Sheet, column: Column, size: number): Want & { before: number; after: number } {
  const { fonts } = sheet;
  const strong = column.kind === 'verdict' ? 'figure strong' : 'figure';
  const widest = (texts: readonly string[], face: Face, at: number): number =>
    texts.reduce((most, text) => Math.max(most, fonts.width(text, face, at)), 0);
  const headSize = (HEAD.size / BODY.size) * size;
  const headWords = [...column.head.split(' '), unitOf(column)];
  const head = widest(headWords, 'figure', headSize);
  const headWhole = Math.min(fonts.width(column.head, 'figure', headSize), head * 1.6);
  const texts = [...new Set(column.texts)];
  if (column.kind === 'figures') {
    const parts = texts.map(atPoint);
    const before = widest(
      parts.map(([whole]) => whole),
      'tabular',
      size,
    );
    const after = widest(
      parts.map(([, rest]) => rest),
      'tabular',
      size,
    );
    // a head of more than two or three lines reads badly, however short its figures
    const least = Math.max(head, headWhole / 2, before + after);
    return { least, most: Math.max(least, headWhole), before, after };
  }
  if (isBlank(column))
    return { least: Math.max(WRITTEN.width, head), most: Math.max(WRITTEN.width, head), before: 0, after: 0 };
  const most = Math.max(widest(texts, strong, size), headWhole);
  const word = widest([...new Set(texts.flatMap((text) => text.split(' ')))], strong, size);
  return { least: Math.max(head, Math.min(word, Math.max(LEAST, most / 6))), most, before: 0, after: 0 };
}

/** Widths that fill the page; null where even the least do not fit. */
function widthsOf(wants: readonly Want[], width: number): number[] | null {
  const room = width - GAP * (wants.length - 1);
  const least = wants.reduce((sum, want) => sum + want.least, 0);
  if (least > room) return null;
  const most = wants.reduce((sum, want) => sum + want.most, 0);
  if (most <= room) {
    const more = room / most;
    return wants.map((want) => want.most * more);
  }
  // long columns share what is left by how much more they would like
  const stretch = (room - least) / (most - least);
  return wants.map((want) => want.least + (want.most - want.least) * stretch);
}

function setOf(sheet: Sheet, table: Table): { sets: Set[]; size: number } {
  for (let size = BODY.size; ; size -= 0.5) {
    const wants = table.columns.map((column) => wantOf(sheet, column, size));
    // at 5 points a table that is still too wide is let run over
    const widths = widthsOf(wants, sheet.width) ?? (size <= 5 ? wants.map(({ least }) => least) : null);
    if (!widths) continue;
    const last = wants.length - 1;
    let x = sheet.left;
    const sets = table.columns.map((column, i): Set => {
      const { before, after } = wants[i]!;
      const width = widths[i]!;
      const head = sheet.lines([column.head], headStyle(size), width);
      const set = { column, x, width, head, before, after, blank: isBlank(column) };
      x += width + (i === last ? 0 : GAP);
      return set;
    });
    return { sets, size };
  }
}

const headStyle = (size: number): Style => ({ ...HEAD, size: (HEAD.size / BODY.size) * size });

/** Where a text of a column begins, so that it ends, or has its point, where the others do. */
function startOf(sheet: Sheet, set: Set, line: Line, size: number): number {
  const { column, x, width, before, after } = set;
  if (column.kind !== 'figures') return x;
  const text = line.map((part) => part.text).join('');
  const [whole] = atPoint(text);
  const block = before + after;
  const face = line[0]?.face ?? 'figure';
  return x + width - block + before - sheet.fonts.width(whole, face, size);
}

/** A table with its columns and rows set. */
interface Laid {
  readonly sheet: Sheet;
  readonly sets: readonly Set[];
  readonly size: number;
  readonly style: Style;
  readonly rows: readonly Row[];
  readonly headLines: number;
  readonly units: boolean;
  /** Of the head with the first rows, which are not parted. */
  readonly least: number;
}

const known = new WeakMap<Table, Laid>();

function laidOut(sheet: Sheet, table: Table): Laid {
  const before = known.get(table);
  if (before?.sheet === sheet) return before;
  const { sets, size } = setOf(sheet, table);
  const style: Style = { ...BODY, size, leading: (BODY.leading / BODY.size) * size };
  const rows = rowsOf(sheet, table, sets, style);
  const headLines = Math.max(...sets.map(({ head }) => head.length));
  const units = sets.some(({ column }) => unitOf(column) !== '');
  const headHeight = (headLines + (units ? 1 : 0)) * HEAD.leading + 2 * PAD;
  const least = headHeight + rows.slice(0, 2).reduce((sum, { height }) => sum + height, 0);
  const laid = { sheet, sets, size, style, rows, headLines, units, least };
  known.set(table, laid);
  return laid;
}

const titleTall = (titled: boolean): number => (titled ? TITLE.leading + 2 : 0);

/** Height of what stays together at the start of a table, points. */
export function leastTall(sheet: Sheet, table: Table, titled: boolean): number {
  return table.rows === 0 ? 0 : titleTall(titled) + laidOut(sheet, table).least;
}

/** Sets a table; returns when the sheet's cursor stands below it. */
export function drawTable(
  sheet: Sheet,
  parent: Element,
  table: Table,
  { lead, titled }: { readonly lead: number; readonly titled: boolean },
): void {
  if (table.rows === 0) return;
  const { sets, size, style, rows, headLines, units, least } = laidOut(sheet, table);
  if (!sheet.need(lead + titleTall(titled) + least) && !sheet.top) sheet.y += lead;
  if (titled) sheet.paragraph(parent, 'P', [{ strong: table.title }], TITLE);
  const foot = [
    table.more ? `And ${table.more.toLocaleString('en')} more rows in the comma-separated values.` : '',
    table.foot ?? '',
  ]
    .filter((text) => text !== '')
    .join(' ');
  const footHeight = foot ? 3 + sheet.lines([foot], FOOT, sheet.width).length * FOOT.leading : 0;
  const element = sheet.begin(parent, 'Table');
  head(sheet, element, sets, headLines, units, size);
  for (const [i, row] of rows.entries()) {
    // what is said under a table stays with its last row,
    // and the last row with the one before it
    const last = rows.length - 1;
    const below = i === last ? footHeight : i === last - 1 ? rows[last]!.height + footHeight : 0;
    if (sheet.need(row.height + below)) {
      sheet.aside(() => {
        const [line] = sheet.lines([`${table.title}, continued`], FOOT, sheet.width);
        if (line) sheet.line(line, FOOT, sheet.left, sheet.y + FOOT.leading * 0.74);
      });
      sheet.y += FOOT.leading + 2;
      head(sheet, null, sets, headLines, units, size);
    }
    drawRow(sheet, element, table, sets, row, i, style);
  }
  element.end();
  if (foot) {
    sheet.y += 3;
    sheet.paragraph(parent, 'P', [foot], FOOT);
  }
}

interface Row {
  readonly cells: readonly (readonly Line[])[];
  readonly height: number;
}

function rowsOf(sheet: Sheet, { rows, columns }: Table, sets: readonly Set[], style: Style): Row[] {
  const written = sets.some(({ blank }) => blank);
  return Array.from({ length: rows }, (_, i): Row => {
    const cells = columns.map((column, c) => {
      const text = column.texts[i]!;
      if (text === '') return [];
      const strong = column.kind === 'verdict' && column.cells[i] === false;
      const face = column.kind === 'figures' ? 'tabular' : style.face;
      return sheet.lines([strong ? { strong: text } : text], { ...style, face }, sets[c]!.width);
    });
    const lines = Math.max(1, ...cells.map((cell) => cell.length));
    const height = lines * style.leading + 2 * PAD;
    // a cell is never taller than a page
    return { cells, height: Math.min(sheet.tall * 0.9, written ? Math.max(WRITTEN.height, height) : height) };
  });
}

/** The head; with no element it is a repetition, which a reader of the tags has met. */
function head(
  sheet: Sheet,
  element: Element | null,
  sets: readonly Set[],
  lines: number,
  units: boolean,
  size: number,
): void {
  const style = headStyle(size);
  const top = sheet.y + PAD;
  const row = element && sheet.begin(element, 'TR');
  for (const set of sets) {
    const { column, x, width } = set;
    const right = column.kind === 'figures';
    const draw = (): void => {
      const put = (line: Line, at: number): void => {
        const wide = sheet.lineWidth(line, style.size);
        sheet.line(line, style, right ? x + width - wide : x, top + style.leading * (at + 0.74));
      };
      const first = lines - set.head.length;
      for (const [i, line] of set.head.entries()) put(line, first + i);
      const unit = unitOf(column);
      if (unit) put([{ text: unit, face: 'figure' }], lines);
    };
    if (!row) sheet.aside(draw);
    else {
      const cell = sheet.begin(row, 'TH', { scope: 'Column' });
      sheet.into(cell, 'TH', draw);
      cell.end();
    }
  }
  row?.end();
  sheet.y = top + (lines + (units ? 1 : 0)) * style.leading + PAD;
  sheet.aside(() => sheet.rule(sheet.y, 'ink', 0.7));
}

function drawRow(
  sheet: Sheet,
  element: Element,
  table: Table,
  sets: readonly Set[],
  { cells, height }: Row,
  index: number,
  style: Style,
): void {
  const row = sheet.begin(element, 'TR');
  const missed = table.missed?.has(index) ?? false;
  for (const [c, set] of sets.entries()) {
    const type = c === 0 ? 'TH' : 'TD';
    const cell = sheet.begin(row, type, c === 0 ? { scope: 'Row' } : {});
    const lines = cells[c]!;
    sheet.into(cell, type, () => {
      const alarm = set.column.kind === 'verdict' && set.column.cells[index] === false;
      for (const [i, line] of lines.entries()) {
        const y = sheet.y + PAD + style.leading * (i + 0.76);
        if (y > sheet.y + height) break;
        sheet.line(
          line,
          alarm ? { ...style, colour: 'alarm' } : style,
          startOf(sheet, set, line, style.size),
          y,
        );
      }
    });
    cell.end();
  }
  row.end();
  sheet.aside(() => {
    if (missed) sheet.doc.rect(sheet.left - 6, sheet.y + 1, 2, height - 2).fill('#1d2327');
    sheet.rule(sheet.y + height, 'line', 0.4);
  });
  sheet.y += height;
}
