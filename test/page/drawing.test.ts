import type { Page } from 'playwright-core';
import { expect, test, vi } from 'vitest';
import { answered, description, placeOnPage, sit } from './desk.ts';

/** Drawing, making and finding again on the real page: what the tools' own tests cannot see. */

const SLIDE = { width: 76, height: 26 };
const sheet = (page: Page) => page.locator('.sheet-surface').first();

interface Described {
  readonly channels: readonly { readonly id: string; readonly path: number[][]; readonly width: unknown }[];
  readonly chambers?: readonly { readonly outline: number[][] }[];
}

/** The chip as it is copied. */
async function described(page: Page): Promise<Described> {
  const text = await description(page);
  await page.keyboard.press('Escape');
  return JSON.parse(text) as Described;
}

test('typed figures and the mouse together; makings again and again; an empty hand for another chip', async () => {
  const sitting = await sit();
  const { page } = sitting;
  const card = page.locator('.card');
  const key = (name: string): Promise<void> => page.keyboard.press(name);
  const type = (text: string): Promise<void> => page.keyboard.type(text);
  const click = async (x: number, y: number): Promise<void> => {
    const at = await placeOnPage(page, SLIDE, x, y);
    await page.mouse.move(at.x, at.y);
    await page.mouse.click(at.x, at.y);
  };
  const box = async (tool: string, wide: string, high: string): Promise<void> => {
    await sheet(page).focus();
    await key(tool);
    for (const typed of ['10 mm, 3 mm', '']) {
      if (typed) await type(typed);
      else {
        await type(wide);
        await key('Tab');
        await type(high);
      }
      await key('Enter');
    }
  };
  try {
    await page.getByRole('button', { name: 'Begin', exact: true }).click();
    await page.locator('.frame').waitFor();

    // a length and a width typed, the direction by the mouse; then a taper
    await sheet(page).focus();
    await key('c');
    await click(10, 13);
    await type('4 mm');
    await key('Tab');
    await key('Tab');
    await type('300');
    await click(20, 13);
    await type('5 mm');
    await key('Tab');
    await key('Tab');
    await type('300 to 100');
    await key('ArrowUp');
    await key('Enter');
    await key('Escape');
    // a polygon, closed on its first corner
    for (let i = 0; i < 3; i += 1) await key('h');
    for (const [x, y] of [
      [40, 15],
      [44, 15],
      [42, 18],
      [40, 15],
    ] as const)
      await click(x, y);
    await key('Escape');
    const drawn = await described(page);
    expect(drawn.channels.map(({ path, width }) => [path, width])).toEqual([
      [
        [
          [10_000, 13_000],
          [14_000, 13_000],
        ],
        300,
      ],
      [
        [
          [14_000, 13_000],
          [14_000, 18_000],
        ],
        [300, 100],
      ],
    ]);
    expect(drawn.chambers![0]!.outline).toHaveLength(3);

    // every part is come by with keys
    await key('.');
    await card.getByRole('heading', { name: 'channel 1', exact: true }).waitFor();
    await key(',');
    await card.getByRole('heading', { name: 'chamber 1', exact: true }).waitFor();

    // a serpentine is made longer in its box, a gradient tree gains an inlet: each is still what it is
    await key('Control+a');
    await key('Delete');
    await box('r', '50 mm', '18 mm');
    const wanted = card.getByLabel('Wanted length');
    await wanted.waitFor();
    const longer = `${Math.round(Number.parseFloat(await wanted.inputValue()) * 1.6)} mm`;
    await wanted.fill(longer);
    await key('Enter');
    await vi.waitUntil(async () => (await wanted.inputValue()) === longer, { timeout: 30_000 });
    expect(await card.locator('.fault').count()).toBe(0);
    await sheet(page).focus();
    await key('Control+a');
    await key('Delete');
    await box('g', '50 mm', '18 mm');
    const inlets = card.getByLabel('Inlets');
    await inlets.focus();
    await key('ArrowUp');
    await vi.waitUntil(async () => (await inlets.inputValue()) === '3', { timeout: 30_000 });
    await page.getByRole('button', { name: /^Choose all of gradient 1/ }).click();
    await page.getByText('What is changed here is changed for all.').waitFor();
    expect(await inlets.count()).toBe(1);

    // a tool in the hand is laid down as another chip is opened
    await sheet(page).focus();
    await key('Escape');
    await key('c');
    await key('Control+o');
    await page.getByRole('button', { name: /Attached/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    expect(await sheet(page).getAttribute('data-tool')).toBe('select');
    expect(await page.locator('.pointer-note').count()).toBe(0);
    // its chamber has a time of its own: the ramp goes far beyond that of its channels
    await sheet(page).focus();
    await key('5');
    await page.locator('.legend').getByText('each channel and chamber').waitFor();

    // rows chosen with Shift
    await page.getByRole('tab', { name: /^Channels/ }).click();
    const cells = page.locator('.ledger-body').getByRole('gridcell');
    await cells.first().click();
    await page.keyboard.down('Shift');
    await key('ArrowDown');
    await key('ArrowDown');
    await page.keyboard.up('Shift');
    await card.getByRole('heading', { name: 'Three channels', exact: true }).waitFor();
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 400_000);

test('a near miss and a join are told at the pointer while they arise, before anything is drawn', async () => {
  const sitting = await sit();
  const { page } = sitting;
  const key = (name: string): Promise<void> => page.keyboard.press(name);
  const type = (text: string): Promise<void> => page.keyboard.type(text);
  const note = page.locator('.pointer-note .strong-note');
  try {
    await page.getByRole('button', { name: 'Begin', exact: true }).click();
    await page.locator('.frame').waitFor();
    await sheet(page).focus();
    await key('c');
    for (const text of ['10 mm, 13 mm', '10 mm']) {
      await type(text);
      if (text === '10 mm') {
        await key('Tab');
        await key('Tab');
        await type('300');
        await key('ArrowRight');
      }
      await key('Enter');
    }
    await key('Escape');
    await key('c');
    await type('15 mm, 20 mm');
    await key('Enter');
    // down to half a micrometre above the wall of the first, which lies at 13.15 mm
    await type('6.8495 mm');
    await key('ArrowDown');
    await note.getByText(/channel 1.*500\s+nm thick.*Meant to be joined/).waitFor();
    expect((await described(page)).channels).toHaveLength(1);
    await sheet(page).focus();
    await key('c');
    await type('15 mm, 20 mm');
    await key('Enter');
    const at = await placeOnPage(page, SLIDE, 15, 13);
    await page.mouse.move(at.x, at.y + 30);
    await page.mouse.move(at.x, at.y + 1, { steps: 4 });
    await note.getByText('Joins channel 1.').waitFor();
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 200_000);

test('imposed colours: the word on a strong button is seen', async () => {
  const sitting = await sit({ width: 1280, height: 720 });
  const { page } = sitting;
  try {
    await page.emulateMedia({ forcedColors: 'active' });
    const colours = await page
      .getByRole('button', { name: 'Begin', exact: true })
      .evaluate((button) => [getComputedStyle(button).color, getComputedStyle(button).backgroundColor]);
    expect(colours[0]).not.toBe(colours[1]);
    // the page would else paint a ground of its own behind the word
    expect(
      await page
        .getByRole('button', { name: 'Begin', exact: true })
        .evaluate((button) => getComputedStyle(button).forcedColorAdjust),
    ).toBe('none');
  } finally {
    await sitting.end();
  }
}, 200_000);
