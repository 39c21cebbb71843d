import type { Role } from '../contract/bring-in.ts';

const SUGGESTIONS: readonly (readonly [RegExp, 'holes' | 'outline' | 'ignore'])[] = [
  [/text|label|dimension|\bdim\b|align|mark|note|title|defpoints|legend|scale|lane|\(white\)$/i, 'ignore'],
  [/outline|border|frame|edge|dicing|\bchip\b|\bwafer\b|substrate/i, 'outline'],
  [/hole|port|drill|punch|inlet|outlet/i, 'holes'],
];

/** The role that the name of a layer suggests. */
export function suggestedRole(name: string, depth: number): Role {
  const kind = SUGGESTIONS.find(([pattern]) => pattern.test(name))?.[1] ?? 'cavity';
  return kind === 'cavity' ? { kind, depth, layer: name } : { kind };
}
