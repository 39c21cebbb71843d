import { BOUNDS } from './bounds.ts';
import type { Chamber, Channel, Chip, KeepOut, Layer, Port, Via } from './chip.ts';
import { checkAccepted, checkProcess } from './schema-check-making.ts';
import {
  checkChamber,
  checkChannel,
  checkKeepOut,
  checkLayer,
  checkOnLayer,
  checkPort,
  checkVia,
} from './schema-check-parts.ts';
import { checkAssay, checkRating } from './schema-check-running.ts';
import { checkFluid, checkLimit, checkTarget } from './schema-check-terms.ts';
import { at, Fault, type Path, quoted } from './schema-fault.ts';
import { nearest } from './schema-nearest.ts';

/** The lists of a chip whose entries bear ids. */
export const LISTS = ['layers', 'channels', 'chambers', 'vias', 'ports', 'keepOuts'] as const;
export type ListName = (typeof LISTS)[number];
export interface PartOf {
  readonly layers: Layer;
  readonly channels: Channel;
  readonly chambers: Chamber;
  readonly vias: Via;
  readonly ports: Port;
  readonly keepOuts: KeepOut;
}

/** A list of a chip, empty where the chip has none. */
export function partsOf<L extends ListName>(chip: Chip, list: L): readonly PartOf[L][] {
  return (chip[list] ?? []) as readonly PartOf[L][];
}

/** Cross-sections that have a shape only together with a width, so that no chamber can have them. */
const NEEDS_WIDTH: ReadonlySet<string> = new Set(['circle', 'ellipse', 'triangle', 'polygon']);

function checkCounts(chip: Chip): void {
  for (const name of [...LISTS, 'targets', 'limits'] as const) {
    const count = chip[name]?.length ?? 0;
    if (count > BOUNDS[name]) {
      throw new Fault(
        'too-many',
        `has ${count.toLocaleString('en')} entries; at most ${BOUNDS[name].toLocaleString('en')} are kept.`,
        'Split the chip.',
        [name],
      );
    }
  }
  let points = 0;
  for (const { path } of chip.channels) points += path.length;
  for (const { outline } of chip.chambers) points += outline.length;
  for (const { outline } of chip.keepOuts ?? []) points += outline.length;
  if (points > BOUNDS.points) {
    throw new Fault(
      'too-many',
      `has ${points.toLocaleString('en')} points in its paths and outlines; at most ${BOUNDS.points.toLocaleString('en')} are kept.`,
      'Draw with fewer points; a round bend takes one vertex and a bendRadius.',
    );
  }
}

/** Entries by id; throws where one is borne twice. Layers have their own names, all else shares one set. */
function byId(chip: Chip): { layers: Map<string, Layer>; others: Map<string, ListName> } {
  const layers = new Map<string, Layer>();
  const others = new Map<string, ListName>();
  const twice = (list: ListName, i: number, first: ListName, id: string): never => {
    const j = partsOf(chip, first).findIndex((entry) => entry.id === id);
    throw new Fault(
      'duplicate',
      `${quoted(id)} is borne by ${first}[${j}] too.`,
      'Give each channel, chamber, via, port and keep-out an id of its own, and each layer.',
      [list, i, 'id'],
    );
  };
  chip.layers.forEach((layer, i) => {
    if (layers.has(layer.id)) twice('layers', i, 'layers', layer.id);
    layers.set(layer.id, layer);
  });
  for (const list of LISTS) {
    if (list === 'layers') continue;
    const entries: readonly { readonly id: string }[] = partsOf(chip, list);
    for (let i = 0; i < entries.length; i += 1) {
      const { id } = entries[i]!;
      const first = others.get(id);
      if (first !== undefined) twice(list, i, first, id);
      others.set(id, list);
    }
  }
  return { layers, others };
}

const ONE: Readonly<Record<ListName, string>> = {
  layers: 'layer',
  channels: 'channel',
  chambers: 'chamber',
  vias: 'via',
  ports: 'port',
  keepOuts: 'keep-out',
};

function unknownId(id: string, what: string, known: Iterable<string>, path: Path): Fault {
  const close = nearest(id, known);
  return new Fault(
    'reference',
    `names ${quoted(id)}, but there is no such ${what}.`,
    close === undefined ? `Add the ${what} first.` : `Did you mean ${quoted(close)}? Or add the ${what}.`,
    path,
  );
}

function each<T>(
  list: ListName | 'targets' | 'limits',
  entries: readonly T[],
  check: (entry: T) => void,
): void {
  let i = 0;
  try {
    for (; i < entries.length; i += 1) check(entries[i]!);
  } catch (error) {
    if (error instanceof Fault) error.path.unshift(list, i);
    throw error;
  }
}

