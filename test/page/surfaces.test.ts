import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { expect, test } from 'vitest';
import { createCommands } from '../../renderer/commands/commands.ts';
import type { Desk } from '../../renderer/state/desk.ts';
import type { Workbench } from '../../renderer/state/workbench.ts';
import { serious } from './axe.ts';
import { answered, sit } from './desk.ts';
import { EVERYTHING } from './everything.ts';

/**
 * Every surface that a command opens, found by walking all commands: nothing serious for assistive technology in
 * light, dark and imposed colours, nothing that moves where motion is not wanted, nothing cut off when enlarged
 * twice, and the focus where it was when the surface is left.
 */

/** Every command there is. They are only named here, none is run outside of the page. */
const COMMANDS = createCommands({} as Desk, {} as Workbench, () => ({})).all;
/** It closes the chip: what it leads to is the start, which has its own checks. The finder is how all are run. */
const LEAVES = new Set(['file', 'find']);
/** They choose colours in place of those that this test asks for. */
const COLOURS = new Set(['scheme system', 'scheme light', 'scheme dark']);

/** The dialog or panel that is open, as its selector and name. */
const surface = (page: Page): Promise<{ readonly at: string; readonly name: string }> =>
  page.evaluate(() => {
    const dialog = document.querySelector('dialog[open]');
    if (dialog) return { at: 'dialog[open]', name: dialog.getAttribute('aria-label') ?? '' };
    return { at: '.card', name: document.querySelector('.card')?.getAttribute('aria-label') ?? '' };
  });

/** What is focused, told so that it can be found again. */
const focused = (page: Page): Promise<string> =>
  page.evaluate(() => `${document.activeElement?.tagName} ${document.activeElement?.className}`);

async function check(page: Page, at: string, name: string): Promise<void> {
  for (const colorScheme of ['light', 'dark'] as const) {
    await page.emulateMedia({ colorScheme, reducedMotion: 'reduce', forcedColors: 'none' });
    expect(await serious(page, at), `${name}, ${colorScheme}`).toEqual([]);
  }
  const moving = await page.evaluate(
    () => document.getAnimations().filter((animation) => animation.playState === 'running').length,
  );
  expect(moving, `${name}: moves`).toBe(0);
  await page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce', forcedColors: 'active' });
  expect(await serious(page, at), `${name}, imposed colours`).toEqual([]);
  await page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce', forcedColors: 'none' });
  // twice as large is half as wide and half as high
  await page.setViewportSize({ width: 640, height: 360 });
  // the page has taken its new size when it is no wider; what stays wider is told below
  await page
    .waitForFunction(() => document.documentElement.scrollWidth <= 640, undefined, { timeout: 10_000 })
    .catch(() => undefined);
  const cut = await page.evaluate((part) => {
    const out: string[] = [];
    const root = document.documentElement;
    if (root.scrollWidth > 640) {
      const wide = [...document.querySelectorAll('#page *')].filter(
        (element) => element.getBoundingClientRect().right > 641,
      );
      out.push(`the page is ${root.scrollWidth} wide by ${wide.map((one) => one.outerHTML.slice(0, 60))}`);
    }
    const surface = document.querySelector(part)!;
    for (const element of surface.querySelectorAll(
      'h2, h3, p, label, input, select, textarea, button, dt, dd',
    )) {
      const box = element.getBoundingClientRect();
      const aside = element.closest('.aside, .unseen, details:not([open]) > :not(summary)');
      if (box.width > 1 && !aside && (box.left < -1 || box.right > 641))
        out.push(`${element.tagName} ${element.textContent?.slice(0, 40)} to ${Math.round(box.right)}`);
    }
    // a dialog that is higher than the screen is scrolled within
    const box = surface.getBoundingClientRect();
    if (part.startsWith('dialog') && (box.top < 0 || box.bottom > 361))
      out.push(`from ${box.top} to ${box.bottom}`);
    return out;
  }, at);
  expect(cut, `${name}, enlarged`).toEqual([]);
  await page.setViewportSize({ width: 1280, height: 720 });
}

