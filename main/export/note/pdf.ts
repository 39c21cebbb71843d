import type { Block, Section } from './blocks.ts';
import type { Note } from './content.ts';
import type { Paper } from './drawing.ts';
import {
  COLOURS,
  type Element,
  type Line,
  MARGIN,
  PAPERS,
  type PaperName,
  Sheet,
  type Style,
} from './pdf-page.ts';
import { drawPictures } from './pdf-picture.ts';
import { drawTable, leastTall } from './pdf-table.ts';
import { MM_PER_POINT } from './picture.ts';

/** The note as PDF: vector, fonts embedded as subsets, tagged, with bookmarks. */

const KIND: Style = { face: 'figure', size: 9, leading: 12, colour: 'soft' };
const TITLE: Style = { face: 'text', size: 21, leading: 26 };
const REMARK: Style = { face: 'text', size: 10.5, leading: 15 };
const HEADING: Style = { face: 'text', size: 13.5, leading: 18 };
const WORDS: Style = { face: 'text', size: 9.6, leading: 13.6 };
const SOFT: Style = { ...WORDS, size: 8.6, leading: 12, colour: 'soft' };
const NAME: Style = { face: 'figure', size: 8.4, leading: 12.6, colour: 'soft' };
const VALUE: Style = { face: 'figure', size: 8.4, leading: 12.6 };
const FOOT: Style = { face: 'figure', size: 7, leading: 9, colour: 'soft' };

const NAMES_WIDE = 118;
const BULLET = 12;
/** What stands with a heading so that it is not left alone at the end of a page. */
const WITH_HEADING = 58;
/** A line to sign on. */
const SIGNED = 30;

/** What a drawing may take of a page, mm. */
export function paperOf(name: PaperName): Paper {
  const { width, height } = PAPERS[name];
  return {
    width: (width - MARGIN.left - MARGIN.right) * MM_PER_POINT,
    height: (height - MARGIN.top - MARGIN.bottom) * MM_PER_POINT * 0.62,
  };
}

const NUMBERED =
  'Signs that the typefaces of this document do not have stand by their Unicode numbers, as in [U+0000]. Copied or searched for, they are the signs themselves; the same note as HTML shows them in the typefaces of whoever reads it.';

/** The whole document as bytes. */
export async function notePdf(note: Note, paper: PaperName): Promise<Uint8Array> {
  const { title, subtitle, origin } = note;
  const sheet = new Sheet(paper, `${title}: ${subtitle.toLowerCase()}`, {
    Subject: subtitle,
    Creator: origin.program,
    Producer: `${origin.program} with pdfkit`,
    Keywords: `chip ${origin.hash}`,
  });
  const chunks: Uint8Array[] = [];
  const done = new Promise<void>((ended, failed) => {
    sheet.doc.on('data', (chunk: Uint8Array) => chunks.push(chunk));
    sheet.doc.on('end', ended);
    sheet.doc.on('error', failed);
  });
  const root = sheet.doc.struct('Document');
  sheet.doc.addStructure(root);
  opening(sheet, root, note);
  for (const section of note.sections) drawSection(sheet, root, section, note.sections.length > 1);
  if (sheet.fonts.numbered) {
    sheet.y += 6;
    sheet.paragraph(root, 'P', [NUMBERED], SOFT, { width: Math.min(sheet.width, 450) });
  }
  root.end();
  feet(sheet, note);
  sheet.doc.end();
  await done;
  return Buffer.concat(chunks);
}

function opening(sheet: Sheet, root: Element, { title, subtitle, remark }: Note): void {
  sheet.paragraph(root, 'P', [subtitle], KIND);
  sheet.paragraph(root, 'H1', [{ strong: title }], TITLE);
  if (remark) {
    sheet.y += 2;
    sheet.paragraph(root, 'P', [remark], REMARK, { width: Math.min(sheet.width, 430) });
  }
  sheet.y += 4;
}

/** The height of what is not parted over pages, points; a heading stays with it. */
function wholeOf(sheet: Sheet, block: Block, heading: string): number {
  if (block.kind === 'table') return leastTall(sheet, block.table, block.table.title !== heading) + 2;
  if (block.kind === 'lines') return SIGNED * block.rows.length + 14;
  if (block.kind !== 'pictures') return 0;
  return Math.max(...block.pictures.map(({ height }) => height / MM_PER_POINT)) + 40;
}

function drawSection(sheet: Sheet, root: Element, { title, blocks }: Section, headed: boolean): void {
  const section = sheet.begin(root, 'Sect');
  if (headed) {
    const least = Math.max(WITH_HEADING, blocks[0] ? wholeOf(sheet, blocks[0], title) : 0);
    if (!sheet.need(20 + HEADING.leading + least) && !sheet.top) sheet.y += 16;
    sheet.doc.outline.addItem(title, { top: Math.max(0, sheet.y - 8) } as object);
    sheet.paragraph(section, 'H2', [{ strong: title }], HEADING);
    sheet.y += 3;
  }
  let first = true;
  for (const block of blocks) {
    drawBlock(sheet, section, block, { lead: first ? 0 : 7, heading: headed ? title : '' });
    first = false;
  }
  section.end();
}