/** Targets and limits name what is there. */
function checkTerms(
  chip: Chip,
  layers: ReadonlyMap<string, Layer>,
  others: ReadonlyMap<string, ListName>,
): void {
  const named = (id: string, list: 'ports' | 'channels', ...path: Path): void => {
    if (others.get(id) === list) return;
    throw unknownId(
      id,
      ONE[list],
      chip[list].map((entry) => entry.id),
      path,
    );
  };
  each('targets', chip.targets, (target) => {
    if ('port' in target) named(target.port, 'ports', 'port');
    else named(target.channel, 'channels', 'channel');
    checkTarget(target);
  });
  each('limits', chip.limits, (limit) => {
    const { where } = limit;
    if (typeof where === 'string') {
      const list = others.get(where);
      if ((list === undefined || list === 'keepOuts') && !layers.has(where)) {
        const drawn = [...others].flatMap(([id, of]) => (of === 'keepOuts' ? [] : [id]));
        const known = [...drawn, ...layers.keys()];
        throw unknownId(where, 'channel, chamber, via, port or layer', known, ['where']);
      }
    } else if (where) {
      for (const [j, id] of where.entries()) named(id, 'ports', 'where', j);
    }
    checkLimit(limit);
  });
}

type LayerAt = (id: string, ...path: Path) => Layer;

/** What must hold of each part by itself and on its layer; `fresh` is false where it is known to be sound itself. */
const CHECKS: { readonly [L in ListName]: (part: PartOf[L], layerAt: LayerAt, fresh: boolean) => void } = {
  layers: (layer, _, fresh) => {
    if (fresh) checkLayer(layer);
  },
  channels: (channel, layerAt, fresh) => {
    const layer = layerAt(channel.layer, 'layer');
    if (fresh) checkChannel(channel);
    checkOnLayer(channel, layer);
  },
  chambers: (chamber, layerAt, fresh) => {
    const layer = layerAt(chamber.layer, 'layer');
    if (fresh) checkChamber(chamber);
    if (!NEEDS_WIDTH.has(layer.profile.kind)) return;
    throw new Fault(
      'profile',
      `lies on layer ${quoted(layer.id)}, whose cross-section (${layer.profile.kind}) has no shape without a channel's width.`,
      'Put the chamber on a layer of profile "rectangle", "trapezoid" or "rounded".',
    );
  },
  vias: (via, layerAt, fresh) => {
    for (const [j, id] of via.layers.entries()) layerAt(id, 'layers', j);
    if (fresh) checkVia(via);
  },
  ports: (port, layerAt, fresh) => {
    layerAt(port.layer, 'layer');
    if (fresh) checkPort(port);
  },
  keepOuts: (keepOut, layerAt, fresh) => {
    if (keepOut.layer !== undefined) layerAt(keepOut.layer, 'layer');
    if (fresh) checkKeepOut(keepOut);
  },
};

function finder(layers: ReadonlyMap<string, Layer>): LayerAt {
  return (id, ...path) => {
    const layer = layers.get(id);
    if (layer === undefined) throw unknownId(id, 'layer', layers.keys(), path);
    return layer;
  };
}

/**
 * Throws a `Fault` at the first thing that makes a chip no chip: everything that needs no geometry.
 * `fresh` says which parts to look at by themselves, where the others are known to be sound; ids and
 * references are always gone through whole.
 */
export function checkChip(chip: Chip, fresh: (part: object) => boolean = () => true): void {
  checkCounts(chip);
  for (const key of ['width', 'height'] as const) {
    if (chip.outline[key] > 0) continue;
    throw new Fault('range', 'must be above zero.', 'Give the size of the chip.', ['outline', key]);
  }
  if (fresh(chip.fluid)) at(['fluid'], () => checkFluid(chip.fluid));
  const { process, accepted, rating, assay } = chip;
  if (process && fresh(process)) at(['process'], () => checkProcess(process));
  if (accepted && fresh(accepted)) at(['accepted'], () => checkAccepted(accepted));
  if (rating && fresh(rating)) at(['rating'], () => checkRating(rating));
  if (assay && fresh(assay)) at(['assay'], () => checkAssay(assay));
  const { layers, others } = byId(chip);
  const layerAt = finder(layers);
  const all = <L extends ListName>(list: L): void => {
    each(list, partsOf(chip, list), (part) => CHECKS[list](part, layerAt, fresh(part)));
  };
  LISTS.forEach(all);
  checkTerms(chip, layers, others);
}

/** The same for an edit that put parts in the place of others of the same ids, and changed nothing else. */
export function checkReplaced(chip: Chip, replaced: ReadonlyMap<ListName, readonly number[]>): void {
  checkCounts(chip);
  const layerAt = finder(new Map(chip.layers.map((layer) => [layer.id, layer])));
  const some = <L extends ListName>(list: L, indices: readonly number[]): void => {
    const parts = partsOf(chip, list);
    for (const index of indices) at([list, index], () => CHECKS[list](parts[index]!, layerAt, true));
  };
  for (const [list, indices] of replaced) some(list, indices);
}
