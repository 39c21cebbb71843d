import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, test } from 'vitest';
import { launch } from './browser.ts';
import { answered, sit } from './desk.ts';
import { startHost } from './host.ts';
import { hostClient } from './host-client.ts';

const folder = mkdtempSync(join(tmpdir(), 'channelwright-kept-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

test('a project opens with the answers it was left with, and its solve says the same', async () => {
  const project = join(folder, 'tee.chw');
  const first = await sit({
    files: [join(import.meta.dirname, '../../assets/demo/eight-way-splitter.json')],
  });
  let left = '';
  try {
    await answered(first.page);
    const client = await hostClient(first);
    await expect
      .poll(async () => (await client.call('project.state', {})).state?.view.answers, { timeout: 60_000 })
      .toBeDefined();
    left = (await first.page.locator('.verdict').allTextContents()).join('|');
    await client.call('project.saveAs', { path: project, replace: true });
  } finally {
    await first.end();
  }
  const host = await startHost([project]);
  const browser = await launch();
  try {
    const page = await (await browser.newContext()).newPage();
    // every text that the bar ever shows, from its first frame on
    await page.addInitScript(() => {
      const told: string[] = [];
      Object.assign(window, { told });
      const look = (): void => {
        const verdicts = [...document.querySelectorAll('.verdict')];
        const text = verdicts.map(({ textContent }) => textContent).join('|');
        if (text !== '' && text !== told.at(-1)) told.push(text);
      };
      new MutationObserver(look).observe(document, { childList: true, characterData: true, subtree: true });
    });
    await page.goto(host.address);
    await answered(page);
    expect(await page.evaluate(() => (window as unknown as { told: string[] }).told)).toEqual([left]);
  } finally {
    await browser.close();
    await host.stop();
  }
}, 180_000);
