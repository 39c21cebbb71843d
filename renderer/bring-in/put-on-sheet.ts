import type { Chip, Layer } from '../../solver/chip/chip.ts';
import { listOf } from '../edits/parts.ts';
import { PARTS } from '../state/ref.ts';
import { type Alteration, type PartValue, takenIds } from '../tools/tool.ts';

/**
 * A chip that was brought in, put on the sheet as one edit: beside what is there, or in place of all of it.
 * Names that are taken get a number; a layer of the same name and depth is the same layer.
 */
export function broughtIn(chip: Chip, brought: Chip, file: string, inPlace: boolean): Alteration {
  const taken = inPlace ? new Set<string>() : takenIds(chip);
  const free = (id: string): string => {
    let name = id;
    for (let k = 2; taken.has(name); k += 1) name = `${id} (${k})`;
    taken.add(name);
    return name;
  };
  const layers = new Map<string, Layer>();
  const added: Layer[] = [];
  for (const layer of brought.layers) {
    const same = chip.layers.find(
      ({ id, depth, profile }) =>
        id === layer.id && depth === layer.depth && profile.kind === layer.profile.kind,
    );
    let { id } = layer;
    for (let k = 2; !same && chip.layers.some((other) => other.id === id); k += 1) id = `${layer.id} (${k})`;
    const own = same ?? { ...layer, id };
    layers.set(layer.id, own);
    if (!same) added.push(own);
  }
  const layerOf = (id: string): string => layers.get(id)!.id;
  const put: PartValue[] = [
    ...brought.channels.map((value) => ({
      kind: 'channel' as const,
      value: { ...value, id: free(value.id), layer: layerOf(value.layer) },
    })),
    ...brought.chambers.map((value) => ({
      kind: 'chamber' as const,
      value: { ...value, id: free(value.id), layer: layerOf(value.layer) },
    })),
    ...brought.ports.map((value) => ({
      kind: 'port' as const,
      value: { ...value, id: free(value.id), layer: layerOf(value.layer) },
    })),
  ];
  const label = `bring in ${file}`;
  if (!inPlace) {
    const outline = {
      width: Math.max(chip.outline.width, brought.outline.width),
      height: Math.max(chip.outline.height, brought.outline.height),
    };
    return { label, put, set: { layers: [...chip.layers, ...added], outline } };
  }
  const drop = PARTS.flatMap((kind) => listOf(chip, kind).map(({ id }) => `${kind}:${id}` as const));
  return { label, put, drop, set: { layers: [...layers.values()], outline: brought.outline } };
}
