import { execFile } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { promisify } from 'node:util';
import AxeBuilder from 'axe-core';
import type { Page } from 'playwright-core';
import { expect, test } from 'vitest';
import { answered, sit } from '../page/desk.ts';
import { demoPath } from './note-chips.ts';

/** Hand over in the page: by keyboard alone, in a real browser, against what the command line writes. */

const ROOT = resolve(import.meta.dirname, '../..');
const run = promisify(execFile);

async function noSerious(page: Page): Promise<void> {
  await page.evaluate(AxeBuilder.source);
  const found = await page.evaluate(async () => {
    const { axe } = window as unknown as { axe: typeof import('axe-core') };
    const { violations } = await axe.run(document, { resultTypes: ['violations'] });
    return violations
      .filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html.slice(0, 120)).join(' | ')}`);
  });
  expect(found).toEqual([]);
}

/** Goes on with Tab until a control of that name has the focus. */
async function tabTo(page: Page, name: RegExp): Promise<void> {
  for (let i = 0; i < 60; i += 1) {
    const at = await page.evaluate(() => {
      const it = document.activeElement as HTMLElement | null;
      const label = it && 'labels' in it ? (it as HTMLInputElement).labels?.[0]?.textContent : '';
      return `${label ?? ''} ${it?.textContent ?? ''}`;
    });
    if (name.test(at)) return;
    await page.keyboard.press('Tab');
  }
  throw new Error(`Tab does not come to ${name}`);
}

const cells = (text: string, between: string): string[][] =>
  text
    .trim()
    .split(/\r?\n/)
    .map((line) => line.split(between));

test('the note, the flow split and a mask by keyboard; light and dark; the numbers of the command line', async () => {
  const sitting = await sit();
  const { page, host } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('e');
    await page.getByRole('heading', { name: 'Hand over' }).waitFor();
    await noSerious(page);
    await page.emulateMedia({ colorScheme: 'dark' });
    await noSerious(page);

    await tabTo(page, /^ Copy$/);
    await page.keyboard.press('Enter');
    await page.getByText(/Copied 8 rows/).waitFor();
    const copied = cells(await page.evaluate(() => navigator.clipboard.readText()), '\t');
    const { stdout } = await run(
      process.execPath,
      [join(ROOT, 'main/cli/note.ts'), demoPath('eight-way-splitter.json'), '--split', '-'],
      { cwd: ROOT },
    );
    const wanted = cells(stdout, ',');
    expect(copied[0]).toEqual(wanted[0]);
    expect(copied).toHaveLength(wanted.length);
    for (const [i, row] of copied.slice(1).entries())
      for (const [c, cell] of row.entries()) {
        const other = wanted[i + 1]![c]!;
        const [a, b] = [Number(cell), Number(other)];
        // bands are sums of what each solve knew of itself: alike, not equal
        if (cell !== '' && Number.isFinite(a)) expect(a).toBeCloseTo(b, wanted[0]![c]!.includes('±') ? 3 : 8);
        else expect(cell).toBe(other === 'yes' ? 'met' : other);
      }

    for (const [verb, done, made] of [
      [/^ PDF$/, /Written to .*flow split\.pdf/, 'Eight-way splitter flow split.pdf'],
      [/^ Make the masks$/, /Written to .*mask\.dxf/, 'Eight-way splitter mask.dxf'],
    ] as const) {
      await tabTo(page, verb);
      await page.keyboard.press('Enter');
      await page.getByRole('dialog').getByText(host.data).waitFor();
      await page.keyboard.press('Enter');
      await page.getByText(done).waitFor();
      expect(readdirSync(host.data)).toContain(made);
    }

    // back up to the note: another paper, and out with it
    await page.getByRole('heading', { name: 'Hand over' }).focus();
    await tabTo(page, /^Paper/);
    await page.keyboard.press('u');
    await tabTo(page, /^ Write the note$/);
    await page.keyboard.press('Enter');
    await page.getByRole('dialog').getByText(host.data).waitFor();
    await page.keyboard.press('Enter');
    await page.getByText(/Written to .*splitter note\.pdf/).waitFor();
    const pdf = readFileSync(join(host.data, 'Eight-way splitter note.pdf'), 'latin1');
    expect(pdf).toContain('/MediaBox [0 0 612 792]');
    expect(sitting.errors).toEqual([]);
    expect(sitting.strangers).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 240_000);
