import { execFileSync, spawnSync } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { readChipFile } from '../../main/cli/read-chip.ts';
import { type Note, noteOf } from '../../main/export/note/content.ts';
import { paperOf } from '../../main/export/note/pdf.ts';
import type { PaperName } from '../../main/export/note/pdf-page.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';

/** What the tests of the note share: chips, their notes, and the outside reader of PDF. */

const DEMOS = join(import.meta.dirname, '../../assets/demo');
export const demos = (): string[] =>
  readdirSync(DEMOS)
    .filter((name) => name.endsWith('.json'))
    .sort();
export const demoPath = (name: string): string => join(DEMOS, name);

export const DATE = new Date('2026-12-01T20:15:00Z');
export const PROGRAM = 'Channelwright 0.0.0';

export async function solvedDemo(name: string): Promise<{ chip: Chip; result: Result }> {
  const chip = await readChipFile(demoPath(name));
  return { chip, result: await solve(chip, { junctions: 'ideal' }) };
}

export const noteFor = (chip: Chip, result: Result, paper: PaperName = 'A4'): Note =>
  noteOf(chip, result, { program: PROGRAM, date: DATE, paper: paperOf(paper) });

/** Names as people give them, and as people who mean harm do. */
export const NAMES = {
  greek: 'µ-λ line τ₀ Ω 10⁻⁷ m³',
  formula: '=HYPERLINK("http://x","y")',
  plus: '+1+1',
  minus: '-2',
  at: '@SUM(A1)',
  hebrew: 'ערוץ ראשי 12',
  arabic: 'قناة الخروج',
  han: '流路',
  markup: '<script>alert(1)</script>&"\'',
  long: `a${'-long-name-without-a-break'.repeat(2)}`,
} as const;

/** A comb of channels whose names are all of those above. */
export function awkwardChip(): Chip {
  const outlets = Object.values(NAMES);
  const x = (i: number): number => 4000 + 6000 * i;
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: `Names: ${NAMES.greek} ${NAMES.hebrew} ${NAMES.markup}`,
      note: `Beside ${NAMES.arabic} stands ${NAMES.han}; 50 µm ± 5 %.`,
      outline: { width: 76_000, height: 26_000 },
      layers: [{ id: 'τ layer', depth: 50, fillet: 10, tolerance: { depth: '5 %', width: '2 um' } }],
      channels: [
        {
          id: '=feed',
          layer: 'τ layer',
          path: [
            [2000, 13_000],
            [x(9), 13_000],
          ],
          width: 600,
        },
        ...outlets.map((id, i) => ({
          id: `lane ${id}`,
          layer: 'τ layer',
          path: [
            [x(i), 13_000],
            [x(i), 3000],
          ],
          width: [120, 100],
        })),
      ],
      ports: [
        { id: 'in', at: [2000, 13_000], layer: 'τ layer', drive: { flow: '50 uL/min' } },
        ...outlets.map((id, i) => ({
          id,
          at: [x(i), 3000],
          layer: 'τ layer',
          diameter: 700,
          drive: { pressure: 0 },
          tubing: [{ bore: '0.5 mm', length: '200 mm' }],
        })),
      ],
      fluid: { name: 'water', temperature: '25 degC' },
      targets: outlets.map((port) => ({ port, share: '10 %', within: '1 %' })),
      limits: [{ name: NAMES.plus, shear: '1 mPa' }],
    }),
  );
}

/** A feed with `count` outlets, each with a target. */
export function manyOutlets(count: number): Chip {
  const x = (i: number): number => 3000 + 1500 * i;
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'Many outlets',
      outline: { width: x(count) + 3000, height: 20_000 },
      layers: [{ id: 'flow', depth: 50 }],
      channels: [
        {
          id: 'feed',
          layer: 'flow',
          path: [
            [1000, 13_000],
            [x(count - 1), 13_000],
          ],
          width: 900,
        },
        ...Array.from({ length: count }, (_, i) => ({
          id: `lane ${i + 1}`,
          layer: 'flow',
          path: [
            [x(i), 13_000],
            [x(i), 3000],
          ],
          width: 60,
        })),
      ],
      ports: [
        { id: 'in', at: [1000, 13_000], layer: 'flow', drive: { flow: '50 uL/min' } },
        ...Array.from({ length: count }, (_, i) => ({
          id: `out ${i + 1}`,
          at: [x(i), 3000],
          layer: 'flow',
          diameter: 500,
          drive: { pressure: 0 },
        })),
      ],
      fluid: { name: 'water', temperature: '25 degC' },
      targets: Array.from({ length: count }, (_, i) => ({
        port: `out ${i + 1}`,
        share: 1 / count,
        within: '50 %',
      })),
    }),
  );
}

/** The outside reader: poppler's own programs. */
const present = spawnSync('pdftotext', ['-v']).status === 0;

/** A test that needs the outside reader; without it, it says how to get it, and fails in continuous integration. */
export function withPoppler(name: string, body: () => Promise<void>): void {
  if (present) test(name, body);
  else
    test(`${name}: not checked, poppler-utils is absent`, () => {
      console.warn(
        'poppler-utils is not installed: no PDF was checked with it (Debian: apt install poppler-utils).',
      );
      expect(process.env.CI, 'poppler-utils must be present in continuous integration').toBeFalsy();
    });
}

export const poppler = (program: string, ...args: string[]): string =>
  execFileSync(program, args, { encoding: 'utf8', maxBuffer: 256 * 1024 * 1024 });

/** Text of a PDF, line by line as laid out. */
export const textOf = (pdf: string, ...args: string[]): string => poppler('pdftotext', ...args, pdf, '-');

/** Numbers of a PGM picture, row after row: 0 black to 255 white. */
export function readPgm(path: string): {
  width: number;
  height: number;
  at: (x: number, y: number) => number;
} {
  const bytes = readFileSync(path);
  const head = /^P5\s+(\d+)\s+(\d+)\s+255\s/.exec(bytes.subarray(0, 64).toString('latin1'))!;
  const [width, height] = [Number(head[1]), Number(head[2])];
  return { width, height, at: (x, y) => bytes[head[0].length + y * width + x]! };
}
