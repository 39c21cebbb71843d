import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { answered, sit } from './desk.ts';
import { hostClient } from './host-client.ts';

test('chosen parts turn by a typed angle, by keys and by mouse; the undo names it and takes it back', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    const client = await hostClient(sitting);
    const chipNow = async (): Promise<Chip> => (await client.call('project.state', {})).state!.chip;
    const undoNow = async (): Promise<string | null> => (await client.call('project.state', {})).state!.undo;
    const before = await chipNow();
    const [first] = before.channels;
    const sheet = page.locator('.sheet-surface').first();
    // by keys alone: one channel of the table, the angle, the button
    await page.getByRole('tab', { name: /Channels/ }).click();
    await page.getByRole('gridcell', { name: first!.id, exact: true }).click();
    await sheet.focus();
    await page.keyboard.press('a');
    const field = page.getByLabel('Angle, to the left');
    await field.waitFor();
    await field.focus();
    await page.keyboard.press('Control+a');
    await page.keyboard.type('5 deg');
    await page.keyboard.press('Enter');
    await page.keyboard.press('Tab');
    await page.keyboard.press('Enter');
    await expect.poll(undoNow).toBe('turn feed by 5°');
    const turned = (await chipNow()).channels[0]!;
    const [[x0, y0], [x1, y1]] = [turned.path[0]!, turned.path.at(-1)!];
    const [[u0, v0], [u1, v1]] = [first!.path[0]!, first!.path.at(-1)!];
    const leaning = Math.atan2(y1 - y0, x1 - x0) - Math.atan2(v1 - v0, u1 - u0);
    expect((leaning * 180) / Math.PI).toBeCloseTo(5, 3);
    await sheet.focus();
    await page.keyboard.press('Control+z');
    await expect.poll(chipNow).toEqual(before);
    // by mouse: the same field and button
    await field.click();
    await field.fill('-12.5');
    await page.getByRole('button', { name: 'Turn', exact: true }).last().click();
    await expect.poll(undoNow).toBe('turn feed by −12.5°');
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 180_000);

test('a key is taken away and given back', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    const sheet = page.locator('.sheet-surface').first();
    await sheet.focus();
    await page.keyboard.press('/');
    await page.keyboard.type('keys');
    await page.keyboard.press('Enter');
    await page.getByRole('button', { name: 'Key of Turn: q', exact: true }).click();
    await page.getByRole('button', { name: 'No key', exact: true }).click();
    await page.getByRole('button', { name: 'Key of Turn: none', exact: true }).waitFor();
    const client = await hostClient(sitting);
    const keys = async () => (await client.call('preferences.get', {})).preferences.keys;
    await expect.poll(keys).toEqual({ turn: '' });
    await sheet.focus();
    await page.keyboard.press('Control+a');
    await page.keyboard.press('q');
    expect((await client.call('project.state', {})).state!.undo).toBeNull();
    await page.getByRole('button', { name: 'Key of Turn: none', exact: true }).click();
    await page.getByRole('button', { name: 'As at first', exact: true }).click();
    await page.getByRole('button', { name: 'Key of Turn: q', exact: true }).waitFor();
    await expect.poll(keys).toEqual({});
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 180_000);
