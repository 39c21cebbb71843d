/** What a layer of the drawing is on the chip. */
export type Role =
  /** Fluid of the chip's layer `layer` (its own name by default), nm deep. */
  | { readonly kind: 'cavity'; readonly depth: number; readonly layer: string }
  /** Round holes of ports. */
  | { readonly kind: 'holes' }
  /** The edge of the chip. */
  | { readonly kind: 'outline' }
  | { readonly kind: 'ignore' };

export interface Settings {
  /** Metres per drawing unit; where given it goes before what the file says. */
  readonly unit: number | null;
  /** Depth of cavities that no role gives one, nm. */
  readonly depth: number;
  /** By the name of the drawing's layer; what is not named gets what its name suggests. */
  readonly roles: Readonly<Record<string, Role>>;
  /** Width of lines that have none, nm; without it they are listed and left out. */
  readonly lineWidth: number | null;
  /** Ports at the free ends of channels and at round pads where no layer holds holes. */
  readonly portsAtEnds: boolean;
}

const SUGGESTIONS: readonly (readonly [RegExp, 'holes' | 'outline' | 'ignore'])[] = [
  [/hole|port|drill|punch|inlet|outlet/i, 'holes'],
  [/outline|border|frame|edge|dicing|\bchip\b|\bwafer\b|substrate/i, 'outline'],
  [/text|label|dimension|\bdim\b|align|mark|note|title|defpoints|legend|scale/i, 'ignore'],
];

/** The role that the name of a layer suggests. */
export function suggestedRole(name: string, depth: number): Role {
  const kind = SUGGESTIONS.find(([pattern]) => pattern.test(name))?.[1] ?? 'cavity';
  return kind === 'cavity' ? { kind, depth, layer: name } : { kind };
}
