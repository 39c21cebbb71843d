import type { Element } from './tree.ts';

/** What of an element's style bears on its shape; inherited from the element around. */
export interface Style {
  readonly fill: string;
  readonly fillRule: string;
  readonly stroke: string;
  readonly strokeWidth: string;
  readonly linecap: string;
  readonly linejoin: string;
  readonly dashes: string;
  readonly effect: string;
  readonly display: string;
  readonly visibility: string;
}

const NAMES: Readonly<Record<string, keyof Style>> = {
  fill: 'fill',
  'fill-rule': 'fillRule',
  stroke: 'stroke',
  'stroke-width': 'strokeWidth',
  'stroke-linecap': 'linecap',
  'stroke-linejoin': 'linejoin',
  'stroke-dasharray': 'dashes',
  'vector-effect': 'effect',
  display: 'display',
  visibility: 'visibility',
};

export const INITIAL: Style = {
  fill: 'black',
  fillRule: 'nonzero',
  stroke: 'none',
  strokeWidth: '1',
  linecap: 'butt',
  linejoin: 'miter',
  dashes: 'none',
  effect: 'none',
  display: 'inline',
  visibility: 'visible',
};

/** Declarations by a plain selector: "path", ".a" or "#b". */
export type Sheet = ReadonlyMap<string, string>;

/** Rules of a style sheet with plain selectors; `understood` is false where there are others. */
export function readSheet(text: string, into: Map<string, string>): boolean {
  let understood = true;
  const bare = text.replaceAll(/\/\*[\s\S]*?\*\//g, '');
  for (const [, selectors, body] of bare.matchAll(/([^{}]{1,2000})\{([^{}]{0,4000})\}/g)) {
    for (const selector of selectors.split(',')) {
      const name = selector.trim();
      if (/^[.#]?[\w-]+$/.test(name)) into.set(name, `${into.get(name) ?? ''};${body}`);
      else understood = false;
    }
  }
  return understood && !/@/.test(bare);
}

export function styleOf(element: Element, around: Style, sheet: Sheet): Style {
  const style: Record<keyof Style, string> = { ...around, display: 'inline', effect: 'none' };
  const set = (name: string, value: string | undefined): void => {
    if (!Object.hasOwn(NAMES, name) || value === undefined) return;
    const plain = value.replace(/!important/i, '').trim();
    if (plain !== '' && plain !== 'inherit') style[NAMES[name]] = plain;
  };
  const declare = (text: string | undefined): void => {
    for (const declaration of text?.split(';') ?? []) {
      const colon = declaration.indexOf(':');
      if (colon > 0) set(declaration.slice(0, colon).trim().toLowerCase(), declaration.slice(colon + 1));
    }
  };
  const { attributes } = element;
  for (const name of Object.keys(NAMES)) set(name, attributes[name]);
  declare(sheet.get(element.name));
  for (const name of (attributes.class ?? '').split(/\s+/)) if (name) declare(sheet.get(`.${name}`));
  if (attributes.id) declare(sheet.get(`#${attributes.id}`));
  declare(attributes.style);
  return style;
}

/** Whether a paint is none at all, or the white of the page painted over others. */
export function paintKind(paint: string): 'none' | 'white' | 'paint' {
  const plain = paint.toLowerCase().replaceAll(/\s/g, '');
  if (plain === 'none' || plain === 'transparent') return 'none';
  return /^(white|#fff|#ffffff|rgb\(255,255,255\)|rgb\(100%,100%,100%\))$/.test(plain) ? 'white' : 'paint';
}
