import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { expect, test, vi } from 'vitest';
import { dxf, outline } from '../import/read.ts';
import { answered, description, placeOnPage, sit } from './desk.ts';
import { EVERYTHING } from './everything.ts';
import { snakeChip } from './snake.ts';

/**
 * Nonsense in every field that there is: it stays in the field, it is explained beside it, it is never
 * applied and never lost. Fields are found in the page itself, so that a new one is tested as it comes.
 */

/** Texts that a field of numbers must refuse; one and the other in turn. */
const NONSENSE = ['three bananas', '12 parsec', '1e', '--4 µm', '5 mm of it'];

/** A place on the sheet, mm of the chip, clicked. */
async function clickAt(page: Page, x: number, y: number): Promise<void> {
  const { width, height } = EVERYTHING.outline;
  const at = await placeOnPage(page, { width: width / 1e3, height: height / 1e3 }, x, y);
  await page.mouse.click(at.x, at.y);
}

/** Every field of the card now open, nonsense typed into it; the labels of those that took it wrongly. */
async function fillAll(
  page: Page,
  within = '.card',
): Promise<{ readonly fields: string[]; readonly wrong: string[] }> {
  await page.locator(`${within} details`).evaluateAll((all) => {
    for (const element of all) element.setAttribute('open', '');
  });
  const inputs = page.locator(
    // a name that may be left open takes any text
    `${within} .field input:not([readonly], [type="range"], #new-name), ${within} .field textarea`,
  );
  const fields: string[] = [];
  const wrong: string[] = [];
  const count = await inputs.count();
  for (let i = 0; i < count; i += 1) {
    const input = inputs.nth(i);
    const label = await input.evaluate(
      (element) => (element as HTMLInputElement).labels?.[0]?.textContent ?? '',
    );
    fields.push(label);
    // any text is a name but none
    const text = label === 'Name' || label === 'Layer of the chip' ? '' : NONSENSE[i % NONSENSE.length]!;
    await input.fill(text);
    await input.blur();
    const after = await input.evaluate((element) => {
      const field = element as HTMLInputElement;
      const says = document.getElementById(field.getAttribute('aria-describedby') ?? '');
      return {
        text: field.value,
        invalid: field.getAttribute('aria-invalid'),
        says: says?.textContent ?? '',
      };
    });
    if (after.text !== text || after.invalid !== 'true' || after.says.length < 12)
      wrong.push(`${label}: ${JSON.stringify(after)}`);
  }
  return { fields, wrong };
}

test('nonsense in every field: kept, explained, never applied, never lost', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-fields-'));
  const file = join(folder, 'everything.json');
  writeFileSync(file, JSON.stringify(EVERYTHING));
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  try {
    const at: Readonly<Record<string, () => Promise<unknown>>> = {
      channel: () => clickAt(page, 8, 10),
      chamber: () => clickAt(page, 13, 9),
      via: () => clickAt(page, 26, 10),
      'port with a vessel': () => clickAt(page, 4, 10),
      'port with a pump': () => clickAt(page, 36, 10),
      chip: async () => {
        await page.locator('.sheet-surface').first().focus();
        await page.keyboard.press('i');
        await page.getByRole('heading', { name: 'Chip and fluid' }).waitFor();
      },
    };
    const seen: Record<string, number> = {};
    for (const [name, open] of Object.entries(at)) {
      await open();
      const { fields, wrong } = await fillAll(page);
      seen[name] = fields.length;
      expect(wrong, name).toEqual([]);
      // by the keyboard's way back the old text stands again
      const first = page.locator('.card .field input:not([readonly])').first();
      await first.press('Escape');
      expect(await first.getAttribute('aria-invalid'), name).toBe('false');
    }
    // as many fields as the description has numbers and names there
    expect(seen).toEqual({
      channel: 9,
      chamber: 4,
      via: 4,
      'port with a vessel': 14,
      'port with a pump': 11,
      chip: 48,
    });
    // nothing was ever applied: there is nothing to undo, and nothing was kept anew
    expect(await page.locator('.header p').textContent()).not.toContain('last');
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
}, 400_000);

/** The chip as the page holds it: its description by way of the clipboard, and what could be undone. */
async function chipNow(page: Page): Promise<string> {
  const text = await description(page);
  return `${text} ${await page.locator('.header-verbs button').first().getAttribute('title')}`;
}

