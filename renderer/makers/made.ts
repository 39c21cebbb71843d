import type { Chamber, Channel, Chip, Nm, Point, Port, Target } from '../../solver/chip/chip.ts';

/** What a maker puts into a chip. */
export interface Made {
  readonly channels: readonly Channel[];
  readonly chambers: readonly Chamber[];
  readonly ports: readonly Port[];
  readonly targets: readonly Target[];
}

export const NOTHING: Made = { channels: [], chambers: [], ports: [], targets: [] };

/** What came of making: parts, or one sentence that says why it cannot be made and what would help. */
export type Making = { readonly made: Made } | { readonly refusal: string };

/**
 * A maker keeps nothing beside the drawing: what it made is recognised by its name and shape, and
 * its wishes are read back from there. Once someone has reshaped a part by hand it is no longer the
 * maker's, and says so by not being recognised.
 */
export interface Maker<W> {
  readonly kind: MakerKind;
  make(name: string, wishes: W): Making;
  /** The wishes that make exactly what the chip holds under this name, or null. */
  read(chip: Chip, name: string): W | null;
}

export type MakerKind = 'serpentine' | 'split tree' | 'gradient tree' | 'row of chambers' | 'posts';

/** "tree 1" of "tree 1-2-3"; the whole where nothing is numbered behind it. */
export const familyOf = (id: string): string => id.replace(/(-[0-9a-z]+)+$/, '');

/** Parts of a chip under one name. */
export function family(chip: Chip, name: string): Made {
  const of = (id: string): boolean => id === name || id.startsWith(`${name}-`);
  return {
    channels: chip.channels.filter((part) => of(part.id)),
    chambers: chip.chambers.filter((part) => of(part.id)),
    ports: chip.ports.filter((part) => of(part.id)),
    targets: chip.targets.filter((target) => of('port' in target ? target.port : target.channel)),
  };
}

/** nm: the diameter that most of the holes have, the first such; null where there are none. One that differs is the user's own. */
export function commonHole(ports: readonly Port[]): Nm | null {
  const count = new Map<Nm, number>();
  for (const { diameter } of ports) count.set(diameter, (count.get(diameter) ?? 0) + 1);
  const most = Math.max(...count.values());
  return [...count].find(([, times]) => times === most)?.[0] ?? null;
}

/** nm: wishes are read back from places that are whole nanometres, which leaves a few to rounding. */
const ROUNDING = 8;

const near = (a: readonly Point[], b: readonly Point[]): boolean =>
  a.length === b.length &&
  a.every((p, i) => Math.abs(p[0] - b[i]![0]) <= ROUNDING && Math.abs(p[1] - b[i]![1]) <= ROUNDING);

/** Parts by their ids: those that came with a later wish stand last in the chip. */
const byId = <P extends { readonly id: string }>(parts: readonly P[]): ReadonlyMap<string, P> =>
  new Map(parts.map((part) => [part.id, part]));

/** Whether what is there has the shape of what would be made: drives, targets and tubing are the user's. */
export function sameShape(there: Made, made: Made): boolean {
  if (there.channels.length !== made.channels.length || there.chambers.length !== made.chambers.length)
    return false;
  const channels = byId(there.channels);
  const chambers = byId(there.chambers);
  return (
    made.channels.every((one) => {
      const other = channels.get(one.id);
      return (
        other !== undefined &&
        one.layer === other.layer &&
        one.bendRadius === other.bendRadius &&
        one.width.every((width, end) => Math.abs(width - other.width[end]!) <= ROUNDING) &&
        near(one.path, other.path)
      );
    }) &&
    made.chambers.every((one) => {
      const other = chambers.get(one.id);
      return other !== undefined && one.layer === other.layer && near(one.outline, other.outline);
    })
  );
}
