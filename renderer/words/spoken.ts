/** Units that follow a figure in the sentences that the solver and people write. */
const UNIT = String.raw`(?:%|°C|[nµu]?m\b|mm\b|[µumn]?L\b|[µun]L/min|m?Pa s\b|[kmM]?Pa\b|GPa\b|mbar\b|bar\b|psi\b|m?s\b|min\b|h\b|kg/|mol/|times\b)`;
const FIGURE = new RegExp(String.raw`(\d) (?=${UNIT})`, 'g');
const NAMED = /\b(junction|port|chamber|via|channel|keep-out):(?=\S)/g;

/**
 * A sentence of the solver's or a person's as the page shows it: places by their names as people say them
 * ("junction 2" of "junction:2"), and no line that ends between a figure and its unit.
 */
export const spoken = (text: string): string =>
  text.replace(NAMED, '$1 ').replace(FIGURE, '$1\u00a0').replaceAll('± ', '±\u00a0');
