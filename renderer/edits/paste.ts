import type { Chip, Layer } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { add, type Xy } from '../geometry/vector.ts';
import type { Ref } from '../state/ref.ts';
import { type PartValue, takenIds } from '../tools/tool.ts';
import { counted } from '../words/figure.ts';
import { movedBy, nameParts, refOfPart } from './parts.ts';
import { copyId, renamed, type Shaping } from './shape.ts';

export interface Pasting {
  readonly alteration: Exclude<Shaping, string>;
  readonly select: readonly Ref[];
}

/**
 * Parts of a description put into a chip, moved by `by`: ids made fresh, layers that are missing added.
 * Throws `Problem` where the text is no description.
 */
export function paste(chip: Chip, text: string, by: Xy): Pasting | string {
  const clip = readDescription(text, 'clipboard');
  const parts: PartValue[] = [
    ...clip.channels.map((value) => ({ kind: 'channel', value }) as const),
    ...clip.chambers.map((value) => ({ kind: 'chamber', value }) as const),
    ...clip.vias.map((value) => ({ kind: 'via', value }) as const),
    ...clip.ports.map((value) => ({ kind: 'port', value }) as const),
    ...(clip.keepOuts ?? []).map((value) => ({ kind: 'keep-out', value }) as const),
  ];
  if (parts.length === 0) return 'The clipboard holds a chip with nothing on it.';
  const taken = takenIds(chip);
  const names = new Map<string, string>();
  const put = parts.map((part) => {
    const { id } = part.value;
    const fresh = taken.has(id) ? copyId(id, taken) : id;
    taken.add(fresh);
    names.set(id, fresh);
    return renamed(
      movedBy(part, (p) => add(p, by)),
      fresh,
    );
  });
  const missing: Layer[] = clip.layers.filter(
    (layer) =>
      !chip.layers.some((other) => other.id === layer.id) && parts.some((part) => uses(part, layer.id)),
  );
  const targets = clip.targets.map((target) =>
    'port' in target
      ? { ...target, port: names.get(target.port) ?? target.port }
      : { ...target, channel: names.get(target.channel) ?? target.channel },
  );
  return {
    alteration: {
      label: `paste ${nameParts(put, counted)}`,
      put,
      ...((missing.length > 0 || targets.length > 0) && {
        set: {
          ...(missing.length > 0 && { layers: [...chip.layers, ...missing] }),
          ...(targets.length > 0 && { targets: [...chip.targets, ...targets] }),
        },
      }),
    },
    select: put.map(refOfPart),
  };
}

const uses = (part: PartValue, layer: string): boolean =>
  part.kind === 'via' ? part.value.layers.includes(layer) : part.value.layer === layer;
