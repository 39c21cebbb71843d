import { expect, test } from 'vitest';
import { answered, sit } from './desk.ts';

/** A part of the page that cannot be drawn says so in its place; the rest of the page goes on, and nothing is lost. */
test('where the card fails, the sheet, the answers and undo stay', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    // an answer draws the card anew as well: it is to fail for the edit alone
    await answered(page);
    // the card looks for the piece of a channel with most wall shear, and fails until it is told otherwise
    await page.evaluate(() => {
      const sorted = Array.prototype.toSorted;
      Array.prototype.toSorted = function (this: { peakWallShear?: number }[], order) {
        if (this[0]?.peakWallShear !== undefined && 'failing' in document.body.dataset)
          throw new Error('made to fail');
        return sorted.call(this, order);
      };
    });
    const tab = page.getByRole('tab', { name: /Channels/ });
    await tab.click();
    await page.getByRole('gridcell').first().click();
    const width = page.locator('.card').getByLabel('Width', { exact: true });
    const before = await width.inputValue();
    await width.fill('123 µm');
    await page.evaluate(() => {
      document.body.dataset.failing = '';
    });
    await page.keyboard.press('Enter');
    const says = page.locator('.card [role="alert"]', { hasText: 'cannot be shown' });
    await says.waitFor();
    expect(await says.textContent()).toContain('made to fail');
    // the rest is there and does what it does
    expect(await page.getByRole('alert').filter({ hasText: 'cannot be shown' }).count()).toBe(1);
    await page.evaluate(() => {
      delete document.body.dataset.failing;
    });
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('Control+z');
    await width.waitFor();
    expect(await width.inputValue()).toBe(before);
    expect(await page.locator('.card [role="alert"]', { hasText: 'cannot be shown' }).count()).toBe(0);
    // React tells the console of what it caught: nothing else failed
    expect(sitting.errors.filter((text) => !text.includes('made to fail'))).toEqual([]);
  } finally {
    await sitting.end();
  }
});
