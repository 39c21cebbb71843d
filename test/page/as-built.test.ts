import AxeBuilder from 'axe-core';
import type { Page } from 'playwright-core';
import { expect, test } from 'vitest';
import { answered, sit } from './desk.ts';

/** From a pasted table to drives that are set, by keyboard; what is set is undone by one step. */

/** Nothing at all within the panel; the rest of the page has its own test. */
async function noViolations(page: Page): Promise<void> {
  await page.evaluate(AxeBuilder.source);
  const found = await page.evaluate(async () => {
    const { axe } = window as unknown as { axe: typeof import('axe-core') };
    const { violations } = await axe.run('.card', { resultTypes: ['violations'] });
    return violations.map(
      ({ id, nodes }) => `${id}: ${nodes.map((node) => node.html.slice(0, 160)).join(' | ')}`,
    );
  });
  expect(found).toEqual([]);
}

const TABLE = 'part,what,value,uncertainty\nflow,depth,78.5 um,0.4 um\nlevel 3 arm 1,width,126 um,1 um\n';

test('measurements typed, the made chip beside the drawn one, drives set and taken back, kept as a trial', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way splitter/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    await page
      .getByText(/making adds ±/)
      .first()
      .waitFor();
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('/');
    await page.keyboard.type('as built');
    await page.keyboard.press('Enter');
    const table = page.getByLabel('Table, typed or pasted');
    await table.waitFor();
    // by keyboard alone from here: a slip first
    await table.focus();
    await page.keyboard.insertText('part,what,value\nlevel 9 arm 1,width,150\n');
    await page.keyboard.press('Tab');
    await page.keyboard.press('Enter');
    await page.locator('.card p.fault').waitFor();
    expect(await page.locator('.card p.fault').textContent()).toMatch(
      /^Row 2, column part: The chip has no channel/,
    );
    await noViolations(page);
    await table.focus();
    await page.keyboard.press('Control+a');
    await page.keyboard.insertText(TABLE);
    await page.keyboard.press('Tab');
    await page.keyboard.press('Enter');
    await page.getByRole('region', { name: 'Drawn and made' }).waitFor({ timeout: 120_000 });
    expect(await page.getByText(/As made it misses/).textContent()).toMatch(/out 1 is/);
    expect(await page.getByText(/No setting of these drives/).count()).toBe(1);
    for (const scheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme: scheme });
      await noViolations(page);
    }
    await page.getByRole('button', { name: 'Set these, open ports too' }).focus();
    await page.keyboard.press('Enter');
    await page.getByText('The drives are set; undo takes them back.').waitFor();
    await answered(page);
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('Control+z');
    await answered(page);
    await page
      .getByText(/outlets within/)
      .first()
      .waitFor();
    await page.getByRole('button', { name: 'Keep the made chip as a trial' }).focus();
    await page.keyboard.press('Enter');
    await page.getByText(/Kept as the trial .*as built/).waitFor();
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('b');
    await page
      .getByRole('button', { name: /Eight-way splitter, as built/ })
      .first()
      .click();
    await page.getByRole('heading', { name: /Compared with Eight-way splitter, as built/ }).waitFor();
    expect(sitting.errors).toEqual([]);
    expect(sitting.strangers).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 400_000);
