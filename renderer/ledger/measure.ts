import { FIGURE_FACE, SIZES } from '../look/tokens.ts';
import type { Measure } from './layout.ts';

/** Widths kept; a table that changes with every figure must not fill the memory. */
const MOST_KEPT = 20_000;

/** Widths of texts as the page sets them; cells are taken as bold, as the chosen row is. */
export function canvasMeasure(): Measure {
  const context = document.createElement('canvas').getContext('2d')!;
  const kept = new Map<string, number>();
  const fonts = {
    head: `400 ${SIZES.label}px ${FIGURE_FACE}`,
    cell: `650 ${SIZES.body}px ${FIGURE_FACE}`,
  };
  return (text, of) => {
    // figures are set in digits of one width, which a canvas does not know of
    const set = text.replace(/\d/g, '0');
    const key = `${of} ${set}`;
    const known = kept.get(key);
    if (known !== undefined) return known;
    context.font = fonts[of];
    const { width } = context.measureText(set);
    if (kept.size >= MOST_KEPT) kept.clear();
    kept.set(key, width);
    return width;
  };
}
