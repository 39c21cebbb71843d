/** How wide text stands on a terminal, in columns: wide letters and emoji take two, marks none. */

const graphemes = new Intl.Segmenter('en', { granularity: 'grapheme' });

/** First and last code points that the Unicode property East_Asian_Width counts as wide or full-width. */
const WIDE: readonly (readonly [number, number])[] = [
  [0x1100, 0x115f],
  [0x2e80, 0x303e],
  [0x3041, 0x33ff],
  [0x3400, 0x4dbf],
  [0x4e00, 0x9fff],
  [0xa000, 0xa4cf],
  [0xa960, 0xa97f],
  [0xac00, 0xd7a3],
  [0xf900, 0xfaff],
  [0xfe30, 0xfe6f],
  [0xff00, 0xff60],
  [0xffe0, 0xffe6],
  [0x17000, 0x18cff],
  [0x1b000, 0x1b2ff],
  [0x20000, 0x3fffd],
];

export function textWidth(text: string): number {
  if (/^[\x20-\x7e]*$/.test(text)) return text.length;
  let width = 0;
  for (const { segment } of graphemes.segment(text)) {
    const code = segment.codePointAt(0)!;
    const wide =
      /\p{Emoji_Presentation}|\ufe0f/u.test(segment) || WIDE.some(([from, to]) => code >= from && code <= to);
    width += /^[\p{Cc}\p{Cf}\p{Mn}\p{Me}]+$/u.test(segment) ? 0 : wide ? 2 : 1;
  }
  return width;
}

export const padEnd = (text: string, width: number): string =>
  text + ' '.repeat(Math.max(0, width - textWidth(text)));

export const padStart = (text: string, width: number): string =>
  ' '.repeat(Math.max(0, width - textWidth(text))) + text;

/** Lines of at most `width` columns, broken between words, those after the first behind `indent`. */
export function wrapped(text: string, width: number, indent = ''): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(/\s+/)) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (line !== '' && textWidth(longer) > width) {
      lines.push(line);
      line = indent + word;
    } else line = longer;
  }
  if (line !== '') lines.push(line);
  return lines;
}
