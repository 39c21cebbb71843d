import type { Chip, Limit } from '../chip/chip.ts';
import type { Element } from '../exposure/flow-net.ts';

/** Whether a limit holds in a part of the chip; routes are told apart elsewhere. */
export function covers(limit: Limit, chip: Chip): (element: Element) => boolean {
  const { where } = limit;
  if (typeof where !== 'string') return () => true;
  // Layers have ids of their own kind; a layer counts as one only where nothing else bears its name.
  const other = [chip.channels, chip.chambers, chip.vias, chip.ports].some((list) =>
    list.some(({ id }) => id === where),
  );
  return other ? ({ ids }) => ids.has(where) : ({ layer }) => layer === where;
}

/** The two ports of a limit that holds on one route; null where it holds on all. */
export const routeOf = ({ where }: Limit): readonly [string, string] | null =>
  typeof where === 'object' ? where : null;
