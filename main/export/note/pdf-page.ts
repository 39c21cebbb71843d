import PDFDocument from 'pdfkit';
import type { Run } from './blocks.ts';
import type { Face } from './font-files.ts';
import { Fonts } from './pdf-fonts.ts';

/** Pages and what flows down them: a cursor, breaks, tagged content, lines of text. Points throughout. */

export const PAPERS = {
  A4: { size: 'A4', width: 595.28, height: 841.89 },
  letter: { size: 'LETTER', width: 612, height: 792 },
} as const;
export type PaperName = keyof typeof PAPERS;

export const MARGIN = { left: 56, right: 50, top: 62, bottom: 60 } as const;

/** On paper: ink, what is said aside, rules, what was missed (never by colour alone). */
export const COLOURS = {
  ink: '#1d2327',
  soft: '#5b646b',
  line: '#b9b6ac',
  body: '#d5d8d6',
  paper: '#ffffff',
  alarm: '#b3261e',
} as const;
export type Colour = keyof typeof COLOURS;

export interface StructOptions {
  readonly alt?: string;
  readonly scope?: 'Row' | 'Column';
  readonly bbox?: readonly number[];
}

export type Element = PDFKit.PDFStructureElement;

export interface Style {
  readonly face: 'text' | 'figure' | 'tabular';
  readonly size: number;
  readonly leading: number;
  readonly colour?: Colour;
}

interface Word {
  readonly text: string;
  readonly face: Face;
  /** Whether a space stands before it. */
  readonly spaced: boolean;
}

/** Parts of a line in one face, left to right. */
export type Line = readonly { readonly text: string; readonly face: Face }[];

const graphemes = new Intl.Segmenter('en', { granularity: 'grapheme' });

export class Sheet {
  readonly doc: PDFKit.PDFDocument;
  readonly fonts: Fonts;
  readonly width: number;
  readonly left: number = MARGIN.left;
  y: number = MARGIN.top;
  readonly #bottom: number;

  constructor(paper: PaperName, title: string, info: PDFKit.DocumentInfo) {
    const { size, width, height } = PAPERS[paper];
    this.doc = new PDFDocument({
      size,
      margin: 0,
      bufferPages: true,
      tagged: true,
      pdfVersion: '1.7',
      lang: 'en',
      displayTitle: true,
      info: { ...info, Title: title },
      // no standard font: all that is set is embedded; the types take no null
      font: null as unknown as string,
    });
    this.fonts = new Fonts(this.doc);
    this.width = width - MARGIN.left - MARGIN.right;
    this.#bottom = height - MARGIN.bottom;
  }

  get right(): number {
    return this.left + this.width;
  }

  get room(): number {
    return this.#bottom - this.y;
  }

  get top(): boolean {
    return this.y <= MARGIN.top;
  }

  /** Of a page between its margins. */
  get tall(): number {
    return this.#bottom - MARGIN.top;
  }

  /** A new page where less than `height` is left; true where one was begun. */
  need(height: number): boolean {
    if (height <= this.room || this.top) return false;
    this.doc.addPage();
    this.y = MARGIN.top;
    return true;
  }

  /** What is drawn becomes content of `element`. */
  into(element: Element, type: string, draw: () => void): void {
    const content = this.doc.markStructureContent(type);
    draw();
    this.doc.endMarkedContent();
    element.add(content);
  }

  /** What is drawn is decoration, or said elsewhere. */
  aside(draw: () => void): void {
    this.doc.markContent('Artifact', { type: 'Layout' });
    draw();
    this.doc.endMarkedContent();
  }

  begin(parent: Element, type: string, options: StructOptions = {}): Element {
    // scope and bbox are not in the types
    const element = this.doc.struct(type, options as PDFKit.Mixins.StructureElementOptions);
    parent.add(element);
    return element;
  }

