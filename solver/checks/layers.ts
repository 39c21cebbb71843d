import Flatbush from 'flatbush';
import type { Chip, Layer } from '../chip/chip.ts';
import { type Drawing, drawingOf } from '../chip/read-graph-drawing.ts';
import type { Drawn } from './evidence.ts';
import type { Gathered } from './gather.ts';
import { length, METRE, placeOf } from './words.ts';

/**
 * Walls between layers: where a layer's roof has a thickness and channels of the next layer pass over its
 * own, that roof is all that parts them.
 */
export function checkLayers({ chip, rules }: Drawn, found: Gathered): void {
  const least = rules?.leastGap;
  if (!rules || !least) return;
  for (let i = 0; i + 1 < chip.layers.length; i += 1) {
    const lower = chip.layers[i]!;
    if (!lower.roof || lower.roof.thickness * METRE >= least.number) continue;
    const over = passesOver(chip, i);
    if (!over) continue;
    const upper = chip.layers[i + 1]!;
    const thickness = Math.ceil(least.number) / METRE;
    const part: Layer = { ...lower, roof: { ...lower.roof, thickness } };
    found.add({
      kind: 'layer-wall',
      severity: 'stop',
      where: `layer:${lower.id}`,
      says: `${over.upper} of layer ${upper.id} passes over ${over.lower} of layer ${lower.id} with ${length(lower.roof.thickness * METRE)} of wall between; ${rules.name} holds ${length(least.number)} (${least.source}).`,
      do: `Make the roof of layer ${lower.id} ${length(least.number)} thick, or lead one of them round the other.`,
      at: placeOf(...over.at),
      value: lower.roof.thickness,
      threshold: least.number / METRE,
      remedy: {
        label: `make the roof of layer ${lower.id} ${length(least.number)} thick`.slice(0, 200),
        changes: [{ kind: 'put', list: 'layers', id: lower.id, part }],
      },
      off: least.number / METRE / lower.roof.thickness,
    });
  }
}

interface Over {
  readonly lower: string;
  readonly upper: string;
  /** nm */
  readonly at: readonly [number, number];
}

const known = new WeakMap<Chip['channels'], Map<number, Over | null>>();

/** The first place where a channel of the layer above covers one of a layer, other than where a via joins them. */
function passesOver(chip: Chip, layer: number): Over | null {
  let kept = known.get(chip.channels);
  if (!kept) {
    kept = new Map();
    known.set(chip.channels, kept);
  }
  let over = kept.get(layer);
  if (over === undefined) {
    over = firstOver(chip, drawingOf(chip), layer);
    kept.set(layer, over);
  }
  return over;
}

function firstOver(chip: Chip, drawing: Drawing, layer: number): Over | null {
  const { boxes, elements, layerOf } = drawing;
  const above: number[] = [];
  const below: number[] = [];
  chip.channels.forEach((_, c) => {
    const list = layerOf[c] === layer ? below : layerOf[c] === layer + 1 ? above : null;
    for (let e = elements.first[c]!; list && e < elements.first[c + 1]!; e += 1) list.push(e);
  });
  if (above.length === 0 || below.length === 0) return null;
  const index = new Flatbush(above.length);
  const of = (e: number): [number, number, number, number] => [
    boxes[4 * e]!,
    boxes[4 * e + 1]!,
    boxes[4 * e + 2]!,
    boxes[4 * e + 3]!,
  ];
  for (const e of above) index.add(...of(e));
  index.finish();
  const ids = [chip.layers[layer]!.id, chip.layers[layer + 1]!.id];
  const vias = chip.vias.filter(({ layers }) => ids.every((id) => layers.includes(id)));
  for (const e of below) {
    const mine = of(e);
    for (const k of index.search(...mine)) {
      const other = above[k]!;
      if (!drawing.overlap(e, other)) continue;
      const theirs = of(other);
      const common = [
        Math.max(mine[0], theirs[0]),
        Math.max(mine[1], theirs[1]),
        Math.min(mine[2], theirs[2]),
        Math.min(mine[3], theirs[3]),
      ] as const;
      const joined = vias.some(({ at: [x, y], diameter }) => {
        const r = diameter / 2;
        return x >= common[0] - r && y >= common[1] - r && x <= common[2] + r && y <= common[3] + r;
      });
      if (joined) continue;
      return {
        lower: chip.channels[elements.at(e).channel]!.id,
        upper: chip.channels[elements.at(other).channel]!.id,
        at: [(common[0] + common[2]) / 2, (common[1] + common[3]) / 2],
      };
    }
  }
  return null;
}
