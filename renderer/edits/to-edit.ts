import type { Chip, Limit, Target } from '../../solver/chip/chip.ts';
import type { Change, ChipEdit } from '../../solver/chip/edit.ts';
import { PARTS, readRef } from '../state/ref.ts';
import type { Alteration } from '../tools/tool.ts';
import { LISTS, listOf } from './parts.ts';

/**
 * An alteration as the edit that the project keeps: parts in place of those that bear their ids, new ones
 * last; what spoke of a dropped part goes with it.
 */
export function toEdit(chip: Chip, alteration: Alteration): ChipEdit {
  const changes: Change[] = [];
  const gone = new Set<string>();
  for (const ref of alteration.drop ?? []) gone.add(readRef(ref).id);
  const set = { ...alteration.set };
  if (gone.size > 0) {
    const targets = (set.targets ?? chip.targets).filter((target) => !gone.has(idOf(target)));
    const limits = (set.limits ?? chip.limits).filter((limit) => !namesAny(limit, gone));
    if (targets.length < (set.targets ?? chip.targets).length) set.targets = targets;
    if (limits.length < (set.limits ?? chip.limits).length) set.limits = limits;
    if (set.targets) changes.push({ kind: 'set', key: 'targets', value: set.targets });
    if (set.limits) changes.push({ kind: 'set', key: 'limits', value: set.limits });
    delete set.targets;
    delete set.limits;
    for (const ref of alteration.drop ?? []) {
      const { kind, id } = readRef(ref);
      const list = LISTS[kind as keyof typeof LISTS];
      if (list) changes.push({ kind: 'remove', list, id });
    }
  }
  if (set.layers) changes.push(...layerChanges(chip, set.layers));
  const known = new Map(PARTS.map((kind) => [kind, new Set(listOf(chip, kind).map((part) => part.id))]));
  const added = new Map<string, number>();
  for (const { kind, value } of alteration.put ?? []) {
    const list = LISTS[kind];
    const there = known.get(kind)!.has(value.id) && !gone.has(value.id);
    const more = added.get(kind) ?? 0;
    const index = listOf(chip, kind).filter((part) => !gone.has(part.id)).length + more;
    if (!there) added.set(kind, more + 1);
    changes.push(
      (there
        ? { kind: 'put', list, id: value.id, part: value }
        : { kind: 'insert', list, index, part: value }) as Change,
    );
  }
  for (const key of [
    'name',
    'note',
    'lengthUnit',
    'outline',
    'fluid',
    'targets',
    'limits',
    'process',
    'accepted',
    'rating',
    'assay',
  ] as const)
    if (set[key] !== undefined) changes.push({ kind: 'set', key, value: set[key] } as Change);
  for (const { ref, to } of alteration.rename ?? []) {
    const { kind, id } = readRef(ref);
    const list = kind === 'layer' ? 'layers' : LISTS[kind as keyof typeof LISTS];
    if (list && id !== to) changes.push({ kind: 'rename', list, id, to });
  }
  return { label: alteration.label.slice(0, 200), changes };
}

const idOf = (target: Target): string => ('port' in target ? target.port : target.channel);

const namesAny = ({ where }: Limit, gone: ReadonlySet<string>): boolean =>
  typeof where === 'string' ? gone.has(where) : (where?.some((id) => gone.has(id)) ?? false);

function layerChanges(chip: Chip, layers: Chip['layers']): Change[] {
  const changes: Change[] = [];
  const wanted = new Set(layers.map((layer) => layer.id));
  for (const { id } of chip.layers) if (!wanted.has(id)) changes.push({ kind: 'remove', list: 'layers', id });
  let index = chip.layers.filter((layer) => wanted.has(layer.id)).length;
  for (const layer of layers) {
    const old = chip.layers.find((other) => other.id === layer.id);
    if (old === layer) continue;
    if (old) changes.push({ kind: 'put', list: 'layers', id: layer.id, part: layer });
    else {
      changes.push({ kind: 'insert', list: 'layers', index, part: layer });
      index += 1;
    }
  }
  return changes;
}
