/**
 * The look as data: one place for colours, type sizes and steps. The stylesheets read them as custom
 * properties (`--ink`), the canvas as values.
 */
export type Scheme = 'light' | 'dark';

export interface Palette {
  /** Behind the header and the verdict bar. */
  readonly ground: string;
  /** Around the chip. */
  readonly sheet: string;
  /** The chip itself. */
  readonly chip: string;
  readonly card: string;
  /** What can be typed into, and the track of a graph. */
  readonly field: string;
  readonly line: string;
  readonly ink: string;
  readonly soft: string;
  /** A missed target or limit, and nothing else. */
  readonly alarm: string;
}

export const PALETTES: Readonly<Record<Scheme, Palette>> = {
  light: {
    ground: '#eceae4',
    sheet: '#f6f5f1',
    chip: '#fffefb',
    card: '#fffefb',
    field: '#f3f1ea',
    line: '#d3d0c6',
    ink: '#1d2327',
    soft: '#5b646b',
    alarm: '#b3261e',
  },
  dark: {
    ground: '#111416',
    sheet: '#171b1e',
    chip: '#1f2427',
    card: '#1c2124',
    field: '#23292d',
    line: '#343b40',
    ink: '#e9e6df',
    soft: '#a2a9ad',
    alarm: '#ff8a73',
  },
};

/** Where the system imposes its colours, the canvas takes them too; what is missed is still said in words. */
export const FORCED: Palette = {
  ground: 'Canvas',
  sheet: 'Canvas',
  chip: 'Canvas',
  card: 'Canvas',
  field: 'Canvas',
  line: 'GrayText',
  ink: 'CanvasText',
  soft: 'CanvasText',
  alarm: 'LinkText',
};

/** Sizes in CSS px, by use. */
export const SIZES = { note: 10.5, label: 12, body: 13, verdict: 15, title: 17, head: 20 } as const;

/** One idea of spacing: multiples of 4 px. */
export const step = (count: number): number => 4 * count;

export const TEXT_FACE = "'Literata Variable', Georgia, serif";
export const FIGURE_FACE = "'Commissioner Variable', 'Segoe UI', sans-serif";