  /** Lines no wider than `width`, broken between words, and inside those that are wider themselves. */
  lines(runs: readonly Run[], { face, size }: Style, width: number): Line[] {
    const lines: { text: string; face: Face }[][] = [];
    let line: { text: string; face: Face }[] = [];
    let used = 0;
    const put = (text: string, as: Face): void => {
      const last = line.at(-1);
      if (last?.face === as) last.text += text;
      else line.push({ text, face: as });
    };
    const turn = (): void => {
      lines.push(line);
      line = [];
      used = 0;
    };
    for (const word of wordsOf(runs, face)) {
      const space = word.spaced && line.length > 0 ? this.fonts.width(' ', word.face, size) : 0;
      const wide = this.fonts.width(word.text, word.face, size);
      if (used + space + wide <= width + 0.01) {
        put(`${space > 0 ? ' ' : ''}${word.text}`, word.face);
        used += space + wide;
        continue;
      }
      if (wide <= width) {
        if (line.length > 0) turn();
        put(word.text, word.face);
        used = wide;
        continue;
      }
      // a word wider than the line is broken after its hyphens and the like, and else anywhere
      if (space > 0 && width - used > 8 * size) {
        put(' ', word.face);
        used += space;
      } else if (line.length > 0) turn();
      for (const part of word.text.split(/(?<=[-_/.,:;|])/)) {
        const all = this.fonts.width(part, word.face, size);
        if (used + all > width && all <= width && line.length > 0) turn();
        if (used + all <= width) {
          put(part, word.face);
          used += all;
          continue;
        }
        for (const { segment } of graphemes.segment(part)) {
          const more = this.fonts.width(segment, word.face, size);
          if (used + more > width && line.length > 0) turn();
          put(segment, word.face);
          used += more;
        }
      }
    }
    if (line.length > 0) turn();
    return lines;
  }

  lineWidth(line: Line, size: number): number {
    return line.reduce((sum, { text, face }) => sum + this.fonts.width(text, face, size), 0);
  }

  /** Draws a line with its baseline at y. */
  line(line: Line, { size, colour = 'ink' }: Style, x: number, y: number): void {
    let at = x;
    this.doc.fillColor(COLOURS[colour]);
    for (const { text, face } of line) {
      this.fonts.draw(text, face, size, at, y);
      at += this.fonts.width(text, face, size);
    }
  }

  /** A paragraph of one element, over pages where it must; moves down by its height. */
  paragraph(
    parent: Element,
    type: string,
    runs: readonly Run[],
    style: Style,
    place: { readonly x?: number; readonly width?: number; readonly keep?: number } = {},
  ): Element {
    const x = place.x ?? this.left;
    const lines = this.lines(runs, style, place.width ?? this.right - x);
    // no single line of a paragraph is left behind or carried over alone
    this.need(style.leading * Math.min(lines.length, 2) + (place.keep ?? 0));
    const element = this.begin(parent, type);
    let from = 0;
    while (from < lines.length) {
      let count = Math.max(1, Math.min(lines.length - from, Math.floor((this.room + 0.1) / style.leading)));
      if (lines.length - from - count === 1 && count > 2) count -= 1;
      const part = lines.slice(from, from + count);
      this.into(element, type, () => {
        for (const [i, line] of part.entries())
          this.line(line, style, x, this.y + style.leading * (i + 0.74));
      });
      this.y += part.length * style.leading;
      from += count;
      if (from < lines.length) this.need(Number.POSITIVE_INFINITY);
    }
    element.end();
    return element;
  }

  rule(y: number, colour: Colour, weight: number, from = this.left, to = this.right): void {
    this.doc.lineWidth(weight).moveTo(from, y).lineTo(to, y).stroke(COLOURS[colour]);
  }
}

function wordsOf(runs: readonly Run[], face: 'text' | 'figure' | 'tabular'): Word[] {
  const found: Word[] = [];
  let spaced = false;
  for (const run of runs) {
    const text = typeof run === 'string' ? run : run.strong;
    const as: Face = typeof run === 'string' ? face : `${face} strong`;
    for (const part of text.split(/([ \t\n]+)/)) {
      if (part === '') continue;
      if (/^[ \t\n]+$/.test(part)) {
        spaced = true;
        continue;
      }
      found.push({ text: part, face: as, spaced });
      spaced = false;
    }
  }
  return found;
}
