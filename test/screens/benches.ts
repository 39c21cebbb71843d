import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { largeDxf } from '../bench/import-drawing.ts';
import { dxf, outline } from '../import/read.ts';
import { answered } from '../page/desk.ts';

/** States of what goes to another's bench and comes from there: note, masks, drawings, measurements, a picture. */

const open = async (page: Page, name: RegExp, words: string): Promise<void> => {
  await page.getByRole('button', { name }).click();
  await page.locator('.frame').waitFor();
  await answered(page);
  await page.locator('.sheet-surface').first().focus();
  await page.keyboard.press('/');
  await page.keyboard.type(words);
  await page.keyboard.press('Enter');
};
/** What was asked last into view, as a person scrolls to it. */
const seen = async (page: Page, text: RegExp | string): Promise<void> => {
  const at = page.getByText(text).first();
  await at.waitFor({ timeout: 120_000 });
  await at.scrollIntoViewIfNeeded();
};
const place = async (page: Page): Promise<void> => {
  await page.getByRole('dialog').waitFor();
  await page.getByRole('dialog').getByLabel('File name').waitFor();
  await page.keyboard.press('Enter');
};

const box = (x: number, y: number, width: number, height: number): number[][] => [
  [x, y],
  [x + width, y],
  [x + width, y + height],
  [x, y + height],
];
const MIXED = dxf(
  [
    ...outline([
      [2000, 6000],
      [30000, 6000],
      [30000, 2000],
      [30300, 2000],
      [30300, 6000],
      [60000, 6000],
      [60000, 6300],
      [2000, 6300],
    ]),
    ...outline(box(10000, 9000, 6000, 4000)),
    ...outline(box(16000, 10900, 20000, 200)),
    ...outline(box(4000, 14000, 40000, 150), 'Gas Ω, obere Lage'),
    ...[0, 'LINE', 8, 'centre lines', 10, 5000, 20, 16000, 11, 40000, 21, 16000],
    ...[0, 'CIRCLE', 8, 'HOLES', 10, 2500, 20, 6150, 40, 375],
    ...outline(box(0, 0, 70000, 20000), 'OUTLINE'),
    ...[0, 'TEXT', 8, 'NOTES', 10, 0, 20, 0, 40, 5, 1, 'a'],
    ...[0, 'DIMENSION', 8, 'NOTES', 10, 0, 20, 0],
    ...[0, '3DSOLID', 8, 'NOTES'],
  ],
  [],
  0,
);

async function drawing(page: Page, name: string, text: string): Promise<void> {
  const path = join(mkdtempSync(join(tmpdir(), 'channelwright-screens-')), name);
  writeFileSync(path, text);
  await page.getByLabel('A drawing to bring in').setInputFiles(path);
}

/** A photograph as a picture of the page itself: whatever is on the sheet. */
async function photo(page: Page): Promise<void> {
  const path = join(mkdtempSync(join(tmpdir(), 'channelwright-screens-')), 'chip under the microscope.png');
  await page.locator('.sheet-surface').first().screenshot({ path });
  await page.getByLabel('A picture to trace').setInputFiles(path);
}

async function pick(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Pick two points' }).click();
  const at = (await page.locator('.sheet-surface').first().boundingBox())!;
  await page.mouse.click(at.x + at.width * 0.4, at.y + at.height * 0.5);
  await page.mouse.click(at.x + at.width * 0.6, at.y + at.height * 0.52);
  await page.getByLabel('They are apart by').waitFor();
}

const compare = async (page: Page, table: string): Promise<void> => {
  await page.getByLabel('Table, typed or pasted').fill(table);
  await page.getByRole('button', { name: 'Compare with the drawing' }).click();
};
const MEASURED = 'part,what,value (um),uncertainty\nflow,depth,78.5,0.4\nlevel 3 arm 1,width,126,1\n';

