import type { Channel, Layer } from '../chip/chip.ts';
import type { Drawn } from './evidence.ts';
import type { Gathered } from './gather.ts';
import type { ProcessRules, Rule } from './process.ts';
import { span } from './span.ts';
import { digits, length, METRE, placeOf } from './words.ts';

/** Widths of channels and chambers against what the process holds. */
export function checkWidths({ chip, rules }: Drawn, found: Gathered): void {
  if (!rules) return;
  const layers = new Map(chip.layers.map((layer) => [layer.id, layer]));
  for (const channel of chip.channels) {
    const on = layers.get(channel.layer)!;
    // a channel of its own depth is judged by that
    const layer = channel.depth === undefined ? on : { ...on, depth: channel.depth };
    if (rules.leastWidth) leastWidth(channel, rules, rules.leastWidth, found);
    if (rules.deepest) deepest(channel, layer, rules, rules.deepest, found);
    if (rules.widest) {
      const width = Math.max(...channel.width);
      sags(channel.id, width, middle(channel), layer, rules.widest, found, () => {
        const most = Math.floor(rules.widest!.number * layer.depth);
        return widthRemedy(channel, `narrow ${channel.id} to ${length(most)}`, (end) => Math.min(end, most));
      });
    }
  }
  if (!rules.widest) return;
  for (const chamber of chip.chambers) {
    const { diameter, at } = span(chamber);
    sags(`chamber:${chamber.id}`, diameter, at, layers.get(chamber.layer)!, rules.widest, found);
  }
}

function leastWidth(channel: Channel, rules: ProcessRules, least: Rule, found: Gathered): void {
  const width = Math.min(...channel.width);
  if (width >= least.number) return;
  found.add({
    kind: 'least-width',
    severity: 'stop',
    where: channel.id,
    says: `${channel.id} is ${length(width)} wide; ${rules.name} holds ${length(least.number)} (${least.source}).`,
    do: `Widen it to ${length(least.number)}, or choose a finer process.`,
    at: placeOf(...narrowEnd(channel)),
    value: width / METRE,
    threshold: least.number / METRE,
    remedy: widthRemedy(channel, `widen ${channel.id} to ${length(least.number)}`, (end) =>
      Math.max(end, Math.ceil(least.number)),
    ),
    off: least.number / width,
  });
}

function deepest(channel: Channel, layer: Layer, rules: ProcessRules, most: Rule, found: Gathered): void {
  const width = Math.min(...channel.width);
  const ratio = layer.depth / width;
  if (ratio <= most.number) return;
  const least = Math.ceil(layer.depth / most.number);
  found.add({
    kind: 'too-deep',
    severity: 'warn',
    where: channel.id,
    says: `${channel.id} is ${digits(ratio)} times as deep as wide; ${rules.name} holds ${digits(most.number)} (${most.source}).`,
    do: `Widen it to ${length(least)}, or make layer ${layer.id} shallower.`,
    at: placeOf(...narrowEnd(channel)),
    value: ratio,
    threshold: most.number,
    remedy: widthRemedy(channel, `widen ${channel.id} to ${length(least)}`, (end) => Math.max(end, least)),
    off: ratio / most.number,
  });
}

/** A roof that spans too much; one that spans twice too much lies on the floor. */
function sags(
  where: string,
  width: number,
  [x, y]: readonly [number, number],
  layer: Layer,
  most: Rule,
  found: Gathered,
  remedy?: () => NonNullable<Parameters<Gathered['add']>[0]['remedy']>,
): void {
  const ratio = width / layer.depth;
  if (ratio <= most.number) return;
  const name = where.replace(/^chamber:/, '');
  found.add({
    kind: 'roof-sags',
    severity: ratio > 2 * most.number ? 'stop' : 'warn',
    where,
    says: `The roof of ${name} spans ${length(width)}, ${digits(ratio)} times its depth of ${length(layer.depth)}; a soft roof spans ${digits(most.number)} times (${most.source}).`,
    do: `${remedy ? `Narrow it to ${length(most.number * layer.depth)}` : 'Put posts into it'}, make layer ${layer.id} deeper, or choose a process with a rigid lid.`,
    at: placeOf(x, y),
    value: ratio,
    threshold: most.number,
    ...(remedy && { remedy: remedy() }),
    off: ratio / most.number,
  });
}

export function widthRemedy(channel: Channel, label: string, end: (width: number) => number) {
  const part: Channel = { ...channel, width: [end(channel.width[0]), end(channel.width[1])] };
  return { label: label.slice(0, 200), changes: [{ kind: 'put', list: 'channels', id: channel.id, part }] };
}

const narrowEnd = ({ path, width }: Channel): readonly [number, number] =>
  width[0] <= width[1] ? path[0]! : path.at(-1)!;

const middle = ({ path }: Channel): readonly [number, number] => {
  const i = Math.floor((path.length - 1) / 2);
  return [(path[i]![0] + path[i + 1]![0]) / 2, (path[i]![1] + path[i + 1]![1]) / 2];
};
