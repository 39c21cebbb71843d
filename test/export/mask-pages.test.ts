import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { SaxesParser } from 'saxes';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { MaskOptions } from '../../main/contract/mask.ts';
import { pageOf } from '../../main/export/mask/page.ts';
import { writePdf } from '../../main/export/mask/pdf.ts';
import { areaOf } from '../../main/export/mask/shapes.ts';
import { writeSvg } from '../../main/export/mask/svg.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { channel, chipOf, layer, port, via } from '../chip/drawings.ts';
import { launch } from '../page/browser.ts';
import { BARE, modelOf } from './mask-drawings.ts';

const LONG = `${'sehr langer Name '.repeat(11)}Ende`;
const NAMES = ['Zufluß μ-Ω', 'כניסה', 'ad < "b" & c', 'x²⁺'];

/** A loop with a bend and an island, 6 by 4 mm, on two layers. */
const chip: Chip = chipOf({
  name: 'Schleife αβγ',
  outline: { width: 6_000_000, height: 4_000_000 },
  layers: [layer('flow'), layer('ο upper', 30)],
  channels: [
    channel(
      'loop',
      [
        [1000, 1000],
        [5000, 1000],
        [5000, 3000],
        [1000, 3000],
        [1000, 900],
      ],
      200,
      { bendRadius: 500 },
    ),
    channel(
      'up',
      [
        [3000, 500],
        [3000, 3500],
      ],
      150,
      { layer: 'ο upper' },
    ),
  ],
  vias: [via('v', [3000, 3000], 300, ['flow', 'ο upper'])],
  ports: NAMES.map((id, i) => port(id, [1000 + 1200 * i, 1000], 400)),
});

const MM2 = 1e12;
const one = (options: MaskOptions, index = 0) => {
  const model = modelOf(chip, options);
  return { ...model, planes: [model.planes[index]!] };
};

