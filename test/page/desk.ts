import type { BrowserContext, Page } from 'playwright-core';
import { fitted, INSET, toScreen } from '../../renderer/sheet/camera.ts';
import { launch } from './browser.ts';
import { type Host, startHost } from './host.ts';

export interface Sitting {
  readonly page: Page;
  readonly context: BrowserContext;
  readonly host: Host;
  /** What the page said to the console as errors, and what it asked of anyone but its own host. */
  readonly errors: string[];
  readonly strangers: string[];
  end(): Promise<void>;
}

/** A browser at the page of a fresh host. */
export async function sit(
  options: {
    readonly width?: number;
    readonly height?: number;
    readonly scheme?: 'light' | 'dark';
    readonly scale?: number;
    /** Opened from the start. */
    readonly files?: readonly string[];
  } = {},
): Promise<Sitting> {
  const host = await startHost(options.files);
  const browser = await launch();
  const context = await browser.newContext({
    viewport: { width: options.width ?? 1440, height: options.height ?? 900 },
    colorScheme: options.scheme ?? 'light',
    deviceScaleFactor: options.scale ?? 1,
  });
  await context.grantPermissions(['clipboard-read', 'clipboard-write'], { origin: host.origin });
  const page = await context.newPage();
  page.setDefaultTimeout(60_000);
  const errors: string[] = [];
  const strangers: string[] = [];
  page.on('console', (message) => {
    // a header the host sends names a feature this browser does not know
    if (message.type() === 'error' && !/Permissions-Policy/.test(message.text())) errors.push(message.text());
  });
  page.on('pageerror', (error) => errors.push(error.message));
  page.on('request', (request) => {
    const url = request.url();
    if (!url.startsWith(host.origin) && !url.startsWith('data:') && !url.startsWith('blob:'))
      strangers.push(url);
  });
  await page.goto(host.address);
  if (options.files) await page.locator('.frame').waitFor();
  else await page.getByRole('heading', { name: 'Begin a chip' }).waitFor();
  return {
    page,
    context,
    host,
    errors,
    strangers,
    end: async () => {
      await browser.close();
      await host.stop();
    },
  };
}

/** Waits until the newest chip is answered and all its junctions are solved. */
export async function answered(page: Page): Promise<void> {
  await page.locator('.verdicts[aria-busy="false"]').waitFor({ timeout: 120_000 });
  await page.waitForTimeout(150);
  await page.locator('.verdicts[aria-busy="false"]').waitFor({ timeout: 120_000 });
}

const NOTHING = 'nothing copied yet';

/**
 * What `act` puts into the clipboard. A browser says that something is written before it can be read, so what
 * is read back is waited for.
 */
export async function copied(page: Page, act: () => Promise<unknown>): Promise<string> {
  /** A function of the page that returns a promise is not asked again: its first answer would count. */
  const read = async (wanted: (text: string) => boolean): Promise<string> => {
    const until = Date.now() + 30_000;
    for (;;) {
      const text = await page.evaluate(() => navigator.clipboard.readText());
      if (wanted(text)) return text;
      if (Date.now() > until) throw new Error(`The clipboard holds only ${JSON.stringify(text)}.`);
      await page.waitForTimeout(20);
    }
  };
  await page.evaluate((text) => navigator.clipboard.writeText(text), NOTHING);
  await read((text) => text === NOTHING);
  await act();
  return read((text) => text !== NOTHING && text !== '');
}

/** The whole chip's description, by way of the clipboard; the sheet has the focus then and all parts are chosen. */
export async function description(page: Page): Promise<string> {
  await page.locator('.sheet-surface').first().focus();
  await page.keyboard.press('Control+a');
  return copied(page, () => page.keyboard.press('Control+c'));
}

/** Where a place of the chip (mm from its lower left) lies on the page, while the whole chip is shown. */
export async function placeOnPage(
  page: Page,
  outline: { readonly width: number; readonly height: number },
  x: number,
  y: number,
): Promise<{ readonly x: number; readonly y: number }> {
  const box = (await page.locator('.sheet-surface').first().boundingBox())!;
  const size = { width: box.width, height: box.height };
  const right = outline.width * 1e6;
  const camera = fitted({ left: 0, bottom: 0, right, top: outline.height * 1e6 }, size, INSET);
  const [across, down] = toScreen(camera, size, [x * 1e6, y * 1e6]);
  return { x: box.x + across, y: box.y + down };
}
