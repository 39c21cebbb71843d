/** The bidirectional algorithm of Unicode, which comes without types: what is used of it. */
export interface Levels {
  readonly levels: Uint8Array;
  readonly paragraphs: readonly { readonly start: number; readonly end: number; readonly level: number }[];
}
export interface Bidi {
  getEmbeddingLevels(text: string, base?: 'ltr' | 'rtl' | 'auto'): Levels;
  getMirroredCharacter(sign: string): string | null;
}
export default function bidiFactory(): Bidi;
