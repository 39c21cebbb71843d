import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import AxeBuilder from 'axe-core';
import type { Page } from 'playwright-core';
import { expect, test, vi } from 'vitest';
import { answered, copied, placeOnPage, sit } from './desk.ts';
import { EVERYTHING } from './everything.ts';

/** What the page does in states that a day brings: dragging, motion, forced colours, every panel, a remedy. */

async function serious(page: Page): Promise<string[]> {
  await page.evaluate(AxeBuilder.source);
  return page.evaluate(async () => {
    const { axe } = window as unknown as { axe: typeof import('axe-core') };
    const { violations } = await axe.run(document, { resultTypes: ['violations'] });
    return violations
      .filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html.slice(0, 120)).join(' | ')}`);
  });
}

const sheet = (page: Page) => page.locator('.sheet-surface').first();
const press = async (page: Page, key: string): Promise<void> => {
  await sheet(page).focus();
  await page.keyboard.press(key);
};
/** What the sheet's canvases show, as one text. */
const picture = (page: Page): Promise<string> =>
  page.evaluate(() => [...document.querySelectorAll('canvas')].map((one) => one.toDataURL()).join(' '));

test('dragging answers as it goes, keeps nothing of it, and each new answer is announced once', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Cell loading/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    const status = page.locator('.verdicts [role="status"]');
    await page.waitForTimeout(1200);
    await page.evaluate(() => {
      const said: string[] = [];
      Object.assign(window, { said });
      const target = document.querySelector('.verdicts [role="status"]')!;
      new MutationObserver(() => said.push(target.textContent ?? '')).observe(target, {
        childList: true,
        characterData: true,
        subtree: true,
      });
    });
    const first = await status.textContent();
    expect(first).toContain('Do the cells survive?');
    // the port at the left is drawn upward, with what hangs on it
    await page.getByRole('tab', { name: /Ports/ }).click();
    await page.getByRole('gridcell', { name: 'cells', exact: true }).click();
    const [across, up] = await Promise.all(
      ['Across', 'Up'].map(async (name) => Number.parseFloat(await page.getByLabel(name).inputValue())),
    );
    const { x, y } = await placeOnPage(page, { width: 76, height: 26 }, across!, up!);
    await page.mouse.move(x, y);
    await page.mouse.down();
    for (let i = 1; i <= 12; i += 1) await page.mouse.move(x, y - 4 * i);
    await page.locator('.verdicts[data-preview]').waitFor();
    await page.getByText(/Roughly, while it is dragged/).waitFor();
    // given up: the chip is as it was, nothing is to be undone, nothing was announced
    await page.keyboard.press('Escape');
    await page.mouse.up();
    await page.locator('.verdicts:not([data-preview])').waitFor();
    await answered(page);
    expect(await page.locator('.header p').textContent()).not.toContain('last');
    // and now for good
    await page.mouse.move(x, y);
    await page.mouse.down();
    for (let i = 1; i <= 12; i += 1) await page.mouse.move(x, y - 4 * i);
    await page.mouse.up();
    await answered(page);
    await page.waitForTimeout(1200);
    expect(await page.locator('.header p').textContent()).toContain('last');
    const said = await page.evaluate(() => (window as unknown as { said: string[] }).said);
    expect(said.some((text) => text.includes('while it is dragged'))).toBe(false);
    expect(new Set(said).size).toBe(said.length);
    expect(said.length).toBeLessThanOrEqual(2);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 200_000);

test('motion only where it is allowed; forced colours; every panel, light and dark, without a serious finding', async () => {
  const sitting = await sit({ width: 1280, height: 720 });
  const { page } = sitting;
  try {
    await page.emulateMedia({ reducedMotion: 'reduce' });
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    await press(page, '2');
    await page.waitForTimeout(300);
    const still = await picture(page);
    await page.waitForTimeout(400);
    expect((await picture(page)) === still, 'at rest').toBe(true);
    await page.emulateMedia({ reducedMotion: 'no-preference' });
    await vi.waitFor(async () => expect((await picture(page)) === still, 'moving').toBe(false), {
      timeout: 20_000,
      interval: 100,
    });
    await page.emulateMedia({ reducedMotion: 'reduce' });
    for (const colorScheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme });
      for (const open of ['i', 'b', 'e', 'u', 'a', '?', '/']) {
        await press(page, open);
        await page.waitForTimeout(open === 'u' ? 600 : 120);
        expect(await serious(page), `${open} ${colorScheme}`).toEqual([]);
        await page.keyboard.press('Escape');
      }
    }
    await page.emulateMedia({ forcedColors: 'active' });
    await page.waitForTimeout(200);
    expect(await serious(page), 'forced colours').toEqual([]);
    const ink = await page.evaluate(() => document.documentElement.style.getPropertyValue('--ink'));
    expect(ink).toBe('CanvasText');
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 200_000);

test('the colours follow the system at any moment, also while the marks of the flow move', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Gradient/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    await press(page, '2');
    for (let i = 0; i < 12; i += 1) {
      const colorScheme = i % 2 === 0 ? 'dark' : 'light';
      await page.emulateMedia({ colorScheme });
      await page.waitForFunction(
        (wanted) => document.documentElement.style.colorScheme === wanted,
        colorScheme,
        { timeout: 10_000 },
      );
    }
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 200_000);

test('a remedy is made by its button and its finding is gone; a table is edited in place, nonsense is not', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-states-'));
  const file = join(folder, 'narrow.json');
  // a channel far narrower than its process makes: the remedy is to widen it
  const narrow = {
    ...EVERYTHING,
    targets: [],
    limits: [],
    channels: EVERYTHING.channels.map((part) => (part.id === 'lane' ? { ...part, width: 15 } : part)),
  };
  writeFileSync(file, JSON.stringify(narrow));
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  try {
    await answered(page);
    await page.getByRole('tab', { name: /Channels/ }).click();
    await page.getByRole('gridcell', { name: 'lane', exact: true }).click();
    const finding = page.locator('.card .finding').filter({ hasText: /lane .*15(\.0)?\sµm/ });
    await finding.first().waitFor();
    await finding.first().getByRole('button').first().click();
    await answered(page);
    await finding.first().waitFor({ state: 'detached' });
    expect(await page.getByLabel('Width', { exact: true }).inputValue()).not.toBe('15 µm');
    // in the table: nonsense stays in its cell with the reason, a number is taken
    const grid = page.getByRole('grid');
    await grid.focus();
    const head = await page.getByRole('columnheader').allTextContents();
    const column = head.findIndex((text) => text.startsWith('width'));
    await page.keyboard.press('Control+Home');
    for (let i = 0; i < column; i += 1) await page.keyboard.press('ArrowRight');
    await page.keyboard.press('ArrowDown');
    await page.keyboard.press('F2');
    const cell = grid.locator('input');
    await cell.fill('three bananas');
    await cell.press('Enter');
    expect(await cell.inputValue()).toBe('three bananas');
    expect(await cell.getAttribute('aria-invalid')).toBe('true');
    await cell.fill('321 um');
    await cell.press('Enter');
    await cell.waitFor({ state: 'detached' });
    const table = await copied(page, () => page.getByRole('button', { name: 'Copy table' }).click());
    await page.getByText(/^Copied/).waitFor();
    const rows = table.split('\r\n').map((line) => line.split('\t'));
    expect(rows[0]![column]).toMatch(/^width.*µm$/);
    expect(rows.some((row) => row[column] === '321')).toBe(true);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
}, 200_000);
