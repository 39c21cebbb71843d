import { execFile } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { promisify } from 'node:util';
import AxeBuilder from 'axe-core';
import type { Page } from 'playwright-core';
import { expect, test } from 'vitest';
import type { Result } from '../../solver/chip/result.ts';
import { answered, copied, description, type Sitting, sit } from './desk.ts';

/**
 * The job from end to end in a real browser: from an empty chip to a four-way splitter with its targets met
 * and its table taken out, by mouse and by keyboard alone; what the page answers is what the command line
 * answers for the same chip, to the digit.
 */

const ROOT = resolve(import.meta.dirname, '../..');
const run = promisify(execFile);

/** The command line's result for the chip that the page holds, by way of its description. */
async function commandLine(folder: string, description: string): Promise<Result> {
  const file = join(folder, 'as-drawn.json');
  const out = join(folder, 'result.json');
  writeFileSync(file, description);
  await run(process.execPath, [join(ROOT, 'main/cli/solve.ts'), file, '--json', out], { cwd: ROOT });
  return JSON.parse(readFileSync(out, 'utf8')) as Result;
}

/** Rows of a copied table: by the first cell, the others by their heads. */
function rowsOf(tsv: string): Map<string, Map<string, string>> {
  const [head, ...lines] = tsv.split('\r\n').map((line) => line.split('\t'));
  return new Map(
    lines.map((cells) => [cells[0]!, new Map(head!.map((name, i) => [name.split(',')[0]!, cells[i]!]))]),
  );
}

/** The table as copied against the result: twelve digits, which is all that the table carries. */
async function sameAsCommandLine({ page, host }: Sitting, table: string): Promise<void> {
  const result = await commandLine(host.data, await description(page));
  const rows = rowsOf(table);
  expect(result.ports).toHaveLength(5);
  for (const port of result.ports) {
    const row = rows.get(port.id)!;
    const digits = (value: number): string => String(Number(value.toPrecision(12)));
    expect(row.get('flow in')).toBe(digits((port.flow! * 60) / 1e-9));
    expect(row.get('share')).toBe(digits(port.share! * 100));
  }
  expect(result.targets).toHaveLength(4);
  expect(result.targets.every((target) => target.met)).toBe(true);
}

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

test('by mouse: a splitting tree, targets met, table copied', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByLabel('Name').fill('Four-way');
    await page.getByRole('button', { name: 'Begin', exact: true }).click();
    await page.getByRole('button', { name: 'Split tree' }).first().click();
    const box = (await page.locator('.sheet').boundingBox())!;
    await page.mouse.click(box.x + box.width * 0.2, box.y + box.height * 0.25);
    await page.mouse.move(box.x + box.width * 0.7, box.y + box.height * 0.7);
    await page.mouse.click(box.x + box.width * 0.75, box.y + box.height * 0.75);
    await answered(page);
    await page
      .getByText(/All four outlets within/)
      .first()
      .waitFor();
    await page.getByRole('tab', { name: /Ports 5/ }).click();
    const table = await copied(page, () => page.getByRole('button', { name: 'Copy table' }).click());
    await page.getByText(/Copied five rows/).waitFor();
    await sameAsCommandLine(sitting, table);
    expect(sitting.strangers).toEqual([]);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 400_000);

test('by keyboard alone: seven channels and five ports typed, targets given, table copied', async () => {
  const sitting = await sit();
  const { page } = sitting;
  const key = (name: string): Promise<void> => page.keyboard.press(name);
  const type = (text: string): Promise<void> => page.keyboard.type(text);
  const typed = async (text: string): Promise<void> => {
    await type(text);
    await key('Enter');
  };
  /** Goes on with Tab until what has the focus fits. */
  const tabTo = async (selector: string): Promise<void> => {
    for (let i = 0; i < 80; i += 1) {
      if (await page.evaluate((wanted) => document.activeElement?.matches(wanted) ?? false, selector)) return;
      await key('Tab');
    }
    throw new Error(`Tab never came to ${selector}`);
  };
  const channel = async (from: string, ...runs: readonly (readonly [string, string])[]): Promise<void> => {
    await typed(from);
    for (const [length, arrow] of runs) {
      await type(length);
      await key(arrow);
    }
    await key('Enter');
  };
  try {
    await tabTo('#new-name');
    await typed('Four-way');
    await page.locator('.frame').waitFor();
    await tabTo('.sheet-surface');
    await key('c');
    await channel('10, 13', ['10 mm', 'ArrowRight']);
    await channel('20, 13', ['6 mm', 'ArrowUp'], ['12 mm', 'ArrowRight']);
    await channel('20, 13', ['6 mm', 'ArrowDown'], ['12 mm', 'ArrowRight']);
    for (const y of [19, 7]) {
      await channel(`32, ${y}`, ['3 mm', 'ArrowUp'], ['20 mm', 'ArrowRight']);
      await channel(`32, ${y}`, ['3 mm', 'ArrowDown'], ['20 mm', 'ArrowRight']);
    }
    await key('p');
    await typed('10 mm, 13 mm');
    for (const y of [22, 16, 10, 4]) await typed(`52, ${y}`);
    await key('Escape');
    await answered(page);
    await tabTo('[role="grid"]');
    await key('Control+Home');
    await key('ArrowRight');
    await key('ArrowRight');
    for (let i = 0; i < 4; i += 1) {
      await key('ArrowDown');
      await key('Enter');
      await typed('25');
    }
    await answered(page);
    await page
      .getByText(/All four outlets within/)
      .first()
      .waitFor();
    for (let i = 0; i < 80; i += 1) {
      if (await page.evaluate(() => document.activeElement?.textContent === 'Copy table')) break;
      await key('Shift+Tab');
    }
    const table = await copied(page, () => key('Enter'));
    await page.getByText(/Copied five rows/).waitFor();
    await sameAsCommandLine(sitting, table);
    expect(sitting.strangers).toEqual([]);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 400_000);

test('nothing serious for assistive technology, light and dark; 200 % zoom loses nothing', async () => {
  const sitting = await sit({ width: 1280, height: 720 });
  const { page } = sitting;
  try {
    for (const scheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme: scheme });
      await noSerious(page);
    }
    await page.getByRole('button', { name: /Eight-way splitter/ }).click();
    await page.locator('.frame').waitFor();
    await page
      .getByText(/outlets within/)
      .first()
      .waitFor();
    for (const scheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme: scheme });
      await noSerious(page);
    }
    for (const open of ['i', 'b', 'e', '?']) {
      await page.locator('.sheet-surface').first().focus();
      await page.keyboard.press(open);
      await page.locator('.panel-head').waitFor();
      await noSerious(page);
    }
    // twice as large is half as wide: everything is still there and nothing is cut off at the side
    await page.setViewportSize({ width: 640, height: 360 });
    const wide = await page.evaluate(() => document.documentElement.scrollWidth);
    expect(wide).toBeLessThanOrEqual(640);
    for (const part of ['.header', '.verdicts', '.verbs', '.sheet', '.card', '.ledger']) {
      const box = await page.locator(part).boundingBox();
      expect(box!.height, part).toBeGreaterThan(20);
      expect(box!.x + box!.width, part).toBeLessThanOrEqual(641);
    }
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 400_000);
