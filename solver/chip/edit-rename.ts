import type { Chip, Limit, Target } from './chip.ts';
import type { Acceptance } from './making.ts';
import type { ListName } from './schema-check.ts';

/** `entries` with `change` made of each; the same list where it left all as they were. */
function mapped<T>(entries: readonly T[], change: (entry: T) => T): readonly T[] {
  let next: T[] | null = null;
  entries.forEach((entry, i) => {
    const other = change(entry);
    if (other === entry) return;
    next ??= [...entries];
    next[i] = other;
  });
  return next ?? entries;
}

/** Whether a channel, chamber, via or port bears an id; a limit that names it is then one of that part, not of a layer. */
export const borne = (chip: Chip, id: string): boolean =>
  [chip.channels, chip.chambers, chip.vias, chip.ports].some((parts) => parts.some((part) => part.id === id));

function renamedLayer(chip: Chip, from: string, to: string): Chip {
  const onLayer = <T extends { readonly layer: string }>(part: T): T =>
    part.layer === from ? { ...part, layer: to } : part;
  return {
    ...chip,
    channels: mapped(chip.channels, onLayer),
    chambers: mapped(chip.chambers, onLayer),
    ports: mapped(chip.ports, onLayer),
    vias: mapped(chip.vias, (via) => {
      const [a, b] = via.layers;
      if (a !== from && b !== from) return via;
      return { ...via, layers: [a === from ? to : a, b === from ? to : b] };
    }),
    ...(chip.keepOuts && {
      keepOuts: mapped(chip.keepOuts, (part) => (part.layer === from ? { ...part, layer: to } : part)),
    }),
    limits: mapped(chip.limits, (limit) =>
      limit.where === from && !borne(chip, from) ? { ...limit, where: to } : limit,
    ),
  };
}

function renamedTarget(target: Target, list: ListName, from: string, to: string): Target {
  if (list === 'ports' && 'port' in target && target.port === from) return { ...target, port: to };
  if (list === 'channels' && 'channel' in target && target.channel === from)
    return { ...target, channel: to };
  return target;
}

function renamedLimit(limit: Limit, list: ListName, from: string, to: string): Limit {
  const { where } = limit;
  if (typeof where === 'string') return where === from ? { ...limit, where: to } : limit;
  if (list !== 'ports' || where === undefined || !where.includes(from)) return limit;
  const [a, b] = where;
  return { ...limit, where: [a === from ? to : a, b === from ? to : b] };
}

/** Findings name channels and their pieces plainly, all else with its kind before it. */
function renamedAcceptance(entry: Acceptance, list: ListName, from: string, to: string): Acceptance {
  const { where } = entry;
  const kind = list.slice(0, -1);
  if (where === `${kind}:${from}`) return { ...entry, where: `${kind}:${to}` };
  if (list !== 'channels') return entry;
  const piece = /#\d+$/.exec(where)?.[0] ?? '';
  return where === from + piece ? { ...entry, where: to + piece } : entry;
}

/** The chip with every reference to `from` of `list` made one to `to`; the same chip where there is none. */
export function renamed(chip: Chip, list: ListName, from: string, to: string): Chip {
  const drawn =
    list === 'layers'
      ? renamedLayer(chip, from, to)
      : {
          ...chip,
          targets: mapped(chip.targets, (target) => renamedTarget(target, list, from, to)),
          limits: mapped(chip.limits, (limit) => renamedLimit(limit, list, from, to)),
        };
  const next: Chip = chip.accepted
    ? { ...drawn, accepted: mapped(chip.accepted, (entry) => renamedAcceptance(entry, list, from, to)) }
    : drawn;
  const same = (Object.keys(next) as (keyof Chip)[]).every((key) => next[key] === chip[key]);
  return same ? chip : next;
}