export const BENCHES: Readonly<Record<string, (page: Page) => Promise<void>>> = {
  'note written': async (page) => {
    await open(page, /Eight-way/, 'hand over');
    await page.getByLabel('Paper').selectOption('letter');
    await page.getByRole('button', { name: 'Write the note' }).click();
    await place(page);
    await seen(page, /Written to .*note/);
  },
  'mask on a wafer': async (page) => {
    await open(page, /Eight-way/, 'hand over');
    await page.getByLabel('Wafer diameter').fill('200 mm');
    await page.getByLabel('Wafer diameter').press('Enter');
    await page.getByLabel('Pitch upward').waitFor();
    await page.getByRole('button', { name: 'Make the masks' }).click();
    await place(page);
    await seen(page, /Written to .*mask/);
  },
  'mask refused': async (page) => {
    await open(page, /Eight-way/, 'hand over');
    await page.getByLabel('Undercut on each side').fill('300 um');
    await page.getByLabel('Undercut on each side').press('Enter');
    await page.getByRole('button', { name: 'Make the masks' }).click();
    await place(page);
    await seen(page, /closed/);
  },
  'drawing read': async (page) => {
    await open(page, /Cell loading/, 'bring in a drawing');
    await drawing(page, 'tee.dxf', MIXED);
    await page.getByRole('button', { name: 'Find channels' }).click();
    await seen(page, /does not say what its numbers are in/);
  },
  'drawing found': async (page) => {
    await open(page, /Cell loading/, 'bring in a drawing');
    await drawing(page, 'tee.dxf', MIXED);
    await page.getByLabel('One unit is').selectOption('um');
    await page.getByRole('button', { name: 'Find channels' }).click();
    await seen(page, 'What became of it');
    await seen(page, 'Taken for granted');
  },
  'drawing underway': async (page) => {
    await open(page, /Cell loading/, 'bring in a drawing');
    await drawing(page, 'large.dxf', largeDxf(50_000));
    await page.getByRole('button', { name: 'Find channels' }).click();
    await page.getByRole('button', { name: 'Cancel' }).waitFor();
  },
  'drawing cancelled': async (page) => {
    await open(page, /Cell loading/, 'bring in a drawing');
    await drawing(page, 'large.dxf', largeDxf(50_000));
    await page.getByRole('button', { name: 'Find channels' }).click();
    await page.getByRole('button', { name: 'Cancel' }).click();
    await seen(page, /Cancelled/);
  },
  'drawing broken': async (page) => {
    await open(page, /Cell loading/, 'bring in a drawing');
    await drawing(page, 'broken.dxf', MIXED.replace('\n10\n2000', '\n10\nx'));
    await seen(page, /line \d+/);
  },
  'measured wrong': async (page) => {
    await open(page, /Eight-way/, 'as built');
    await compare(page, 'part,what,value\nflow,depth,78.5 um\nlevel 9 arm 1,width,126 um\n');
    await seen(page, /Row 3/);
  },
  'measured drives': async (page) => {
    await open(page, /Eight-way/, 'as built');
    await compare(page, MEASURED);
    await page.getByRole('region', { name: 'Drives', exact: true }).waitFor({ timeout: 120_000 });
    await page
      .getByRole('button', { name: /Set these/ })
      .first()
      .scrollIntoViewIfNeeded();
  },
  'measured trial': async (page) => {
    await open(page, /Eight-way/, 'as built');
    await compare(page, MEASURED);
    await page.getByRole('button', { name: 'Keep the made chip as a trial' }).click({ timeout: 120_000 });
    await page.getByText(/Kept as the trial/).waitFor();
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('b');
    await page
      .getByRole('button', { name: /as built/ })
      .first()
      .click();
    await page.getByRole('heading', { name: /Compared with/ }).waitFor();
  },
  'picture to trace': async (page) => {
    await open(page, /Cell loading/, 'bring in a drawing');
    await photo(page);
    await pick(page);
    await seen(page, 'Lower edge at');
  },
};
