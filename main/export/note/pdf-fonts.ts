import bidiFactory from 'bidi-js';
import { CHAINS, type Face, type FontFile, fontBytes } from './font-files.ts';
import { unpackWoff } from './woff.ts';

/**
 * Text as it is set: every sign in the first font of its face that has it, right-to-left runs in the
 * order that they are seen in (Unicode Standard Annex 9, by bidi-js).
 */

/** A stretch of one font and one direction, as it is drawn from the left. */
export interface Piece {
  readonly font: FontFile;
  /** In reading order: the font itself lays a right-to-left run out. */
  readonly text: string;
  readonly features: Features | undefined;
  /** What the text stands for, where no font has it: a reader that copies it gets that. */
  readonly actual: string | undefined;
  /** In ems. */
  readonly width: number;
}

type Features = PDFKit.Mixins.OpenTypeFeatures[];

/** Signs as they are written, and those that they stand for. */
interface Written {
  readonly text: string;
  readonly actual: string | undefined;
}

interface Font {
  hasGlyphForCodePoint(code: number): boolean;
}

const bidi = bidiFactory();

const RIGHT_TO_LEFT = /[\u0590-\u08ff\ufb1d-\ufdff\ufe70-\ufeff]|\ud802|\ud803|\ud83a|\ud83b/;
/** Digits and signs that are raised stand together in one font, or they do not match. */
const RAISED = /[⁰¹²³⁴-⁹⁺⁻]/u;
/** No glyph: controls, marks of direction, joiners of emoji. */
const UNSEEN = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]+/gu;

const plainFont = (font: FontFile): Uint8Array => {
  const bytes = fontBytes(font);
  return font.file.endsWith('.woff') ? unpackWoff(bytes) : bytes;
};

/** Fonts already parsed, for every document of this process. */
const parsed = new Map<string, object>();

/** Right-to-left runs are laid out whole: asking for a feature keeps pdfkit from laying out word by word. */
const WHOLE: Features = ['kern'];
/** Figures of even width, in columns. */
const TABULAR: Features = ['tnum'];

export class Fonts {
  /** Whether any sign was written by its number. */
  numbered = false;
  readonly #doc: PDFKit.PDFDocument;
  readonly #loaded = new Map<string, Font>();
  readonly #choice = new Map<string, FontFile | null>();
  readonly #pieces = new Map<string, readonly Piece[]>();

  constructor(doc: PDFKit.PDFDocument) {
    this.#doc = doc;
  }

  #use(font: FontFile): Font {
    const known = this.#loaded.get(font.file);
    if (known) {
      this.#doc.font(font.file);
      return known;
    }
    // pdfkit takes a parsed font too, which its types do not say, and keeps the one in use as `_font`
    const source = (parsed.get(font.file) ?? plainFont(font)) as PDFKit.Mixins.PDFFontSource;
    this.#doc.registerFont(font.file, source);
    this.#doc.font(font.file);
    const { font: inner } = (this.#doc as unknown as { _font: { font: Font } })._font;
    parsed.set(font.file, inner);
    this.#loaded.set(font.file, inner);
    return inner;
  }

