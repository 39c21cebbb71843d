import { mkdirSync } from 'node:fs';
import { join, resolve } from 'node:path';
import type { Page } from 'playwright-core';
import { answered, sit } from '../page/desk.ts';
import { BENCHES } from './benches.ts';

/** Pictures of every screen and state, into the ignored folder `screens/`: `npm run screens [part of a name]`. */
const FOLDER = resolve(import.meta.dirname, '../../screens');
const wanted = process.argv.slice(2);
mkdirSync(FOLDER, { recursive: true });

const sheet = (page: Page) => page.locator('.sheet-surface').first();
const demo = async (page: Page, name: RegExp): Promise<void> => {
  await page.getByRole('button', { name }).click();
  await page.locator('.frame').waitFor();
};
const empty = async (page: Page): Promise<void> => {
  await page.getByRole('button', { name: 'Begin', exact: true }).click();
  await page.locator('.frame').waitFor();
};
const press = async (page: Page, key: string): Promise<void> => {
  await sheet(page).focus();
  await page.keyboard.press(key);
};

/** A command, found by its words as a person does. */
const command = async (page: Page, words: string): Promise<void> => {
  await press(page, '/');
  await page.keyboard.type(words);
  await page.keyboard.press('Enter');
};
const solved = async (page: Page, name: RegExp): Promise<void> => {
  await demo(page, name);
  await answered(page);
};
const table = async (page: Page, name: RegExp, row?: string): Promise<void> => {
  await page.getByRole('tab', { name }).click();
  if (row) await page.getByRole('gridcell', { name: row, exact: true }).first().click();
};

/** What is done before the picture is taken, from the start. */
const STATES: Readonly<Record<string, (page: Page) => Promise<void>>> = {
  start: async (page) => {
    await page.getByRole('button', { name: /Eight-way/ }).waitFor();
  },
  empty,
  small: async (page) => {
    await demo(page, /Cell loading/);
    await answered(page);
    await page.locator('.verdict-says').nth(1).click();
  },
  busy: async (page) => {
    await demo(page, /Gradient tree/);
    await page
      .locator('.verdicts[aria-busy="true"]')
      .waitFor({ timeout: 5000 })
      .catch(() => undefined);
  },
  dense: async (page) => {
    await page.getByLabel('Size').selectOption('plate');
    await empty(page);
    await press(page, 't');
    const box = (await page.locator('.sheet').boundingBox())!;
    await page.mouse.click(box.x + box.width * 0.31, box.y + box.height * 0.13);
    await page.mouse.click(box.x + box.width * 0.67, box.y + box.height * 0.78);
    await page.getByLabel('Holes').fill('350 um');
    await page.getByLabel('Holes').press('Enter');
    await page.getByLabel('Outlets').selectOption('7');
    await answered(page);
  },
  error: async (page) => {
    await demo(page, /Eight-way/);
    await page.getByRole('tab', { name: /Ports/ }).click();
    await page.getByText('in', { exact: true }).last().click();
    await page.getByLabel('Flow into the chip').fill('3 bananas');
    await page.getByLabel('Flow into the chip').press('Enter');
  },
  drawing: async (page) => {
    await demo(page, /Eight-way/);
    await press(page, 'c');
    const box = (await page.locator('.sheet').boundingBox())!;
    await page.mouse.click(box.x + 300, box.y + 120);
    await page.mouse.move(box.x + 420, box.y + 180);
    await page.keyboard.type('4 mm');
  },
  finder: async (page) => {
    await demo(page, /Eight-way/);
    await press(page, '/');
    await page.keyboard.type('ali');
  },
  chip: async (page) => {
    await demo(page, /Cell loading/);
    await press(page, 'i');
  },
  'as-built': async (page) => {
    await demo(page, /Eight-way/);
    await answered(page);
    await press(page, '/');
    await page.keyboard.type('as built');
    await page.keyboard.press('Enter');
    await page
      .getByLabel('Table, typed or pasted')
      .fill('part,what,value (um),uncertainty\nflow,depth,78.5,0.4\nlevel 3 arm 1,width,126,1\n');
    await page.getByRole('button', { name: 'Compare with the drawing' }).click();
    await page.getByRole('region', { name: 'Drawn and made' }).waitFor({ timeout: 120_000 });
  },
  'hand over': async (page) => {
    await demo(page, /Eight-way/);
    await answered(page);
    await press(page, 'e');
    await page.getByRole('button', { name: 'Write the note' }).waitFor();
  },
  junction: async (page) => {
    await solved(page, /Cell loading/);
    await page.locator('.verdict-says').nth(1).click();
    await press(page, 'n');
    await press(page, '9');
    await page.waitForTimeout(1500);
  },
  'channel card': async (page) => {
    await solved(page, /Cell loading/);
    await table(page, /Channels/, 'neck');
  },
  'port card': async (page) => {
    await solved(page, /Circulating/);
    await table(page, /Ports/);
    await page.getByRole('row').nth(1).getByRole('gridcell').first().click();
  },
  maker: async (page) => {
    await empty(page);
    await press(page, 'r');
    const box = (await page.locator('.sheet').boundingBox())!;
    await page.mouse.click(box.x + 300, box.y + 100);
    await page.mouse.click(box.x + 600, box.y + 220);
    await answered(page);
  },
  'four-way': async (page) => {
    await empty(page);
    await press(page, 't');
    await page.keyboard.type('12 mm, 4 mm');
    await page.keyboard.press('Enter');
    await page.keyboard.type('50 mm, 22 mm');
    await page.keyboard.press('Enter');
    await answered(page);
    await press(page, 'Escape');
  },
  several: async (page) => {
    await solved(page, /Eight-way/);
    await press(page, 'Control+a');
  },
  'table of channels': async (page) => {
    await solved(page, /Eight-way/);
    await table(page, /Channels/);
  },
  'table of routes': async (page) => {
    await solved(page, /Circulating/);
    await table(page, /Routes/);
  },
  'table of junctions': async (page) => {
    await solved(page, /Gradient/);
    await table(page, /Junctions/);
    await press(page, '2');
  },
  'table of findings': async (page) => {
    await solved(page, /Cell loading/);
    await table(page, /Findings/);
    await press(page, '8');
  },
  'attached shear': async (page) => {
    await solved(page, /Attached/);
    await press(page, '4');
    await page.mouse.move(500, 400);
  },
  reservoir: async (page) => {
    await solved(page, /crossing/);
    await table(page, /Ports/, 'sample');
    await page.getByRole('button', { name: 'Give it a vessel' }).click();
    await answered(page);
  },
  'attached cells': async (page) => {
    await solved(page, /Attached/);
    await press(page, '5');
  },
  gravity: async (page) => {
    await solved(page, /Gravity|gravity|crossing/);
    await press(page, '7');
  },
  history: async (page) => {
    await solved(page, /Eight-way/);
    await press(page, 'Control+a');
    for (let i = 0; i < 6; i += 1) await page.keyboard.press('ArrowRight');
    await page.keyboard.press('Control+z');
    await command(page, 'what was done');
    await page.locator('.history').waitFor();
  },
  about: async (page) => {
    await solved(page, /Eight-way/);
    await command(page, 'about');
    await page.getByText('Stands on').waitFor();
  },
  keys: async (page) => {
    await solved(page, /Eight-way/);
    await press(page, '?');
  },
  trials: async (page) => {
    await solved(page, /Eight-way/);
    await press(page, 'b');
    await page.getByRole('button', { name: 'Keep as it stands' }).click();
    await page
      .getByRole('button', { name: /trial 1/ })
      .first()
      .click();
    await page.getByRole('heading', { name: /Compared with/ }).waitFor();
  },
  files: async (page) => {
    await solved(page, /Eight-way/);
    await press(page, 'Control+s');
    await page.getByLabel('File name').waitFor();
  },
  repeat: async (page) => {
    await solved(page, /Eight-way/);
    await press(page, 'Control+a');
    await press(page, 'a');
  },
  'bring in': async (page) => {
    await solved(page, /Eight-way/);
    await command(page, 'bring in');
  },
  unsolvable: async (page) => {
    await solved(page, /Cell loading/);
    await table(page, /Ports/, 'waste');
    await page.getByLabel('Driven by').selectOption('closed');
    await answered(page);
    await press(page, 'Escape');
  },
  plots: async (page) => {
    await demo(page, /Cell loading/);
    await answered(page);
    await press(page, 'u');
    await page.locator('.main-svg').first().waitFor({ timeout: 60_000 });
  },
  ...BENCHES,
};

