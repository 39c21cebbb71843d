import { expect, test } from 'vitest';
import { answered, sit } from './desk.ts';

test('what is changed in the moment the page is left is kept', async () => {
  const sitting = await sit();
  const { page } = sitting;
  const undoes = (): Promise<string | null> =>
    page.locator('.header-verbs button').first().getAttribute('title');
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('Control+a');
    expect(await undoes()).not.toContain(':');
    const loaded = page.waitForEvent('load');
    await page.evaluate(() => {
      const key = { key: 'x', code: 'KeyX', bubbles: true, cancelable: true };
      document.activeElement!.dispatchEvent(new KeyboardEvent('keydown', key));
      location.reload();
    });
    await loaded;
    await page.locator('.frame').waitFor();
    await expect.poll(undoes).toMatch(/^Undo: mirror /);
    expect(sitting.strangers).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 120_000);
