import { existsSync } from 'node:fs';
import { type Browser, chromium } from 'playwright-core';
import { ENGINE } from '../../main/electron/engine.ts';

const INSTALLED = [
  '/usr/bin/chromium',
  '/usr/bin/chromium-browser',
  '/usr/bin/google-chrome',
  '/usr/bin/google-chrome-stable',
  '/usr/bin/microsoft-edge',
  '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
  '/Applications/Microsoft Edge.app/Contents/MacOS/Microsoft Edge',
  '/Applications/Chromium.app/Contents/MacOS/Chromium',
  'C:\\Program Files\\Google\\Chrome\\Application\\chrome.exe',
  'C:\\Program Files (x86)\\Microsoft\\Edge\\Application\\msedge.exe',
];

const HOW =
  'No browser was found for the tests of the page. Set CHANNELWRIGHT_BROWSER to the path of Chromium, Chrome or ' +
  'Edge, or install one of them (on Debian: apt-get install chromium).';

/** A browser, by path in the environment, as installed, or as the development package brings it. */
export async function browserPath(): Promise<string> {
  const own = process.env.CHANNELWRIGHT_BROWSER;
  if (own) {
    if (existsSync(own)) return own;
    throw new Error(`CHANNELWRIGHT_BROWSER names ${own}, which is not there. ${HOW}`);
  }
  const installed = INSTALLED.find((path) => existsSync(path));
  if (installed) return installed;
  try {
    const { default: packed } = await import('@sparticuz/chromium');
    return await packed.executablePath();
  } catch {
    throw new Error(HOW);
  }
}

export const ARGUMENTS: readonly string[] = [
  '--no-sandbox',
  '--disable-gpu',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--force-color-profile=srgb',
  // as the desktop build starts it
  `--js-flags=${ENGINE}`,
];

export async function launch(): Promise<Browser> {
  return chromium.launch({ executablePath: await browserPath(), headless: true, args: [...ARGUMENTS] });
}
