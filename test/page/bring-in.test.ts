import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { deflateSync } from 'node:zlib';
import AxeBuilder from 'axe-core';
import type { Page } from 'playwright-core';
import { expect, test } from 'vitest';
import { dxf, outline } from '../import/read.ts';
import { answered, sit } from './desk.ts';

/** A drawing from its file to the sheet, by keyboard; one step takes it back. A picture under it, scaled by two points. */

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

const DRAWING = dxf(
  [
    ...outline([
      [2000, 6000],
      [30000, 6000],
      [30000, 2000],
      [30300, 2000],
      [30300, 6000],
      [60000, 6000],
      [60000, 6300],
      [2000, 6300],
    ]),
    ...outline(
      [
        [0, 0],
        [70000, 0],
        [70000, 20000],
        [0, 20000],
      ],
      'OUTLINE',
    ),
    ...[0, 'TEXT', 8, 'NOTES', 10, 0, 20, 0, 40, 5, 1, 'a'],
  ],
  [],
  0,
);

/** A grey PNG of 200 by 100, by the format's published chunks (ISO/IEC 15948). */
function png(): Buffer {
  const table = Array.from({ length: 256 }, (_, n) => {
    let c = n;
    for (let k = 0; k < 8; k += 1) c = c & 1 ? 0xedb88320 ^ (c >>> 1) : c >>> 1;
    return c >>> 0;
  });
  const chunk = (type: string, data: Buffer): Buffer => {
    const body = Buffer.concat([Buffer.from(type), data]);
    let c = 0xffffffff;
    for (const byte of body) c = table[(c ^ byte) & 255]! ^ (c >>> 8);
    const out = Buffer.alloc(body.length + 8);
    out.writeUInt32BE(data.length);
    body.copy(out, 4);
    out.writeUInt32BE((c ^ 0xffffffff) >>> 0, body.length + 4);
    return out;
  };
  const head = Buffer.alloc(13);
  head.writeUInt32BE(200);
  head.writeUInt32BE(100, 4);
  head[8] = 8;
  const rows = Buffer.alloc(100 * 201, 120);
  for (let y = 0; y < 100; y += 1) rows[201 * y] = 0;
  return Buffer.concat([
    Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', head),
    chunk('IDAT', deflateSync(rows)),
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

test('a drawing is read, asked for its unit, found to be channels, put on the sheet and taken back', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-drawing-'));
  const sitting = await sit();
  const { page } = sitting;
  const shots = process.env.CHANNELWRIGHT_SHOTS;
  const shot = async (name: string): Promise<void> => {
    if (shots) await page.screenshot({ path: join(shots, `${name}.png`) });
  };
  try {
    writeFileSync(join(folder, 'tee.dxf'), DRAWING);
    writeFileSync(join(folder, 'photo.png'), png());
    writeFileSync(join(folder, 'broken.dxf'), DRAWING.replace('\n10\n2000', '\n10\nx'));
    await page.getByRole('button', { name: /Cell loading/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    const surface = page.locator('.sheet-surface').first();
    await surface.focus();
    await page.keyboard.press('/');
    await page.keyboard.type('bring in a drawing');
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { name: 'Bring in a drawing' }).waitFor();
    await page.getByLabel('A drawing to bring in').setInputFiles(join(folder, 'broken.dxf'));
    await page
      .getByRole('alert')
      .filter({ hasText: /line \d+/ })
      .waitFor();
    await page.getByLabel('A drawing to bring in').setInputFiles(join(folder, 'tee.dxf'));
    await page.getByRole('heading', { name: 'tee.dxf' }).waitFor();
    const find = page.getByRole('button', { name: 'Find channels' });
    await find.focus();
    await page.keyboard.press('Enter');
    await page
      .getByRole('alert')
      .filter({ hasText: /does not say what its numbers are in/ })
      .waitFor();
    await page.getByLabel('One unit is').selectOption('um');
    await find.focus();
    await page.keyboard.press('Enter');
    const became = page.getByRole('region', { name: 'What became of it' });
    await became.waitFor();
    expect(await became.getByRole('rowgroup').nth(1).textContent()).toMatch(/^FLOW20/);
    expect(await became.textContent()).toMatch(/1 × TEXT/);
    for (const scheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme: scheme });
      await noViolations(page);
      await became.scrollIntoViewIfNeeded();
      await shot(`bring-in-${scheme}`);
    }
    const inPlace = page.getByLabel('in place of what is on the sheet');
    await inPlace.check();
    await page.getByRole('button', { name: 'Put on the sheet' }).focus();
    await page.keyboard.press('Enter');
    await page
      .getByRole('alert')
      .filter({ hasText: /It is on the sheet/ })
      .waitFor();
    await answered(page);
    await page.getByRole('tab', { name: /Channels/i }).click();
    const ledger = page.locator('.ledger');
    expect(await ledger.textContent()).toMatch(/channel 2/);
    await shot('brought');
    await surface.focus();
    await page.keyboard.press('Control+z');
    await answered(page);
    expect(await ledger.textContent()).toMatch(/funnel/);

    await page.getByLabel('A picture to trace').setInputFiles(join(folder, 'photo.png'));
    await page.getByRole('button', { name: 'Pick two points' }).click();
    const box = (await surface.boundingBox())!;
    await page.mouse.click(box.x + box.width * 0.4, box.y + box.height * 0.5);
    await page.mouse.click(box.x + box.width * 0.6, box.y + box.height * 0.5);
    const width = async (): Promise<number> =>
      Number.parseFloat(await page.getByLabel('Its width').inputValue());
    const before = await width();
    const apart = page.getByLabel('They are apart by');
    const distance = Number.parseFloat(await apart.inputValue());
    await apart.fill(`${distance * 2} mm`);
    await page.keyboard.press('Enter');
    await page.getByText('Scale it by two points').waitFor();
    expect((await width()) / before).toBeCloseTo(2, 2);
    await noViolations(page);
    await shot('underlay');
    expect(sitting.errors).toEqual([]);
    expect(sitting.strangers).toEqual([]);
  } finally {
    await sitting.end();
    rmSync(folder, { recursive: true });
  }
}, 240_000);