describe('SVG', () => {
  test('a strict parser reads it: size in mm, the same numbers in its view box, every name', () => {
    for (const index of [0, 2]) {
      const text = writeSvg(one({}, index));
      let root: Record<string, string> = {};
      let said = '';
      const parser = new SaxesParser();
      parser.on('error', (error) => {
        throw error;
      });
      parser.on('opentag', ({ name, attributes }) => {
        if (name === 'svg') root = attributes as Record<string, string>;
      });
      parser.on('text', (part) => {
        said += part;
      });
      parser.write(text).close();
      const [, , width, height] = root.viewBox!.split(' ');
      expect([root.width, root.height]).toEqual([`${width}mm`, `${height}mm`]);
      expect(said).toContain('Schleife αβγ');
      expect(said).toContain('Not for diagnosis or treatment.');
      if (index === 2) for (const name of NAMES) expect(said).toContain(name);
    }
  });

  test('names of holes run towards the middle of the chip, mirrored or not', () => {
    for (const mirror of [false, true]) {
      const ends: string[] = [];
      let end = false;
      const parser = new SaxesParser();
      parser.on('opentag', ({ name, attributes }) => {
        end = name === 'text' && (attributes as Record<string, string>)['text-anchor'] === 'end';
      });
      parser.on('text', (part) => {
        if (end) ends.push(part.trim());
        end = false;
      });
      parser.write(writeSvg(one({ mirror }, 2))).close();
      // The middle of the chip is at x = 3000; ports stand every 1200 from 1000.
      const right = NAMES.filter((_, i) => 1000 + 1200 * i > 3000 !== mirror);
      expect(ends).toEqual(right);
    }
  });

  test('a browser paints as much dark as there is, on both grounds, once and on a wafer', async () => {
    const wafer = { diameter: 20_000_000, edge: 500_000 };
    const drawn = (
      [
        [{ ...BARE, polarity: 'clear-field' }, 1],
        [{ ...BARE, polarity: 'dark-field' }, 1],
        [{ ...BARE, polarity: 'clear-field', wafer }, 0],
      ] as const
    ).map(([options]) => {
      const model = one(options);
      const { box } = pageOf(model, model.planes[0]!);
      const area = (areaOf(model.planes[0]!.cavities) * (model.wafer?.centres.length ?? 1)) / MM2;
      const whole = ((box.x1 - box.x0) * (box.y1 - box.y0)) / MM2;
      const dark = options.polarity === 'dark-field';
      return {
        text: writeSvg(model),
        whole,
        wanted: dark ? whole - area : area,
        copies: model.wafer?.centres.length,
      };
    });
    expect(drawn[2]!.copies).toBeGreaterThan(4);
    const browser = await launch();
    try {
      const page = await browser.newPage();
      for (const { text, whole, wanted } of drawn) {
        const share = await page.evaluate(async (svg) => {
          const image = new Image();
          image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(svg)}`;
          await image.decode();
          const scale = 1600 / image.width;
          const canvas = document.createElement('canvas');
          canvas.width = 1600;
          canvas.height = Math.round(image.height * scale);
          const context = canvas.getContext('2d')!;
          context.drawImage(image, 0, 0, canvas.width, canvas.height);
          const { data } = context.getImageData(0, 0, canvas.width, canvas.height);
          let dark = 0;
          for (let i = 0; i < data.length; i += 4) dark += 1 - data[i]! / 255;
          return dark / (canvas.width * canvas.height);
        }, text);
        // a picture of 1600 points across, rounded to whole points
        expect(Math.abs(share * whole - wanted) / wanted).toBeLessThan(0.01);
      }
    } finally {
      await browser.close();
    }
  });
});

describe('PDF', () => {
  let folder = '';
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'channelwright-pdf-'));
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  const present = (() => {
    try {
      execFileSync('pdfinfo', ['-v'], { stdio: 'ignore' });
      return true;
    } catch {
      return false;
    }
  })();
  if (!present) {
    test('PDF files: not measured, poppler-utils is absent', () => {
      console.warn(
        'poppler-utils is not installed: the PDF files were not measured (Debian: apt install poppler-utils).',
      );
      expect(process.env.CI, 'poppler-utils must be present in continuous integration').toBeFalsy();
    });
    return;
  }

  const tool = (name: string, ...argv: string[]): string =>
    execFileSync(name, argv, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] });

  interface Grey {
    readonly width: number;
    readonly height: number;
    readonly data: Uint8Array;
  }

  /** A page as pdftoppm paints it. */
  function painted(file: string, page: number, dpi: number, crop: readonly string[] = []): Grey {
    const to = join(folder, 'page');
    tool('pdftoppm', '-r', String(dpi), '-gray', '-singlefile', '-f', String(page), ...crop, file, to);
    const bytes = readFileSync(`${to}.pgm`);
    const [head, width, height] = /^P5\s+(\d+)\s+(\d+)\s+255\s/.exec(bytes.toString('latin1', 0, 64))!;
    return { width: Number(width), height: Number(height), data: bytes.subarray(head.length) };
  }

  test('the bar of 10 mm is 10.000 mm: to half a dot at 600 dpi, and at 60,000 dpi', async () => {
    const model = one({});
    const file = join(folder, 'bar.pdf');
    writeFileSync(file, await writePdf(model));
    const { box, bar } = pageOf(model, model.planes[0]!);
    for (const dpi of [600, 60_000]) {
      const dots = (mm: number): number => Math.round((mm * dpi) / 25.4);
      const y = dots((box.y1 - bar!.y - bar!.height / 2) / 1e6);
      // one line of dots through the bar, which begins a tenth of an inch from the page's edge
      const grey = painted(file, 1, dpi, ['-x', '0', '-y', String(y), '-W', String(dots(12.6)), '-H', '1']);
      const dark = grey.data.filter((value) => value < 128).length;
      expect(bar!.x - box.x0).toBe(2_540_000);
      expect(Math.abs(dark - (10 * dpi) / 25.4), `${dpi} dpi: ${(dark / dpi) * 25.4} mm`).toBeLessThanOrEqual(
        0.5,
      );
    }
  });

  test('pages have the size of what they hold, fonts are embedded, names are to be found', async () => {
    const model = modelOf({ ...chip, name: LONG });
    const file = join(folder, 'pages.pdf');
    writeFileSync(file, await writePdf(model));
    const info = tool('pdfinfo', '-f', '1', '-l', '9', file);
    expect(info).toMatch(/Pages:\s+3/);
    const sizes = [...info.matchAll(/Page\s+\d+ size:\s+([\d.]+) x ([\d.]+)/g)].map((m) => [
      Number(m[1]),
      Number(m[2]),
    ]);
    model.planes.forEach((plane, i) => {
      const { box } = pageOf(model, plane);
      expect((sizes[i]![0]! / 72) * 25.4).toBeCloseTo((box.x1 - box.x0) / 1e6, 2);
      expect((sizes[i]![1]! / 72) * 25.4).toBeCloseTo((box.y1 - box.y0) / 1e6, 2);
    });
    const fonts = tool('pdffonts', file).trim().split('\n').slice(2);
    expect(fonts.length).toBeGreaterThan(1);
    for (const font of fonts) expect(font).toMatch(/CID TrueType\s+Identity-H\s+yes yes yes/);
    const text = tool('pdftotext', '-layout', file, '-').replaceAll(/\s+/g, ' ');
    for (const wanted of [
      'sehr langer Name',
      'Ende',
      'Zufluß μ-Ω',
      'ad < "b" & c',
      'x²⁺',
      'ο upper',
      '10 mm',
    ])
      expect(text).toContain(wanted);
    expect(text).toMatch(/כניסה|הסינכ/);
    expect(text).toMatch(/Resists, etchants/);
  });

  test('as much is dark as there is, on both grounds', async () => {
    for (const polarity of ['clear-field', 'dark-field'] as const) {
      const model = one({ ...BARE, polarity });
      const file = join(folder, `${polarity}.pdf`);
      writeFileSync(file, await writePdf(model));
      const { width, height, data } = painted(file, 1, 4800);
      const { box } = pageOf(model, model.planes[0]!);
      const whole = ((box.x1 - box.x0) * (box.y1 - box.y0)) / MM2;
      const dark = (data.reduce((sum, grey) => sum + 1 - grey / 255, 0) / (width * height)) * whole;
      const area = areaOf(model.planes[0]!.cavities) / MM2;
      const wanted = polarity === 'dark-field' ? whole - area : area;
      // the painter counts every dot that is touched
      expect(Math.abs(dark - wanted) / wanted, polarity).toBeLessThan(0.005);
    }
  });
});