test('every surface that a command opens: colours, motion, enlarged, and the way back', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-surfaces-'));
  const file = join(folder, 'everything.json');
  writeFileSync(file, JSON.stringify(EVERYTHING));
  const sitting = await sit({ width: 1280, height: 720, files: [file] });
  const { page } = sitting;
  const sheet = page.locator('.sheet-surface').first();
  try {
    await answered(page);
    const seen = new Set<string>();
    const walked: string[] = [];
    for (const command of COMMANDS) {
      if (LEAVES.has(command.id) || COLOURS.has(command.id)) continue;
      // from the sheet, something being chosen, so that commands that need it can be done
      await sheet.focus();
      if (command.group === 'Change' || command.id === 'repeat') await page.keyboard.press('Control+a');
      const from = await focused(page);
      await page.keyboard.press('/');
      const dialog = page.getByRole('dialog', { name: 'Find a command' });
      await dialog.waitFor().catch(() => {
        throw new Error(`no finder for ${command.id}, after ${walked.at(-1)}`);
      });
      if (!seen.has('Find a command')) {
        seen.add('Find a command');
        await check(page, 'dialog[open]', 'Find a command');
      }
      await dialog.getByRole('combobox').fill(command.title);
      const option = dialog
        .getByRole('option')
        .filter({ has: page.getByText(new RegExp(`^${escaped(command.title)}(: .*)?$`)) })
        .first();
      await option.click();
      await dialog.waitFor({ state: 'detached' });
      walked.push(command.id);
      const undone = command.group === 'Change' && command.id !== 'undo' && command.id !== 'redo';
      // the command runs once the focus is back
      await page.evaluate(() => new Promise((done) => setTimeout(() => requestAnimationFrame(done))));
      if (command.id === 'save as' || command.id === 'save description')
        await page.getByLabel('File name').waitFor();
      if (command.id === 'plots') await page.locator('.main-svg').first().waitFor();
      const open = await surface(page);
      if (open.at === '.card' && open.name === 'What is chosen') {
        // the next command finds the chip as this one did
        if (command.id === 'lock') await page.keyboard.press('l');
        else if (undone) await page.keyboard.press('Control+z');
        continue;
      }
      if (!seen.has(open.name)) {
        seen.add(open.name);
        await check(page, open.at, open.name);
      }
      if (open.name !== 'Find a command') {
        const inside = await page.evaluate(
          (part) => document.querySelector(part)!.contains(document.activeElement),
          open.at,
        );
        expect(inside, `${open.name} takes the focus`).toBe(true);
      }
      await page.keyboard.press('Escape');
      await page.waitForFunction(
        () =>
          !document.querySelector('dialog[open]') &&
          document.querySelector('.card')?.getAttribute('aria-label') === 'What is chosen',
      );
      expect(await focused(page), `the focus after ${open.name}`).toBe(from);
    }
    expect(walked.length).toBe(COMMANDS.length - LEAVES.size - COLOURS.size);
    // as many surfaces as there are panels and dialogs: one that is new is found by its command
    expect([...seen].sort()).toEqual([
      'About',
      'As built',
      'Bring in a drawing',
      'Chip and fluid',
      'Find a command',
      'Hand over',
      'Keys and units',
      'Plots',
      'Trials',
      'Turn, array and offset',
      'What was done',
      'Where the chip description goes',
      'Where the project is kept',
    ]);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
}, 600_000);

const escaped = (text: string): string => text.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');

test('the card of every kind of part, and every table: the same', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-cards-'));
  const file = join(folder, 'everything.json');
  writeFileSync(file, JSON.stringify(EVERYTHING));
  const sitting = await sit({ width: 1280, height: 720, files: [file] });
  const { page } = sitting;
  try {
    await answered(page);
    for (const tab of ['Ports', 'Channels', 'Routes', 'Junctions', 'Findings']) {
      await page.getByRole('tab', { name: new RegExp(`^${tab}`) }).click();
      await page.locator('.ledger-body').getByRole('gridcell').first().click();
      await page.evaluate(() => new Promise((done) => requestAnimationFrame(done)));
      await check(page, '.card', `card from ${tab}`);
      await check(page, '.ledger', `table of ${tab}`);
      await page.keyboard.press('Escape');
    }
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('Control+a');
    await page.getByText('What is changed here is changed for all.').waitFor();
    await check(page, '.card', 'several');
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true, force: true });
  }
}, 400_000);
