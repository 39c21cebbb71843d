import type { Page } from 'playwright-core';
import { expect, test } from 'vitest';
import { answered, type Sitting, sit } from './desk.ts';

/**
 * Keys as the page takes them: on the sheet, in fields, in dialogs, held down, with modifiers, of other layouts,
 * and changed by the person.
 */

const sheet = (sitting: Sitting) => sitting.page.locator('.sheet-surface').first();
const tool = (page: Page): Promise<string | null> =>
  page.locator('.sheet-surface').first().getAttribute('data-tool');
const overlay = (page: Page): Promise<string | null> =>
  page.locator('.shows .verb[aria-pressed="true"]').textContent();
/** What undo would take back, as the header says it. */
const undoes = async (page: Page): Promise<string> =>
  (await page.locator('.header-verbs button').first().getAttribute('title')) ?? '';

interface Key {
  readonly key: string;
  readonly code: string;
  readonly shiftKey?: true;
  readonly altKey?: true;
  readonly ctrlKey?: true;
  readonly metaKey?: true;
  readonly repeat?: true;
  readonly isComposing?: true;
}

/** A key as a keyboard of another layout sends it; whether the page took it for its own. */
const send = (page: Page, key: Key): Promise<boolean> =>
  page.evaluate((init) => {
    const event = new KeyboardEvent('keydown', { ...init, bubbles: true, cancelable: true });
    return !document.activeElement!.dispatchEvent(event);
  }, key);

test('keys: on the sheet, in fields, in dialogs, held, of other layouts', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    await sheet(sitting).focus();

    // plain letters are commands on the sheet, and so they are while Caps Lock is on
    await page.keyboard.press('c');
    expect(await tool(page)).toBe('channel');
    expect(await send(page, { key: 'S', code: 'KeyS' })).toBe(true);
    expect(await tool(page)).toBe('select');
    // with Shift it is another key; with Alt it is none
    expect(await send(page, { key: 'C', code: 'KeyC', shiftKey: true })).toBe(false);
    expect(await send(page, { key: 'c', code: 'KeyC', altKey: true })).toBe(false);
    expect(await tool(page)).toBe('select');

    // letters of another script go by where they lie: Cyrillic es on C, Greek pi on P
    expect(await send(page, { key: 'с', code: 'KeyC' })).toBe(true);
    expect(await tool(page)).toBe('channel');
    expect(await send(page, { key: 'π', code: 'KeyP' })).toBe(true);
    expect(await tool(page)).toBe('port');
    await page.keyboard.press('Escape');
    expect(await tool(page)).toBe('select');
    // where another Latin letter lies in that place, the letter counts: m of a French keyboard
    expect(await send(page, { key: 'm', code: 'Semicolon' })).toBe(true);
    expect(await tool(page)).toBe('measure');
    await page.keyboard.press('s');
    // digits that a layout has with Shift alone
    expect(await send(page, { key: 'é', code: 'Digit2' })).toBe(true);
    expect(await overlay(page)).toBe('2 speed');
    expect(await send(page, { key: '4', code: 'Digit4', shiftKey: true })).toBe(true);
    expect(await overlay(page)).toBe('4 wall shear');
    // nothing that a composing input method writes is a command
    expect(await send(page, { key: 'c', code: 'KeyC', isComposing: true })).toBe(false);
    expect(await tool(page)).toBe('select');

    // a key that is held does its command once, unless going on is its sense
    await page.getByRole('gridcell', { name: 'in', exact: true }).click();
    await page.locator('.card').getByRole('heading', { name: 'in', exact: true }).waitFor();
    await sheet(sitting).focus();
    await page.keyboard.press('Control+a');
    expect(await undoes(page)).not.toContain(':');
    await page.keyboard.press('x');
    const once = await undoes(page);
    expect(once).toMatch(/^Undo: mirror /);
    expect(await send(page, { key: 'q', code: 'KeyQ', repeat: true })).toBe(true);
    expect(await undoes(page)).toBe(once);
    await page.keyboard.press('q');
    expect(await undoes(page)).toMatch(/^Undo: turn /);
    expect(await send(page, { key: 'z', code: 'KeyZ', ctrlKey: true, repeat: true })).toBe(true);
    expect(await undoes(page)).toBe(once);
    expect(await send(page, { key: 'z', code: 'KeyZ', metaKey: true })).toBe(true);
    expect(await undoes(page)).not.toContain(':');
    await answered(page);

    // in a field letters, digits, arrows and Delete are the field's, with Ctrl or without
    await page.getByRole('gridcell', { name: 'out 1', exact: true }).click();
    const name = page.locator('.card').getByLabel('Name', { exact: true });
    await name.focus();
    await name.fill('');
    await page.keyboard.type('s1 c/?q');
    expect(await name.inputValue()).toBe('s1 c/?q');
    expect(await tool(page)).toBe('select');
    expect(await page.locator('dialog[open]').count()).toBe(0);
    expect(await send(page, { key: 'ArrowLeft', code: 'ArrowLeft', ctrlKey: true })).toBe(false);
    for (const letter of ['c', 'v', 'x', 'a', 'z', 'y'])
      expect(
        await send(page, { key: letter, code: `Key${letter.toUpperCase()}`, ctrlKey: true }),
        letter,
      ).toBe(false);
    // Escape gives up what was typed, and then leaves the field for the sheet
    await page.keyboard.press('Escape');
    expect(await name.inputValue()).toBe('out 1');
    expect(await name.evaluate((element) => element === document.activeElement)).toBe(true);
    await page.keyboard.press('Escape');
    expect(await sheet(sitting).evaluate((element) => element === document.activeElement)).toBe(true);
    expect(await page.getByRole('gridcell', { name: 'out 1', exact: true }).count()).toBe(1);

    // in a dialog nothing outside of it is done, and the browser does not take what would be a command
    await page.keyboard.press('/');
    const dialog = page.getByRole('dialog', { name: 'Find a command' });
    await dialog.waitFor();
    await page.keyboard.type('c');
    expect(await send(page, { key: 's', code: 'KeyS', ctrlKey: true })).toBe(true);
    expect(await send(page, { key: 'a', code: 'KeyA', ctrlKey: true })).toBe(false);
    expect(await tool(page)).toBe('select');
    expect(await page.getByRole('dialog').count()).toBe(1);
    await page.keyboard.press('Escape');
    await dialog.waitFor({ state: 'detached' });

    // one that the browser closed takes no key, also where the page has not heard of it yet
    await sheet(sitting).focus();
    await page.keyboard.press('Control+s');
    await page.getByLabel('File name').waitFor();
    await page.evaluate(() => {
      document.querySelector('dialog')!.close();
      const slash = { key: '/', code: 'Slash', bubbles: true, cancelable: true };
      document.activeElement!.dispatchEvent(new KeyboardEvent('keydown', slash));
    });
    await dialog.waitFor();
    await page.getByLabel('File name').waitFor({ state: 'detached' });
    await page.keyboard.press('Escape');
    await dialog.waitFor({ state: 'detached' });
    expect(await sheet(sitting).evaluate((element) => element === document.activeElement)).toBe(true);

    // figures typed while drawing are the tool's: digits show no overlay, letters of a unit are no command
    await sheet(sitting).focus();
    await page.keyboard.press('c');
    await page.keyboard.type('10 mm, 5 mm');
    expect(await page.locator('.pointer-note .typing').textContent()).toBe('10 mm, 5 mm');
    expect(await overlay(page)).toBe('4 wall shear');
    expect(await tool(page)).toBe('channel');
    await page.keyboard.press('Escape');
    await page.keyboard.press('Escape');
    await page.keyboard.press('Escape');
    expect(await tool(page)).toBe('select');
    expect(await undoes(page)).not.toContain(':');
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 200_000);

