import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { readDescription } from '../../solver/chip/description.ts';
import { answered, description, placeOnPage, sit } from './desk.ts';

/**
 * Keep-outs by mouse and by keyboard: drawn, found in the way, moved out of it, taken away and brought back;
 * and the band beside shares and wall shear where a person reads them.
 */

const OUTLINE = { width: 40_000, height: 26_000 };
const CHIP = {
  format: 'channelwright-chip',
  version: 1,
  name: 'clamped',
  outline: OUTLINE,
  layers: [{ id: 'flow', depth: 100, fillet: 20 }],
  channels: [
    {
      id: 'feed',
      layer: 'flow',
      path: [
        [5000, 13000],
        [20000, 13000],
      ],
      width: 400,
    },
    {
      id: 'up',
      layer: 'flow',
      path: [
        [20000, 13000],
        [20000, 22000],
      ],
      width: 300,
    },
    {
      id: 'down',
      layer: 'flow',
      path: [
        [20000, 13000],
        [20000, 4000],
      ],
      width: 350,
    },
  ],
  ports: [
    { id: 'in', at: [5000, 13000], layer: 'flow', drive: { flow: '5 uL/min' } },
    { id: 'top', at: [20000, 22000], layer: 'flow', drive: { pressure: 0 } },
    { id: 'bottom', at: [20000, 4000], layer: 'flow', drive: { pressure: 0 } },
  ],
  fluid: { name: 'water', temperature: '25 degC' },
  targets: [{ port: 'top', share: 0.3, within: '80 %' }],
};

test('keep-outs drawn, found, moved, taken away and brought back; bands beside figures', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-keep-outs-'));
  const file = join(folder, 'clamped.json');
  writeFileSync(file, JSON.stringify(CHIP));
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  const at = (x: number, y: number) =>
    placeOnPage(page, { width: OUTLINE.width / 1e3, height: OUTLINE.height / 1e3 }, x, y);
  const sheet = page.locator('.sheet-surface').first();
  const verdicts = page.locator('.verdicts');
  const card = page.locator('.card');
  /** The chip as the page has it. */
  const chip = async () => readDescription(await description(page));
  try {
    await answered(page);
    await expect.poll(() => verdicts.textContent()).toMatch(/±\s[\d.]+\s%/);
    await page.mouse.click((await at(20, 18)).x, (await at(20, 18)).y);
    await card.getByRole('heading', { name: 'up' }).waitFor();
    await expect.poll(() => card.textContent()).toMatch(/Peak wall shear.*±\s[\d.]+\s%/);

    // by mouse: the key, two corners, over the feed
    await sheet.focus();
    await page.keyboard.press('d');
    const [a, b] = [await at(9, 11), await at(13, 15)];
    await page.mouse.click(a.x, a.y);
    await page.mouse.move(b.x, b.y, { steps: 4 });
    await page.mouse.click(b.x, b.y);
    await card.getByRole('heading', { name: 'keep-out 1' }).waitFor();
    await expect.poll(() => card.textContent()).toContain('feed lies in keep-out 1.');
    await expect.poll(() => verdicts.textContent()).toMatch(/keep-out/);
    const drawn = await chip();
    expect(drawn.keepOuts).toHaveLength(1);
    expect(drawn.keepOuts![0]!.clearance).toBe(0);

    // chosen by a click inside, kept off by a number on its card
    await page.keyboard.press('Escape');
    await page.keyboard.press('s');
    const inside = await at(11, 14.4);
    await page.mouse.click(inside.x, inside.y);
    await card.getByRole('heading', { name: 'keep-out 1' }).waitFor();
    await card.getByLabel('Stay off by').fill('250 um');
    await card.getByLabel('Stay off by').press('Enter');
    await card.getByLabel('For', { exact: true }).fill('bolt head');
    await card.getByLabel('For', { exact: true }).press('Enter');
    await expect
      .poll(async () => (await chip()).keepOuts?.[0])
      .toMatchObject({ clearance: 250_000, note: 'bolt head' });

    // taken away and brought back by keys alone
    await page.keyboard.press('Escape');
    await page.mouse.click(inside.x, inside.y);
    await card.getByRole('heading', { name: 'keep-out 1' }).waitFor();
    await sheet.focus();
    await page.keyboard.press('Delete');
    await expect.poll(async () => (await chip()).keepOuts).toBeUndefined();
    await page.keyboard.press('Control+z');
    await expect.poll(async () => (await chip()).keepOuts?.length).toBe(1);

    // by keyboard alone: places typed, the size too
    await page.keyboard.press('Escape');
    await page.keyboard.press('d');
    await page.keyboard.type('28 mm, 5 mm');
    await page.keyboard.press('Enter');
    await page.keyboard.type('4 mm');
    await page.keyboard.press('Tab');
    await page.keyboard.type('3 mm');
    await page.keyboard.press('Enter');
    await expect
      .poll(async () => (await chip()).keepOuts?.[1]?.outline)
      .toEqual([
        [28_000_000, 5_000_000],
        [32_000_000, 5_000_000],
        [32_000_000, 8_000_000],
        [28_000_000, 8_000_000],
      ]);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
});
