import { expect, test } from 'vitest';
import { answered, sit } from './desk.ts';
import { hostClient } from './host-client.ts';

test('a channel is given a depth of its own on its card, and that of its layer again', async () => {
  const sitting = await sit();
  const { page } = sitting;
  try {
    await page.getByRole('button', { name: /Eight-way/ }).click();
    await page.locator('.frame').waitFor();
    await answered(page);
    const client = await hostClient(sitting);
    const state = async () => (await client.call('project.state', {})).state!;
    const before = (await state()).chip;
    await page.getByRole('tab', { name: /Channels/ }).click();
    await page.getByRole('gridcell', { name: 'feed', exact: true }).click();
    const field = page.getByLabel('Depth', { exact: true });
    const drawn = await field.inputValue();
    // by another unit than the field's
    await field.fill('0.09 mm');
    await field.press('Enter');
    await expect.poll(async () => (await state()).undo).toBe('set the depth of feed');
    const feed = (await state()).chip.channels.find(({ id }) => id === 'feed')!;
    expect(feed.depth).toBe(90_000);
    expect(await field.inputValue()).toBe('90 µm');
    await page.getByText('a depth of its own').waitFor();
    // nonsense stays and is not applied
    await field.fill('-3 um');
    await field.press('Enter');
    await expect.poll(() => field.getAttribute('aria-invalid')).toBe('true');
    expect((await state()).chip.channels.find(({ id }) => id === 'feed')!.depth).toBe(90_000);
    await field.fill('');
    await field.press('Enter');
    await expect.poll(async () => (await state()).undo).toBe('make feed as deep as its layer');
    expect((await state()).chip).toEqual(before);
    expect(await field.inputValue()).toBe(drawn);
    await page.locator('.sheet-surface').first().focus();
    await page.keyboard.press('Control+z');
    await page.getByRole('button', { name: 'As deep as its layer' }).click();
    await expect.poll(async () => (await state()).chip).toEqual(before);
    expect(sitting.errors).toEqual([]);
  } finally {
    await sitting.end();
  }
}, 180_000);