test('a key that a person gives takes effect, takes the old one away, and is there in the next sitting', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await sheet(sitting).focus();
    await page.keyboard.press('?');
    const button = page.getByRole('button', { name: 'Key of Measure: m', exact: true });
    await button.click();
    // Escape leaves it as it was, and the panel open
    await page.keyboard.press('Escape');
    await button.waitFor();
    await button.click();
    // with modifiers alone it waits for the key itself
    await page.keyboard.down('Control');
    await page.keyboard.down('Shift');
    await page.keyboard.press('k');
    await page.keyboard.up('Shift');
    await page.keyboard.up('Control');
    await page.getByRole('button', { name: 'Key of Measure: Ctrl+Shift+k', exact: true }).waitFor();
    // a key of a command that has it already goes over, and that is said
    const other = page.getByRole('button', { name: 'Key of Via: v', exact: true });
    await other.click();
    await page.keyboard.press('c');
    await page.getByText(/C no longer means channel first/).waitFor();
    await page.keyboard.press('Escape');
    await sheet(sitting).focus();
    await page.keyboard.press('Control+Shift+k');
    expect(await tool(page)).toBe('measure');
    await page.keyboard.press('c');
    expect(await tool(page)).toBe('via');
    await page.keyboard.press('s');
    await page.keyboard.press('m');
    expect(await tool(page)).toBe('select');
    // in the tools the underlined letter and the tip follow
    expect(await page.getByRole('button', { name: 'Via', exact: true }).getAttribute('title')).toMatch(/ C$/);
    // kept for the person: the page loaded anew has it
    await page.reload();
    await page.locator('.frame').waitFor();
    await sheet(sitting).focus();
    await page.waitForFunction(() => document.querySelector('.verbs [title$=" C"]')?.textContent === 'Via');
    await page.keyboard.press('c');
    expect(await tool(page)).toBe('via');
    // and all as at first again
    await page.keyboard.press('s');
    await page.keyboard.press('?');
    await page.getByRole('button', { name: 'All keys as at first' }).click();
    await page.keyboard.press('Escape');
    await sheet(sitting).focus();
    await page.keyboard.press('c');
    expect(await tool(page)).toBe('channel');
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 200_000);
