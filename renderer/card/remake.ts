import type { Chip } from '../../solver/chip/chip.ts';
import { commonHole, family, type Made } from '../makers/made.ts';
import { partsOfMade } from '../tools/maker-tools.ts';
import type { Alteration, PartValue } from '../tools/tool.ts';

/** A family made anew: parts that stay keep their drives, tubing and targets; those left over go. */
export function remade(chip: Chip, name: string, made: Made, label: string): Alteration {
  const there = family(chip, name);
  const ports = new Map(there.ports.map((port) => [port.id, port]));
  // a hole that was given to one port alone stays its own
  const common = commonHole(there.ports);
  const put = partsOfMade(made).map((part): PartValue => {
    const old = part.kind === 'port' ? ports.get(part.value.id) : undefined;
    if (part.kind !== 'port' || !old) return part;
    return {
      kind: 'port',
      value: {
        ...old,
        at: part.value.at,
        layer: part.value.layer,
        ...(old.diameter === common && { diameter: part.value.diameter }),
      },
    };
  });
  const kept = new Set(put.map((part) => `${part.kind}:${part.value.id}`));
  const drop = partsOfMade(there)
    .map((part) => `${part.kind}:${part.value.id}`)
    .filter((ref) => !kept.has(ref));
  const fresh = made.targets.filter(
    (target) => !there.targets.some((old) => 'port' in old && 'port' in target && old.port === target.port),
  );
  const others = chip.targets.filter((target) => !there.targets.includes(target));
  // equal shares are the tree's own; with another number of leaves they are shared out anew
  const own = drop.length + fresh.length > 0 ? made.targets : there.targets;
  return {
    label,
    put,
    drop,
    ...(made.targets.length + there.targets.length > 0 && { set: { targets: [...others, ...own] } }),
  };
}