const LOOKS = [
  { name: 'light-1440', width: 1440, height: 900, scheme: 'light' },
  { name: 'dark-1440', width: 1440, height: 900, scheme: 'dark' },
  { name: 'light-1280', width: 1280, height: 720, scheme: 'light' },
  { name: 'dark-1280', width: 1280, height: 720, scheme: 'dark' },
  /** As at 200 % zoom on 1280 by 720. */
  { name: 'light-zoomed', width: 640, height: 360, scheme: 'light' },
  { name: 'forced', width: 1280, height: 720, scheme: 'dark' },
  /** All of a long card. */
  { name: 'light-tall', width: 1280, height: 2000, scheme: 'light' },
] as const;

for (const [state, go] of Object.entries(STATES)) {
  if (wanted.length > 0 && !wanted.some((part) => state.includes(part))) continue;
  let sitting: Awaited<ReturnType<typeof sit>> | null = null;
  try {
    sitting = await sit();
    await go(sitting.page);
    for (const look of LOOKS) {
      await sitting.page.setViewportSize(look);
      await sitting.page.emulateMedia({
        colorScheme: look.scheme,
        forcedColors: look.name === 'forced' ? 'active' : 'none',
      });
      // the page has taken the colours when it says so
      await sitting.page.waitForFunction(
        (wanted) => document.documentElement.style.colorScheme === wanted,
        look.scheme,
      );
      await sitting.page.waitForTimeout(400);
      await sitting.page.screenshot({
        path: join(FOLDER, `${state.replaceAll(' ', '-')}-${look.name}.png`),
        fullPage: look.name === 'light-zoomed',
      });
    }
    console.log(`${state}: ${LOOKS.length} pictures`);
  } catch (error) {
    console.error(`${state}: ${error instanceof Error ? error.message : error}`);
    process.exitCode = 1;
  } finally {
    await sitting?.end();
  }
}