function drawBlock(
  sheet: Sheet,
  section: Element,
  block: Block,
  { lead, heading }: { readonly lead: number; readonly heading: string },
): void {
  switch (block.kind) {
    case 'table':
      // a table that is what its section is called needs no title of its own
      drawTable(sheet, section, block.table, {
        lead: lead + (lead > 0 ? 3 : 0),
        titled: block.table.title !== heading && heading !== '',
      });
      return;
    case 'pictures':
      drawPictures(sheet, section, block.pictures, lead + 3);
      return;
    case 'facts':
      sheet.y += sheet.top ? 0 : lead;
      for (const { name, value } of block.rows) fact(sheet, section, name, value);
      return;
    case 'list':
      sheet.y += sheet.top ? 0 : lead / 2;
      list(sheet, section, block.items);
      return;
    case 'lines':
      lines(sheet, section, block);
      return;
    default:
      sheet.y += sheet.top ? 0 : lead;
      sheet.paragraph(section, 'P', block.runs, block.soft ? SOFT : WORDS, {
        width: Math.min(sheet.width, 450),
      });
  }
}

type Facts = Extract<Block, { kind: 'facts' }>['rows'][number];

function fact(sheet: Sheet, section: Element, name: string, value: Facts['value']): void {
  const wide = sheet.width - NAMES_WIDE;
  const tall = sheet.lines(value, VALUE, wide).length * VALUE.leading;
  sheet.need(Math.min(tall, sheet.tall));
  const top = sheet.y;
  sheet.paragraph(section, 'P', [name], NAME, { width: NAMES_WIDE - 8 });
  const below = sheet.y;
  sheet.y = top;
  sheet.paragraph(section, 'P', value, VALUE, { x: sheet.left + NAMES_WIDE, width: wide });
  sheet.y = Math.max(sheet.y, below);
}

function list(sheet: Sheet, section: Element, items: Extract<Block, { kind: 'list' }>['items']): void {
  const element = sheet.begin(section, 'L');
  for (const item of items) {
    sheet.need(WORDS.leading * 2);
    const entry = sheet.begin(element, 'LI');
    const y = sheet.y;
    const label = sheet.begin(entry, 'Lbl');
    sheet.into(label, 'Lbl', () =>
      sheet.line([{ text: '–', face: 'text' }], WORDS, sheet.left, y + WORDS.leading * 0.74),
    );
    label.end();
    sheet.paragraph(entry, 'LBody', item, WORDS, {
      x: sheet.left + BULLET,
      width: Math.min(sheet.width, 450) - BULLET,
    });
    entry.end();
    sheet.y += 2;
  }
  element.end();
}

/** Rows with a rule to write on under each head. */
function lines(sheet: Sheet, section: Element, { rows, heads }: Extract<Block, { kind: 'lines' }>): void {
  const tall = SIGNED;
  const name = 70;
  const shares = heads.map((_, i) => (i === heads.length - 1 ? 1.6 : 1));
  const all = shares.reduce((sum, share) => sum + share, 0);
  const wide = sheet.width - name;
  sheet.need(tall * rows.length + 14);
  for (const row of rows) {
    const y = sheet.y + tall - 6;
    const element = sheet.begin(section, 'P');
    sheet.into(element, 'P', () => {
      sheet.line([{ text: row, face: 'figure' }], { ...VALUE, colour: 'ink' }, sheet.left, y);
    });
    element.end();
    let x = sheet.left + name;
    sheet.aside(() => {
      for (const [i, head] of heads.entries()) {
        const width = (wide * shares[i]!) / all;
        sheet.rule(y + 1.5, 'soft', 0.5, x, x + width - 12);
        sheet.line([{ text: head, face: 'figure' }], FOOT, x, y + 9.5);
        x += width;
      }
    });
    sheet.y += tall;
  }
  sheet.y += 8;
}

/** One line of what the page is of; a long title is cut short. */
function headOf(sheet: Sheet, kind: string, title: string, wide: number): Line {
  const all = sheet.lines([kind + title], FOOT, wide);
  if (all.length === 1) return all[0]!;
  const signs = [...title];
  let [fits, not] = [0, signs.length];
  while (not - fits > 1) {
    const middle = (fits + not) >> 1;
    const some = `${kind}${signs.slice(0, middle).join('').trimEnd()}…`;
    if (sheet.lines([some], FOOT, wide).length === 1) fits = middle;
    else not = middle;
  }
  return sheet.lines([`${kind}${signs.slice(0, fits).join('').trimEnd()}…`], FOOT, wide)[0]!;
}

/** "page x of y", what the page is of, and which chip and program it came from. */
function feet(sheet: Sheet, { title, subtitle, origin }: Note): void {
  const { doc } = sheet;
  const { start, count } = doc.bufferedPageRange();
  const from = `${origin.program} · ${origin.date} · chip ${origin.hash.slice(0, 16)}`;
  const wide = sheet.width - 150;
  const head = headOf(sheet, `${subtitle} · `, title, wide);
  for (let page = 0; page < count; page += 1) {
    doc.switchToPage(start + page);
    const { height } = doc.page;
    doc.markContent('Artifact', { type: 'Pagination' });
    if (page > 0) sheet.line(head, FOOT, sheet.left, MARGIN.top - 24);
    doc
      .lineWidth(0.4)
      .moveTo(sheet.left, height - 44)
      .lineTo(sheet.right, height - 44)
      .stroke(COLOURS.line);
    sheet.line([{ text: from, face: 'figure' }], FOOT, sheet.left, height - 33);
    const number = `page ${page + 1} of ${count}`;
    const width = sheet.fonts.width(number, 'figure', FOOT.size);
    sheet.line([{ text: number, face: 'figure' }], FOOT, sheet.right - width, height - 33);
    doc.endMarkedContent();
  }
}
