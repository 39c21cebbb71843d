import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { splitNote } from '../../main/export/note/content.ts';
import { notePdf, paperOf } from '../../main/export/note/pdf.ts';
import { COLOURS, MARGIN, type PaperName } from '../../main/export/note/pdf-page.ts';
import { solve } from '../../solver/solve.ts';
import {
  awkwardChip,
  DATE,
  demos,
  manyOutlets,
  NAMES,
  noteFor,
  PROGRAM,
  poppler,
  readPgm,
  solvedDemo,
  textOf,
  withPoppler,
} from './note-chips.ts';

/** The note as PDF, read by poppler-utils (pdfinfo, pdffonts, pdftotext, pdftoppm), which know nothing of this program. */

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'chip-note-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

async function written(name: string, pdf: Promise<Uint8Array>): Promise<string> {
  const path = join(folder, `${name}.pdf`);
  writeFileSync(path, await pdf);
  return path;
}

const demoPdf = async (name: string, paper: PaperName): Promise<string> => {
  const { chip, result } = await solvedDemo(name);
  return await written(`${name}-${paper}`, notePdf(noteFor(chip, result, paper), paper));
};

const pagesOf = (info: string): number => Number(/^Pages:\s+(\d+)/m.exec(info)![1]);

/** Lines of the text layer with all white space taken out: what was broken into lines reads whole. */
const joined = (text: string): string => text.replaceAll(/\s+/g, '');

for (const [paper, size] of [
  // ISO 216 and ANSI A in points of 1/72 inch
  ['A4', /595\.2\d* x 841\.89 pts/],
  ['letter', /612 x 792 pts/],
] as const) {
  describe(`every demo on ${paper}`, () => {
    for (const demo of demos())
      withPoppler(demo, async () => {
        const path = await demoPdf(demo, paper);
        const info = poppler('pdfinfo', path);
        expect(info).toMatch(size);
        expect(info).toMatch(/^Tagged:\s+yes/m);
        const pages = pagesOf(info);
        expect(pages).toBeGreaterThan(2);
        for (let page = 1; page <= pages; page += 1)
          expect(textOf(path, '-f', String(page), '-l', String(page))).toContain(`page ${page} of ${pages}`);
        const fonts = poppler('pdffonts', path).split('\n').slice(2).filter(Boolean);
        expect(fonts.length).toBeGreaterThan(3);
        // "name type encoding emb sub uni": embedded, a subset, with a map to Unicode
        for (const line of fonts) expect(line).toMatch(/\+\S+ +CID TrueType +Identity-H +yes yes yes /);
        const text = textOf(path);
        for (const heading of [
          'Ports and tubing',
          'Layers and process',
          'Flow split',
          'Drives and pump settings',
          'Pressure and shear by route',
          'Can it be made',
          'How far to trust it',
          'Cautions',
          'Measured on the made chip',
          'Signatures',
          PROGRAM,
          '1 December 2026, 20:15 UTC',
        ])
          expect(text).toContain(heading);
        expect(joined(text)).toContain('weareyeprotection');
      });
  });
}

withPoppler('a scale bar of 10 mm at 2 : 1 is 20 mm of paper, at 600 dots an inch', async () => {
  const path = await demoPdf('eight-way-splitter.json', 'A4');
  expect(textOf(path)).toContain('10 mm of the chip, 20 mm of paper');
  poppler('pdftoppm', '-r', '600', '-gray', '-f', '1', '-l', '1', '-singlefile', path, join(folder, 'bar'));
  const picture = readPgm(join(folder, 'bar.pgm'));
  // the bar begins where the chip does, 12 mm right of the margin; a dot is 1/600 inch
  const left = Math.round(((MARGIN.left / 72) * 25.4 + 12) * (600 / 25.4));
  const lengths: number[] = [];
  for (let y = 0; y < picture.height; y += 1) {
    if (picture.at(left - 6, y) < 128 || picture.at(left + 6, y) >= 128) continue;
    let end = left + 6;
    while (end < picture.width && picture.at(end, y) < 128) end += 1;
    lengths.push(end - left);
  }
  const wanted = (20 / 25.4) * 600;
  const bars = lengths.filter((length) => Math.abs(length - wanted) < 60);
  expect(bars.length).toBeGreaterThan(2);
  // a dot at either end
  for (const length of bars) expect(Math.abs(length - wanted)).toBeLessThanOrEqual(2);
  // the outline of 76 mm stands on 152 mm
  const outline = (152 / 25.4) * 600;
  expect(lengths.some((length) => Math.abs(length - outline) <= 4)).toBe(true);
});

