import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test, vi } from 'vitest';
import { answered, sit } from './desk.ts';
import { snakeChip } from './snake.ts';

const COUNT = 100_000;

test('a table of 100,000 rows is sorted, filtered, walked to its end and edited; only rows in view are in the page', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-large-'));
  const file = join(folder, 'snake.json');
  writeFileSync(file, snakeChip(COUNT));
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  const grid = page.getByRole('grid', { name: 'Table of channels' });
  const rows = grid.getByRole('row');
  const cell = (name: string) => grid.getByRole('gridcell', { name, exact: true });
  try {
    await answered(page);
    await page.getByRole('tab', { name: /^Channels/ }).click();
    await cell('c0').click();
    expect(await grid.getAttribute('aria-rowcount')).toBe(String(COUNT + 1));
    expect(await rows.count()).toBeLessThan(80);
    // to the end by keys, and what stands there is told with its place in the whole
    await page.keyboard.press('Control+End');
    await cell(`c${COUNT - 1}`).waitFor();
    expect(await rows.last().getAttribute('aria-rowindex')).toBe(String(COUNT + 1));
    expect(await rows.count()).toBeLessThan(80);
    // edited in place there
    const head = grid.getByRole('columnheader', { name: /^width/ });
    const column = await head.getAttribute('aria-colindex');
    await rows.last().locator(`[aria-colindex="${column}"]`).click();
    await page.keyboard.type('150');
    await page.keyboard.press('Enter');
    await answered(page);
    // found again by a figure, and by what is largest
    await page.getByRole('searchbox').fill('width > 120');
    await vi.waitUntil(async () => (await grid.getAttribute('aria-rowcount')) === '2', { timeout: 60_000 });
    await cell(`c${COUNT - 1}`).waitFor();
    await page.getByRole('searchbox').fill('');
    await vi.waitUntil(async () => (await grid.getAttribute('aria-rowcount')) === String(COUNT + 1), {
      timeout: 60_000,
    });
    await head.click();
    await vi.waitUntil(async () => /^c99999/.test((await rows.nth(1).textContent()) ?? ''), {
      timeout: 60_000,
    });
    expect(await rows.count()).toBeLessThan(80);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
}, 600_000);
