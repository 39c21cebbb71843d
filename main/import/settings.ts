import type { Role } from '../contract/bring-in.ts';

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
