import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The typefaces of the note, by the files that come with the program. */

/** Faces as they are asked for. */
export const FACES = ['text', 'text strong', 'figure', 'figure strong', 'tabular', 'tabular strong'] as const;
export type Face = (typeof FACES)[number];

const PACKAGES = {
  literata: '@fontsource/literata',
  commissioner: '@fontsource/commissioner',
  dejavu: 'dejavu-fonts-ttf',
} as const;

export interface FontFile {
  readonly from: keyof typeof PACKAGES;
  readonly file: string;
}

const own = (from: 'literata' | 'commissioner', weight: number): FontFile[] =>
  ['latin', 'latin-ext', 'greek', 'cyrillic'].map((script) => ({
    from,
    file: `${from}-${script}-${weight}-normal.woff`,
  }));

const fallback = (file: string): FontFile => ({ from: 'dejavu', file });

/** For each face, the files that are asked for a sign, one after another. */
export const CHAINS: Readonly<Record<Face, readonly FontFile[]>> = {
  text: [...own('literata', 400), fallback('DejaVuSans.ttf')],
  'text strong': [...own('literata', 600), fallback('DejaVuSans-Bold.ttf')],
  figure: [...own('commissioner', 400), fallback('DejaVuSans.ttf')],
  'figure strong': [...own('commissioner', 600), fallback('DejaVuSans-Bold.ttf')],
  // Columns of figures: Commissioner has none of even width.
  tabular: [...own('literata', 400), fallback('DejaVuSans.ttf')],
  'tabular strong': [...own('literata', 600), fallback('DejaVuSans-Bold.ttf')],
};

const web = (from: 'literata' | 'commissioner', weight: 400 | 600): FontFile => ({
  from,
  file: `${from}-latin-${weight}-normal.woff2`,
});

/** What a page of HTML carries inside: other scripts are left to the reader's own fonts. */
export const WEB_FONTS = [
  { family: 'Literata', weight: 400, font: web('literata', 400) },
  { family: 'Literata', weight: 600, font: web('literata', 600) },
  { family: 'Commissioner', weight: 400, font: web('commissioner', 400) },
  { family: 'Commissioner', weight: 600, font: web('commissioner', 600) },
] as const;

/** Every file that comes with the program. */
export const FONT_FILES: readonly FontFile[] = [
  ...new Map(
    [...Object.values(CHAINS).flat(), ...WEB_FONTS.map(({ font }) => font)].map((font) => [font.file, font]),
  ).values(),
];

/** Bundled, the files lie in a folder beside the program; else in their packages. */
function pathOf({ from, file }: FontFile): string {
  if (!import.meta.url.endsWith('.ts')) return fileURLToPath(new URL(`./fonts/${file}`, import.meta.url));
  const require = createRequire(import.meta.url);
  return from === 'dejavu'
    ? require.resolve(`${PACKAGES.dejavu}/ttf/${file}`)
    : join(dirname(require.resolve(PACKAGES[from])), 'files', file);
}

const read = new Map<string, Uint8Array>();

export function fontBytes(font: FontFile): Uint8Array {
  let bytes = read.get(font.file);
  if (!bytes) {
    bytes = readFileSync(pathOf(font));
    read.set(font.file, bytes);
  }
  return bytes;
}
