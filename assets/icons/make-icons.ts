import { mkdir, readFile, writeFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { launch } from '../../test/page/browser.ts';
import { icnsOf, icoOf, type Picture } from './containers.ts';

/**
 * Makes the icons of the packages from the drawings beside this file, into `dist/icons`: `npm run icons`.
 * A browser draws them.
 */
const SIZES = [16, 24, 32, 48, 64, 128, 256, 512, 1024];

export async function makeIcons(out: string): Promise<void> {
  const browser = await launch();
  try {
    for (const name of ['mark', 'project']) {
      const drawing = await readFile(join(import.meta.dirname, `${name}.svg`), 'utf8');
      const pictures: Picture[] = [];
      for (const size of SIZES) {
        const page = await browser.newPage({ viewport: { width: size, height: size } });
        const style = `<style>html,body{margin:0}svg{display:block;width:${size}px;height:${size}px}</style>`;
        await page.setContent(style + drawing);
        pictures.push({ size, png: await page.screenshot({ omitBackground: true }) });
        await page.close();
      }
      await mkdir(join(out, name), { recursive: true });
      for (const { size, png } of pictures) await writeFile(join(out, name, `${size}x${size}.png`), png);
      await writeFile(join(out, `${name}.ico`), icoOf(pictures.filter(({ size }) => size <= 256)));
      await writeFile(join(out, `${name}.icns`), icnsOf(pictures));
    }
  } finally {
    await browser.close();
  }
}

if (import.meta.main) await makeIcons(resolve(import.meta.dirname, '../../dist/icons'));