test('nonsense in the fields of every maker: kept, explained, never applied, never lost', async () => {
  const sitting = await sit();
  const { page } = sitting;
  const sheet = page.locator('.sheet-surface').first();
  /** What makes it, its box in mm, and how many fields it has beside those of the part. */
  const MAKERS = [
    { key: 'r', title: 'Serpentine', from: '5, 80', to: '35, 65', fields: 6 },
    { key: 't', title: 'Splitting tree', from: '45, 80', to: '75, 60', fields: 5 },
    { key: 'g', title: 'Gradient tree', from: '5, 55', to: '60, 35', fields: 6 },
    { key: 'w', title: 'Row of chambers', from: '5, 30', to: '60, 25', fields: 5 },
    // solved, its slits lie in one cell with the spaces all the way
    { key: 'o', title: 'Posts', from: '65, 30', to: '75, 25', fields: 5 },
  ] as const;
  try {
    await page.getByLabel('Size').selectOption('plate');
    await page.getByRole('button', { name: 'Begin', exact: true }).click();
    await page.locator('.frame').waitFor();
    for (const { key, title, from, to, fields: wanted } of MAKERS) {
      await sheet.focus();
      await page.keyboard.press(key);
      await page.keyboard.type(from);
      await page.keyboard.press('Enter');
      await page.keyboard.type(to);
      await page.keyboard.press('Enter');
      const maker = page.locator('.card').getByRole('region', { name: title });
      await maker.waitFor();
      // The card is drawn anew while answers come. All junctions of what was made need not be solved for this.
      await vi.waitFor(async () => expect(await maker.locator('input').count(), title).toBe(wanted), {
        timeout: 60_000,
        interval: 100,
      });
      // the next frame puts the focus into the card; only then the sheet may have it
      await page.waitForFunction(() => document.activeElement?.closest('.card') !== null);
      const chosen = await page.locator('.card h2').textContent();
      const before = await chipNow(page);
      // back to it by its table
      const tab = await page.getByRole('gridcell', { name: chosen!, exact: true }).count();
      if (tab === 0) await page.getByRole('tab', { name: /Channels/ }).click();
      await page.getByLabel('Filter the table').fill(chosen!);
      await page.getByRole('gridcell', { name: chosen!, exact: true }).first().click();
      await maker.waitFor();
      const { fields, wrong } = await fillAll(page);
      expect(wrong, title).toEqual([]);
      expect(fields.length, title).toBeGreaterThanOrEqual(wanted);
      // what stands in the fields stays there while the rest of the page goes on
      const kept = await maker
        .locator('input')
        .evaluateAll((all) => all.map((one) => (one as HTMLInputElement).value));
      await page.getByRole('tab', { name: /Findings/ }).click();
      await page.waitForTimeout(500);
      expect(
        await maker.locator('input').evaluateAll((all) => all.map((one) => (one as HTMLInputElement).value)),
        title,
      ).toEqual(kept);
      await page.getByLabel('Filter the table').fill('');
      expect(await chipNow(page), title).toBe(before);
    }
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 400_000);

test('nonsense in the fields of every panel: repeating, plots, masks, bringing in, measurements, a new chip', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-panels-'));
  const drawing = join(folder, 'lane.dxf');
  writeFileSync(
    drawing,
    dxf(
      outline([
        [2000, 6000],
        [60000, 6000],
        [60000, 6300],
        [2000, 6300],
      ]),
      [],
      0,
    ),
  );
  const sitting = await sit();
  const { page } = sitting;
  const sheet = page.locator('.sheet-surface').first();
  const command = async (words: string): Promise<void> => {
    await sheet.focus();
    await page.keyboard.press('/');
    await page.keyboard.type(words);
    await page.keyboard.press('Enter');
  };
  try {
    // the start has fields of its own
    await page.getByLabel('Size').selectOption('own');
    const start = await fillAll(page, '.start');
    expect(start.wrong, 'start').toEqual([]);
    expect(start.fields).toEqual(['Width', 'Height', 'Depth of its channels']);
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    const before = await chipNow(page);
    const panels: Readonly<Record<string, () => Promise<unknown>>> = {
      // a command runs after the list of them has closed: the card that was there has fields too
      repeat: async () => {
        await command('array and offset');
        await page.getByLabel('How many in all').waitFor();
      },
      plots: async () => {
        await command('plots');
        await page.getByLabel('Sweep the').waitFor();
      },
      'hand over': async () => {
        await command('hand over');
        // with a wafer there are more
        await page.getByLabel('Wafer diameter').fill('100 mm');
        await page.getByLabel('Wafer diameter').press('Enter');
        await page.getByLabel('Rim kept free').waitFor();
      },
      'bring in': async () => {
        await command('bring in');
        await page.getByLabel('A drawing to bring in').setInputFiles(drawing);
        await page.getByLabel('Width of bare lines').waitFor();
      },
    };
    const seen: Record<string, number> = {};
    for (const [name, open] of Object.entries(panels)) {
      await sheet.focus();
      await page.keyboard.press('Control+a');
      await open();
      const { fields, wrong } = await fillAll(page);
      seen[name] = fields.length;
      expect(wrong, name).toEqual([]);
      await page.keyboard.press('Escape');
    }
    expect(seen).toEqual({ repeat: 5, plots: 2, 'hand over': 7, 'bring in': 4 });
    // measurements are one table: what is wrong with it stands beside it, and the table stays as it was typed
    await command('as built');
    const table = page.getByLabel('Table, typed or pasted');
    for (const text of [
      'three bananas',
      'part,what,value\nflow,depth,12 parsec',
      'part,what,value\nflow,colour,3 um',
    ]) {
      await table.fill(text);
      await page.getByRole('button', { name: 'Compare with the drawing' }).click();
      await page.locator('.card p.fault').waitFor();
      expect(await table.inputValue()).toBe(text);
      expect(await table.getAttribute('aria-invalid')).toBe('true');
      expect((await page.locator('.card p.fault').textContent())!.length).toBeGreaterThan(12);
      await table.fill('');
      await page.locator('.card p.fault').waitFor({ state: 'detached' });
    }
    await page.getByRole('button', { name: 'Close' }).first().click();
    expect(await chipNow(page)).toBe(before);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
}, 400_000);

test('a choice that follows an edit at once is made of what that left', async () => {
  const sitting = await sit();
  const { page } = sitting;
  const sheet = page.locator('.sheet-surface').first();
  try {
    await page.getByLabel('Size').selectOption('plate');
    await page.getByRole('button', { name: 'Begin', exact: true }).click();
    await page.locator('.frame').waitFor();
    await sheet.focus();
    await page.keyboard.press('t');
    for (const place of ['5, 80', '115, 5']) {
      await page.keyboard.type(place);
      await page.keyboard.press('Enter');
    }
    await answered(page);
    // 128 outlets have room only with smaller holes: both in one turn of the page, as no hand can be too fast
    await page.getByLabel('Holes').fill('350 um');
    await page.evaluate(() => {
      const labelled = (text: string) =>
        [...document.querySelectorAll('label')].find((label) => label.textContent === text)!.control!;
      labelled('Holes').dispatchEvent(new KeyboardEvent('keydown', { key: 'Enter', bubbles: true }));
      const outlets = labelled('Outlets') as HTMLSelectElement;
      outlets.value = '7';
      for (const kind of ['input', 'change']) outlets.dispatchEvent(new Event(kind, { bubbles: true }));
    });
    await page.getByRole('tab', { name: 'Ports 129' }).waitFor({ timeout: 60_000 });
    expect(await page.getByLabel('Outlets').inputValue()).toBe('7');
    expect(await page.getByLabel('Holes').inputValue()).toBe('350 µm');
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 200_000);

test('keys that follow each other faster than answers come all count', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-steps-'));
  const file = join(folder, 'snake.json');
  writeFileSync(file, snakeChip(300));
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  try {
    await answered(page);
    await page.getByRole('tab', { name: /^Channels/ }).click();
    await page.getByRole('gridcell', { name: 'c7', exact: true }).click();
    const width = page.getByLabel('Width', { exact: true });
    await width.focus();
    await Promise.all(Array.from({ length: 7 }, () => page.keyboard.press('ArrowUp')));
    await vi.waitUntil(async () => /^170\b/.test(await width.inputValue()), { timeout: 10_000 });
    await page.keyboard.press('ArrowDown');
    await vi.waitUntil(async () => /^160\b/.test(await width.inputValue()), { timeout: 10_000 });
    await page.getByRole('button', { name: /^Undo/ }).click();
    await answered(page);
    expect(await width.inputValue()).toMatch(/^170\b/);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
}, 200_000);