withPoppler(
  'bookmarks lead to every section, and the tags hold tables with heads and drawings in words',
  async () => {
    const path = await demoPdf('cell-loading.json', 'A4');
    const bytes = readFileSync(path, 'latin1');
    for (const title of ['The chip', 'Flow split', 'Cautions', 'Signatures'])
      expect(bytes).toMatch(new RegExp(`/Title \\(${title}\\)`));
    const tags = poppler('pdfinfo', '-struct-text', path);
    for (const tag of [
      'Document',
      'Sect',
      'H1',
      'H2',
      'Table',
      'TR',
      'TH',
      'TD',
      'Figure',
      'Caption',
      'LBody',
    ])
      expect(tags).toMatch(new RegExp(`^ *${tag}\\b`, 'm'));
    // each drawing in words: pdfkit writes a text beyond ASCII as UTF-16
    expect(bytes.match(/\/Alt \(/g)).toHaveLength(2);
    // in the tags the text reads on in the order of the page
    expect(tags.indexOf('Ports and tubing')).toBeLessThan(tags.indexOf('Signatures'));
  },
);

withPoppler(
  'Greek, raised figures, right-to-left and very long names are in the text; a sign that no font has is shown by its number and copied as itself',
  async () => {
    const chip = awkwardChip();
    const result = await solve(chip, { junctions: 'ideal' });
    for (const paper of ['A4', 'letter'] as const) {
      const path = await written(`names-${paper}`, notePdf(noteFor(chip, result, paper), paper));
      const text = joined(
        textOf(path)
          .normalize('NFKC')
          .replaceAll(/[\u202a-\u202e\u2066-\u2069]/g, ''),
      );
      const { han, ...set } = NAMES;
      for (const name of Object.values(set)) expect(text).toContain(joined(name.normalize('NFKC')));
      expect(han).toBe('流路');
      expect(text).toContain(han);
      expect(text).toContain('standbytheirUnicodenumbers');
      for (const line of poppler('pdffonts', path).split('\n').slice(2).filter(Boolean))
        expect(line).toMatch(/yes yes yes /);
    }
  },
);

withPoppler('a table over several pages repeats its head on each', async () => {
  const chip = manyOutlets(150);
  const result = await solve(chip, { junctions: 'ideal' });
  const path = await written('many', notePdf(noteFor(chip, result), 'A4'));
  const pages = textOf(path, '-layout').split('\f');
  const split = pages.filter((page) => /^ *outlet +wanted +got/m.test(page));
  expect(split.length).toBeGreaterThanOrEqual(3);
  expect(split.slice(1).every((page) => page.includes('Flow split, continued'))).toBe(true);
  for (let i = 1; i <= 150; i += 1) expect(pages.join('')).toMatch(new RegExp(`^ *out ${i} `, 'm'));
});

withPoppler('no heading stands alone at the end of a page, on either paper', async () => {
  for (const file of ['eight-way-splitter.json', 'gravity-crossing.json', 'recirculation-loop.json']) {
    const { chip, result } = await solvedDemo(file);
    for (const paper of ['A4', 'letter'] as const) {
      const note = noteFor(chip, result, paper);
      const path = await written(`${file}-${paper}`, notePdf(note, paper));
      const heads = new Set(note.sections.map(({ title }) => title));
      for (const page of textOf(path, '-layout').split('\f')) {
        const lines = page.split('\n').filter((line) => line.trim() !== '');
        // the last line is the foot
        expect(heads.has(lines.at(-2)?.trim() ?? ''), `${file} on ${paper}: ${lines.at(-2)}`).toBe(false);
      }
    }
  }
});

withPoppler('a long name heads every page after the first in one line, cut short', async () => {
  const name = `Crossing ${'of a wash line and a sample line '.repeat(5)}end`;
  const chip = { ...manyOutlets(30), name };
  const path = await written('head', notePdf(noteFor(chip, solve(chip, { junctions: 'ideal' })), 'A4'));
  const [, ...pages] = textOf(path, '-layout').split('\f').slice(0, -1);
  expect(pages.length).toBeGreaterThan(1);
  for (const page of pages) expect(page.trimStart()).toMatch(/^Fabrication note · Crossing of a wash .*…\n/);
});

withPoppler('figures in columns are of even width', async () => {
  const { chip, result } = await solvedDemo('eight-way-splitter.json');
  const path = await written('even', notePdf(noteFor(chip, result), 'A4'));
  const boxes = [
    ...poppler('pdftotext', '-bbox', path, '-').matchAll(
      /xMin="([\d.]+)" yMin="[\d.]+" xMax="([\d.]+)" yMax="[\d.]+">(\d\d\.\d{3})</g,
    ),
  ];
  // positions for drilling: the same digits or not, they take the same room
  const widths = boxes.map(([, from, to]) => Number(to) - Number(from));
  expect(new Set(boxes.map(([, , , text]) => text)).size).toBeGreaterThan(5);
  expect(Math.max(...widths) - Math.min(...widths)).toBeLessThan(0.02);
});

withPoppler('the flow-split table alone is one page of its own', async () => {
  const { chip, result } = await solvedDemo('eight-way-splitter.json');
  const note = splitNote(chip, result, { program: PROGRAM, date: DATE, paper: paperOf('A4') });
  const path = await written('split', notePdf(note, 'A4'));
  expect(pagesOf(poppler('pdfinfo', path))).toBe(1);
  const text = textOf(path, '-layout');
  expect(text).toMatch(/^ *out 8 +12\.50 +12\.50/m);
  expect(text).not.toContain('Signatures');
});

/** WCAG 2.2, relative luminance and contrast ratio. */
function contrast(colour: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const c = Number.parseInt(colour.slice(at, at + 2), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  });
  return 1.05 / (0.2126 * r! + 0.7152 * g! + 0.0722 * b! + 0.05);
}

test('in black and white every text keeps a contrast of 5 on paper', () => {
  for (const colour of ['ink', 'soft', 'alarm'] as const)
    expect(contrast(COLOURS[colour])).toBeGreaterThanOrEqual(5);
});

test('the same chip, result and date give the same pages', async () => {
  const { chip, result } = await solvedDemo('gravity-crossing.json');
  const [one, two] = [noteFor(chip, result), noteFor(chip, result)];
  expect(one).toEqual(two);
});
