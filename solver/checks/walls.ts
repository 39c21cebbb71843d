import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import { type Gap, gaps } from '../chip/plan-gaps.ts';
import type { Drawn } from './evidence.ts';
import type { Found, Gathered } from './gather.ts';
import type { ProcessRules } from './process.ts';
import { digits, length, METRE, placeOf } from './words.ts';

/** nm; no process leaves a wall thinner than this. */
const THINNEST = 1000;

/** Walls of one drawing, kept as long as the drawing: looking for them is the dearest of the checks. */
const known = new WeakMap<Graph, { readonly below: number; readonly gaps: readonly Gap[] }>();

function wallsOf(chip: Chip, graph: Graph, below: number): readonly Gap[] {
  const kept = known.get(graph);
  if (kept?.below === below) return kept.gaps;
  const found = gaps(chip, below);
  known.set(graph, { below, gaps: found });
  return found;
}

/** Walls between what is drawn side by side: too thin, too slender, or eaten by the etch. */
export function checkWalls({ chip, graph, rules }: Drawn, found: Gathered): void {
  const depths = new Map(chip.layers.map((layer) => [layer.id, layer.depth]));
  // A wall is as high, and as much is etched off it, as the deeper of what lies on both sides.
  const own = new Map(chip.channels.flatMap(({ id, depth }) => (depth === undefined ? [] : [[id, depth]])));
  const depthBeside = ({ between, layer }: Gap): number =>
    Math.max(...between.map((id) => own.get(id) ?? depths.get(layer)!));
  const most = Math.max(0, ...depths.values(), ...own.values());
  const below = rules ? Math.max(THINNEST, thickest(rules, most)) : THINNEST;
  const walls = wallsOf(chip, graph, Math.ceil(below));
  if (walls.length === 0) return;
  const names = namesOf(chip);
  for (const gap of walls) {
    const finding = judge(gap, depthBeside(gap), rules, names);
    if (finding) found.add(withRemedy(chip, gap, finding));
  }
}

/** The thickest wall that any rule may find fault with. */
function thickest({ leastGap, wall, undercut }: ProcessRules, depth: number): number {
  const eaten = 2 * (undercut?.number ?? 0) * depth;
  return Math.max((leastGap?.number ?? 0) + eaten, wall ? depth / wall.number + eaten : 0);
}

function judge(
  { between, width, at }: Gap,
  depth: number,
  rules: ProcessRules | null,
  names: ReadonlyMap<string, string>,
): (Found & { readonly lack?: number }) | null {
  const [a, b] = between;
  const base = { where: names.get(a) ?? a, at: placeOf(...at) };
  const wall = a === b ? `The wall of ${a} beside itself` : `The wall between ${a} and ${b}`;
  const apart = (by: number): string =>
    `Move ${a === b ? 'its legs' : 'them'} ${length(by)} further apart, or narrow them by as much.`;
  if (!rules?.leastGap) {
    if (width >= THINNEST) return null;
    return {
      kind: 'near-miss',
      severity: 'warn',
      ...base,
      says: `${wall} is ${length(width)} thick: no process makes that. Meant to be joined, perhaps.`,
      do: 'Draw them into each other, or further apart.',
      value: width / METRE,
      threshold: THINNEST / METRE,
      off: THINNEST / width,
    };
  }
  const eaten = 2 * (rules.undercut?.number ?? 0) * depth;
  const left = width - eaten;
  if (eaten > 0 && left <= 0) {
    return {
      kind: 'etch-merge',
      severity: 'stop',
      ...base,
      says: `${wall} is ${length(width)} thick on the mask; the etch takes ${length(eaten)} of it, so that both sides merge.`,
      do: apart(rules.leastGap.number - left),
      lack: rules.leastGap.number - left,
      value: left / METRE,
      threshold: 0,
      off: eaten / width,
    };
  }
  if (left < rules.leastGap.number) {
    return {
      kind: 'least-gap',
      severity: 'stop',
      ...base,
      says: `${wall} is ${length(left)} thick${eaten > 0 ? ' after the etch' : ''}; ${rules.name} holds ${length(rules.leastGap.number)} (${rules.leastGap.source}).`,
      do: apart(rules.leastGap.number - left),
      lack: rules.leastGap.number - left,
      value: left / METRE,
      threshold: rules.leastGap.number / METRE,
      off: rules.leastGap.number / left,
    };
  }
  const slender = depth / left;
  if (!rules.wall || slender <= rules.wall.number) return null;
  return {
    kind: 'wall-leans',
    severity: 'warn',
    ...base,
    says: `${wall} is ${length(depth)} high and ${length(left)} thick, ${digits(slender)} to 1; ${rules.name} holds ${digits(rules.wall.number)} to 1 (${rules.wall.source}).`,
    do: apart(depth / rules.wall.number - left),
    lack: depth / rules.wall.number - left,
    value: slender,
    threshold: rules.wall.number,
    off: slender / rules.wall.number,
  };
}

/** Of its width: a channel that would have to give up more is moved instead. */
const MOST_NARROWED = 0.5;

/** The finding with the edit that narrows the channels on both sides by what the wall lacks, where they can spare it. */
function withRemedy(
  { channels }: Chip,
  { between }: Gap,
  finding: Found & { readonly lack?: number },
): Found {
  const { lack, ...found } = finding;
  if (lack === undefined) return found;
  const sides = [...new Set(between)].map((id) => channels.find((channel) => channel.id === id));
  // Each side of a channel moves in by half of what it narrows by; of two channels each gives half.
  const by = Math.ceil(lack / 2) * 2;
  const parts = sides.flatMap((channel) =>
    channel && by <= MOST_NARROWED * Math.min(...channel.width)
      ? [{ ...channel, width: [channel.width[0] - by, channel.width[1] - by] as const }]
      : [],
  );
  if (parts.length < sides.length) return found;
  const words = parts.map(({ id, width }) => `${id} to ${length(Math.max(...width))}`).join(' and ');
  return {
    ...found,
    remedy: {
      label: `narrow ${words}`.slice(0, 200),
      changes: parts.map((part) => ({ kind: 'put', list: 'channels', id: part.id, part })),
    },
  };
}

/** How results name what bears an id: channels plainly, all else with its kind. */
function namesOf(chip: Chip): Map<string, string> {
  const names = new Map<string, string>();
  for (const { id } of chip.chambers) names.set(id, `chamber:${id}`);
  for (const { id } of chip.vias) names.set(id, `via:${id}`);
  for (const { id } of chip.ports) names.set(id, `port:${id}`);
  return names;
}