  #fontOf(face: Face, sign: string): FontFile | null {
    const key = `${face} ${sign}`;
    const known = this.#choice.get(key);
    if (known !== undefined) return known;
    const codes = [...sign].map((part) => part.codePointAt(0)!);
    const found = CHAINS[face].find((font) => {
      const inner = this.#use(font);
      return codes.every((code) => inner.hasGlyphForCodePoint(code));
    });
    this.#choice.set(key, found ?? null);
    return found ?? null;
  }

  /** What is drawn for a text, from left to right. */
  pieces(text: string, face: Face): readonly Piece[] {
    const key = `${face} ${text}`;
    let known = this.#pieces.get(key);
    if (!known) {
      known = this.#shape(text.replaceAll(UNSEEN, ' '), face);
      this.#pieces.set(key, known);
    }
    return known;
  }

  #shape(text: string, face: Face): Piece[] {
    const parts = this.#writable(text, face);
    const clean = parts.map((part) => part.text).join('');
    const levels = RIGHT_TO_LEFT.test(clean) ? bidi.getEmbeddingLevels(clean, 'ltr').levels : null;
    const runs: { font: FontFile; text: string; level: number; part: Written }[] = [];
    let at = 0;
    let [k, end] = [0, parts[0]?.text.length ?? 0];
    for (const { text: sign, font } of this.#fonted(clean, face)) {
      const level = levels?.[at] ?? 0;
      while (at >= end && k + 1 < parts.length) {
        k += 1;
        end += parts[k]!.text.length;
      }
      const part = parts[k]!;
      at += sign.length;
      const last = runs.at(-1);
      const seen = level % 2 === 1 ? (bidi.getMirroredCharacter(sign) ?? sign) : sign;
      if (last && last.level === level && last.font === font && last.part === part) last.text += seen;
      else runs.push({ font, text: seen, level, part });
    }
    return inOrder(runs).map(({ font, text: run, level, part: { actual } }): Piece => {
      const even = face.startsWith('tabular') && font.from === 'literata';
      const features = level % 2 === 1 ? WHOLE : even ? TABULAR : undefined;
      this.#use(font);
      this.#doc.fontSize(1000);
      const width = this.#doc.widthOfString(run, features ? { features } : {}) / 1000;
      return { font, text: run, features, actual, width };
    });
  }

  /** Signs that no font has, by their numbers, those that follow one another together: none is dropped, none becomes another. */
  #writable(text: string, face: Face): Written[] {
    const parts: { text: string; actual: string | undefined }[] = [];
    for (const sign of text) {
      const known = this.#fontOf(face, sign) !== null;
      const last = parts.at(-1);
      const number = `U+${sign.codePointAt(0)!.toString(16).toUpperCase().padStart(4, '0')}`;
      if (known) {
        if (last && last.actual === undefined) last.text += sign;
        else parts.push({ text: sign, actual: undefined });
      } else if (last?.actual !== undefined) {
        last.text = `${last.text.slice(0, -1)} ${number}]`;
        last.actual += sign;
      } else parts.push({ text: `[${number}]`, actual: sign });
    }
    if (parts.some(({ actual }) => actual !== undefined)) this.numbered = true;
    return parts;
  }

  *#fonted(text: string, face: Face): Generator<{ text: string; font: FontFile }> {
    let raised = '';
    const give = (sign: string): { text: string; font: FontFile } => ({
      text: sign,
      font: this.#fontOf(face, sign)!,
    });
    let last: FontFile | null = null;
    for (const sign of text) {
      if (RAISED.test(sign)) {
        raised += sign;
        continue;
      }
      if (raised) {
        const group = this.#fontOf(face, raised);
        for (const one of raised) yield group ? { text: one, font: group } : give(one);
        raised = '';
      }
      // a space or a mark takes the font of what it follows, so that runs are not torn
      const font: FontFile = give(sign).font;
      const stays: boolean =
        last !== null &&
        last !== font &&
        /^[\p{Mn} ]$/u.test(sign) &&
        this.#use(last).hasGlyphForCodePoint(sign.codePointAt(0)!);
      last = stays ? last : font;
      yield { text: sign, font: last! };
    }
    if (raised) {
      const group = this.#fontOf(face, raised);
      for (const one of raised) yield group ? { text: one, font: group } : give(one);
    }
  }

  /** Points. */
  width(text: string, face: Face, size: number): number {
    return this.pieces(text, face).reduce((sum, { width }) => sum + width, 0) * size;
  }

  /** Draws from the left end of the baseline; x, y in points from the upper left corner of the page. */
  draw(text: string, face: Face, size: number, x: number, y: number): void {
    let at = x;
    for (const piece of this.pieces(text, face)) {
      if (piece.text.trim() !== '') {
        const { features, actual } = piece;
        this.#use(piece.font);
        if (actual !== undefined) this.#doc.markContent('Span', { actual });
        this.#doc.fontSize(size).text(piece.text, at, y, {
          lineBreak: false,
          baseline: 'alphabetic',
          ...(features && { features }),
        });
        if (actual !== undefined) this.#doc.endMarkedContent();
      }
      at += piece.width * size;
    }
  }
}

/** Runs in the order that they are seen in: rule L2 of the annex, on runs of one level. */
function inOrder<T extends { readonly level: number }>(runs: T[]): T[] {
  const ordered = [...runs];
  const highest = runs.reduce((most, { level }) => Math.max(most, level), 0);
  for (let level = highest; level > 0; level -= 1) {
    let from = 0;
    while (from < ordered.length) {
      if (ordered[from]!.level < level) {
        from += 1;
        continue;
      }
      let to = from;
      while (to < ordered.length && ordered[to]!.level >= level) to += 1;
      ordered.splice(from, to - from, ...ordered.slice(from, to).reverse());
      from = to;
    }
  }
  return ordered;
}
