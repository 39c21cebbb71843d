import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { expect, test } from 'vitest';
import { placeOnPage, sit } from './desk.ts';
import { EVERYTHING } from './everything.ts';

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
async function fillAll(page: Page): Promise<{ readonly fields: string[]; readonly wrong: string[] }> {
  await page.locator('.card details').evaluateAll((all) => {
    for (const element of all) element.setAttribute('open', '');
  });
  const inputs = page.locator('.card .field input:not([readonly]), .card .field textarea');
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
    const text = label === 'Name' ? '' : NONSENSE[i % NONSENSE.length]!;
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
      channel: 8,
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
}, 200_000);
