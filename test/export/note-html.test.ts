import { createHash } from 'node:crypto';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { parse } from 'csv-parse/sync';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { tablesOf } from '../../main/export/note/content.ts';
import { noteHtml } from '../../main/export/note/html.ts';
import { tableCsv, tableTabbed } from '../../main/export/note/tables.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { solve } from '../../solver/solve.ts';
import { launch } from '../page/browser.ts';
import { awkwardChip, demos, NAMES, noteFor, solvedDemo } from './note-chips.ts';

/** The note as HTML, read in a real browser, and its tables as comma-separated values, read by another library. */

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'chip-note-html-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

test('every demo: one file that asks for nothing, without scripts', async () => {
  for (const demo of demos()) {
    const { chip, result } = await solvedDemo(demo);
    const html = noteHtml(noteFor(chip, result));
    expect(html).not.toMatch(/<(?:script|link|img|iframe|object|embed|base|form)\b/i);
    expect(html).not.toMatch(/\son[a-z]+\s*=/i);
    for (const [, url] of html.matchAll(/url\(([^)]*)\)/g)) expect(url).toMatch(/^data:font\/woff2;base64,/);
    // the one address is the name of the SVG language, which nothing fetches
    const addresses = [...html.matchAll(/https?:\/\/[^\s"'<]+/g)].map(([address]) => address);
    expect(new Set(addresses)).toEqual(new Set(['http://www.w3.org/2000/svg']));
    expect(html).toContain(createHash('sha256').update(writeDescription(chip)).digest('hex'));
  }
});

test('in a browser: nothing fetched, names whole and harmless, the drawing to scale', async () => {
  const chip = awkwardChip();
  const result = await solve(chip, { junctions: 'ideal' });
  const path = join(folder, 'names.html');
  writeFileSync(path, noteHtml(noteFor(chip, result)));
  const browser = await launch();
  try {
    const page = await browser.newPage();
    const asked: string[] = [];
    const said: string[] = [];
    page.on('request', (request) => asked.push(request.url()));
    page.on('console', (message) => said.push(message.text()));
    page.on('dialog', () => said.push('a dialog'));
    const url = pathToFileURL(path).href;
    await page.goto(url);
    expect(asked.filter((one) => !one.startsWith('data:'))).toEqual([url]);
    expect(said).toEqual([]);
    const cells = await page.locator('th bdi, td bdi').allTextContents();
    for (const name of Object.values(NAMES)) expect(cells).toContain(name);
    expect(await page.locator('script').count()).toBe(0);
    expect(await page.evaluate(() => document.fonts.check('14px Literata'))).toBe(true);
    // CSS: 96 px to the inch, so 76 mm at 2 : 1 is 152 mm
    const width = await page
      .locator('svg path')
      .first()
      .evaluate(
        (path) => (path as SVGPathElement).getBBox().width * (path as SVGPathElement).getScreenCTM()!.a,
      );
    expect(width / (96 / 25.4)).toBeCloseTo(152, 1);
    expect(await page.evaluate(() => document.documentElement.scrollWidth <= window.innerWidth)).toBe(true);
  } finally {
    await browser.close();
  }
});

const rowsOf = (csv: string): string[][] => parse(csv, { relax_column_count: false });

test('tables: as many fields in every record, CRLF, no name that runs as a formula, none lost', async () => {
  const chip = awkwardChip();
  const result = await solve(chip, { junctions: 'ideal' });
  const tables = tablesOf(noteFor(chip, result));
  const seen = new Set<string>();
  for (const table of tables) {
    const csv = tableCsv(table);
    expect(csv.endsWith('\r\n')).toBe(true);
    const [head, ...rows] = rowsOf(csv);
    expect(head).toHaveLength(table.columns.length);
    expect(rows).toHaveLength(table.rows);
    for (const row of rows)
      for (const cell of row) {
        seen.add(cell.replace(/^'(?=[=+\-@])/, ''));
        // figures may begin with a minus; a text may not
        if (/^[=+\-@\t\r]/.test(cell)) expect(cell).toMatch(/^-\d/);
      }
    for (const line of tableTabbed(table).split('\n'))
      for (const cell of line.split('\t'))
        if (/^[=+\-@]/.test(cell)) expect(Number.isFinite(Number(cell))).toBe(true);
  }
  for (const name of Object.values(NAMES)) expect(seen).toContain(name);
});

test('the flow-split table holds the result to all its digits', async () => {
  for (const demo of demos()) {
    const { chip, result } = await solvedDemo(demo);
    const table = tablesOf(noteFor(chip, result)).find(({ id }) => id === 'flow-split')!;
    const [head, ...rows] = rowsOf(tableCsv(table));
    const flow = head!.findIndex((name) => name.startsWith('flow ('));
    const unit = { 'nL/min': 1e-12 / 60, 'uL/min': 1e-9 / 60, 'mL/min': 1e-6 / 60 }[
      /\((.*)\)/.exec(head![flow]!)![1]!
    ]!;
    for (const { id, flow: q } of result.ports) {
      if (q === null || q >= 0) continue;
      const row = rows.find(([name]) => name === id)!;
      expect(Number(row[flow]) / (-q / unit)).toBeCloseTo(1, 12);
    }
    for (const [i, { met }] of result.targets.entries()) expect(rows[i]!.at(-1)).toBe(met ? 'yes' : 'no');
  }
});
