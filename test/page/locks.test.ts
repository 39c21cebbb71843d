import { join } from 'node:path';
import { expect, test } from 'vitest';
import { answered, description, placeOnPage, sit } from './desk.ts';

/** What is locked stays where it is, whatever is tried, and is locked when the project is opened again. */

const OUTLINE = { width: 76, height: 26 };

test('a locked channel is not moved by hand, keys, fields or what it is joined to, and stays locked', async () => {
  const sitting = await sit();
  const { page, host } = sitting;
  const sheet = page.locator('.sheet-surface').first();
  try {
    await page.getByRole('button', { name: /Cell loading/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    await page.getByRole('tab', { name: /Channels/ }).click();
    await page.getByRole('gridcell', { name: 'feed', exact: true }).click();
    await sheet.focus();
    await page.keyboard.press('l');
    const held = page.locator('.card .held');
    await held.waitFor();
    const before = await description(page);
    const again = async (): Promise<void> => {
      await page.getByRole('gridcell', { name: 'feed', exact: true }).click();
      await held.waitFor();
      await sheet.focus();
    };
    await again();
    for (const key of ['ArrowRight', 'Delete', 'x', 'q', 'k', 'Control+x']) await page.keyboard.press(key);
    // by hand: along its own body
    const at = await placeOnPage(page, OUTLINE, 12, 13);
    await page.mouse.move(at.x, at.y);
    await page.mouse.down();
    for (let i = 1; i <= 6; i += 1) await page.mouse.move(at.x, at.y - 8 * i);
    await page.mouse.up();
    // by the port at its end, which would draw it along
    const port = await placeOnPage(page, OUTLINE, 5, 13);
    await page.mouse.move(port.x, port.y);
    await page.mouse.down();
    for (let i = 1; i <= 6; i += 1) await page.mouse.move(port.x, port.y - 8 * i);
    await page.mouse.up();
    await page.getByText(/feed is locked, and this would move it/).waitFor();
    // by a field
    await again();
    await page.locator('.card').getByLabel('Length').fill('20 mm');
    await page.locator('.card').getByLabel('Length').press('Enter');
    await page
      .locator('.card .fault')
      .getByText(/feed is locked/)
      .waitFor();
    await page.locator('.card').getByLabel('Length').press('Escape');
    expect(await description(page)).toBe(before);
    // its width is no place
    await again();
    await page.locator('.card').getByLabel('Width', { exact: true }).fill('210 um');
    await page.locator('.card').getByLabel('Width', { exact: true }).press('Enter');
    await page.locator('.card .fault').waitFor({ state: 'detached' });
    // another name keeps it
    await page.locator('.card').getByLabel('Name', { exact: true }).fill('supply');
    await page.locator('.card').getByLabel('Name', { exact: true }).press('Enter');
    await page.locator('.card').getByRole('heading', { name: 'supply' }).waitFor();
    await held.waitFor();
    // into a file of its own, closed, opened again
    await sheet.focus();
    await page.keyboard.press('Control+s');
    await page.getByLabel('File name').fill('held.chw');
    await page.getByLabel('File name').press('Enter');
    await page.getByText(/^Kept in held\.chw/).waitFor();
    await page.keyboard.press('Control+o');
    await page.getByRole('heading', { name: 'Begin a chip' }).waitFor();
  } finally {
    expect(sitting.errors).toEqual([]);
  }
  // another sitting: another host, another browser, the same file
  const file = join(host.data, 'held.chw');
  const next = await sit({ files: [file] });
  try {
    await answered(next.page);
    await next.page.getByRole('tab', { name: /Channels/ }).click();
    await next.page.getByRole('gridcell', { name: 'supply', exact: true }).click();
    await next.page.locator('.card .held').waitFor();
    // unlocked on the card, it can go
    await next.page.locator('.card .held').getByRole('button', { name: 'Unlock' }).click();
    await next.page.locator('.card .held').waitFor({ state: 'detached' });
    await next.page.locator('.sheet-surface').first().focus();
    await next.page.keyboard.press('Delete');
    await next.page.getByRole('gridcell', { name: 'supply', exact: true }).waitFor({ state: 'detached' });
    expect(next.errors).toEqual([]);
  } finally {
    await next.end();
    await sitting.end();
  }
}, 300_000);
