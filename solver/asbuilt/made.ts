import type { Channel, Chip, Layer } from '../chip/chip.ts';
import { applyEdit, type Change, type ChipEdit } from '../chip/edit.ts';
import { metres, NM_PER_M } from '../chip/units.ts';
import { Problem } from '../problem/problem.ts';
import { knownSlopes } from '../spread/slopes.ts';
import { type Average, averaged, evenly, fitLine, fitPlane } from './average.ts';
import type { Measured } from './measured.ts';
import { centroid, lengthAlong, nearestAlong } from './place.ts';

/** The chip as it was made, beside the drawn one. */
export interface Made {
  readonly chip: Chip;
  /** From the drawn chip to the made one. */
  readonly edit: ChipEdit;
  /** What was done with the measurements, in sentences. */
  readonly says: readonly string[];
  /** Channels whose width was measured, and those that count as drawn. */
  readonly measured: number;
  readonly assumed: number;
}

const nm = (m: number): number => Math.round(m * NM_PER_M);

/**
 * The made chip: drawn parts with measured sizes in their place, and with what the measurements leave open as their
 * tolerances. A layer's depth is the mean of what was measured on it, or the plane through it where at least three
 * places are given that lie in no line; each channel then has its depth at its middle. A channel's several depths
 * count as the one with the same resistance; its several widths as a straight line along it. What was not measured
 * stays as drawn, with its tolerance. Throws `Problem` where no chip can be made of them.
 */
export function madeChip(drawn: Chip, measured: readonly Measured[]): Made {
  const says: string[] = [];
  const groups = new Map<string, Measured[]>();
  for (const one of measured) {
    const key = `${one.of} ${one.what} ${one.id}`;
    groups.set(key, [...(groups.get(key) ?? []), one]);
  }
  const of = (kind: string, id: string): readonly Measured[] => groups.get(`${kind} ${id}`) ?? [];
  const layers = new Map(
    drawn.layers.map((layer) => [
      layer.id,
      madeLayer(drawn, layer, of('layer depth', layer.id), of('layer bias', layer.id), says),
    ]),
  );
  let count = 0;
  const channels = drawn.channels.map((channel) => {
    const widths = of('channel width', channel.id);
    if (widths.length > 0) count += 1;
    return madeChannel(channel, layers.get(channel.layer)!, widths, of('channel depth', channel.id));
  });
  // Where only channels were measured, the junctions take the mean of their layer's channels.
  const whole = drawn.layers.map((layer) => junctionDepth(layers.get(layer.id)!, channels));
  const changes: Change[] = [
    ...whole.flatMap((part, i): Change[] =>
      part === drawn.layers[i] ? [] : [{ kind: 'put', list: 'layers', id: part.id, part }],
    ),
    ...channels.flatMap((part, i): Change[] =>
      part === drawn.channels[i] ? [] : [{ kind: 'put', list: 'channels', id: part.id, part }],
    ),
  ];
  const edit: ChipEdit = { label: 'take the chip as it was made', changes };
  const chip = { ...applyEdit(drawn, edit), name: `${drawn.name}, as built`.slice(0, 200) };
  const silent = measured.filter(({ uncertainty }) => uncertainty === null).length;
  if (silent > 0) {
    says.push(
      `${silent === measured.length ? 'No measurement says' : silent === 1 ? 'One measurement does not say' : `${silent} measurements do not say`} how uncertain it is, and counts as exact.`,
    );
  }
  return { chip, edit, says, measured: count, assumed: drawn.channels.length - count };
}

interface MadeLayer {
  readonly layer: Layer;
  readonly drawn: Layer;
  /** Depth at a place, nm, where the layer lies at a tilt. */
  readonly depthAt: ((at: readonly [number, number]) => number) | null;
  readonly measured: boolean;
  /** nm by which widths came out larger. */
  readonly bias: number;
}

function madeLayer(
  chip: Chip,
  drawn: Layer,
  depths: readonly Measured[],
  biases: readonly Measured[],
  says: string[],
): MadeLayer {
  let layer = drawn;
  let depthAt: MadeLayer['depthAt'] = null;
  if (depths.length > 0) {
    const plane = depths.every(({ at }) => at) ? fitPlane(depths) : null;
    const middle = centroidOf(chip, drawn.id);
    const average = plane ? { value: plane.at(middle), uncertainty: plane.uncertainty } : averaged(depths);
    if (plane) {
      depthAt = (at) => plane.at(at) * NM_PER_M;
      says.push(
        `The depth of ${drawn.id} is taken from the plane through ${depths.length} places: it changes by ${(Math.abs(plane.tilt(chip)) * 1e6).toPrecision(2)} µm over the chip.`,
      );
    }
    if (!(average.value > 0)) throw unmade(drawn.id, 'depth', depths[0].row);
    layer = {
      ...layer,
      depth: nm(average.value),
      tolerance: { ...layer.tolerance, depth: lengthOf(average) },
    };
  }
  let bias = 0;
  if (biases.length > 0) {
    const average = averaged(biases);
    bias = average.value * NM_PER_M;
    // What was measured is the part that all have alike; what each has by itself is left of the layer's tolerance.
    const { width, common = 0 } = drawn.tolerance ?? {};
    const { width: _, common: _common, ...rest } = layer.tolerance ?? {};
    const own = width && 'length' in width ? width.length * (1 - common) : null;
    const off = nm(average.uncertainty);
    layer = {
      ...layer,
      tolerance:
        own !== null
          ? {
              ...rest,
              width: { length: Math.round(own + off) },
              ...(own + off > 0 && { common: off / (own + off) }),
            }
          : width
            ? { ...rest, width: { share: ('share' in width ? width.share : 0) * (1 - common) } }
            : { ...rest, width: { length: off }, common: 1 },
    };
  }
  return { layer, drawn, depthAt, measured: depths.length > 0, bias };
}

function madeChannel(
  drawn: Channel,
  { layer, drawn: drawnLayer, depthAt, bias }: MadeLayer,
  widths: readonly Measured[],
  depths: readonly Measured[],
): Channel {
  let channel = drawn;
  const along = ({ along: said, at, row }: Measured): number | null =>
    said !== null ? said * NM_PER_M : at && nearestAlong(drawn, [at[0] * NM_PER_M, at[1] * NM_PER_M], row);
  if (widths.length > 0) {
    const { ends, uncertainty } = madeWidth(drawn, widths, widths.map(along));
    channel = {
      ...channel,
      width: ends,
      tolerance: { ...channel.tolerance, width: lengthOf({ uncertainty }) },
    };
  } else if (bias !== 0) {
    const [first, last] = drawn.width.map((w) => Math.round(w + bias));
    if (!(first > 0 && last > 0)) throw unmade(drawn.id, 'width', null);
    channel = { ...channel, width: [first, last] };
  }
  if (depths.length > 0) {
    const average = evenly(
      depths.map((one, i) => ({ ...one, s: along(depths[i]) })),
      lengthAlong(drawn),
      // As the resistance goes with the depth.
      knownSlopes(
        drawnLayer.profile,
        [metres(drawn.width[0]), metres(drawn.width[1])],
        metres(layer.depth),
        drawn.id,
      ).resistance.depth,
    );
    channel = {
      ...channel,
      depth: nm(average.value),
      tolerance: { ...channel.tolerance, depth: lengthOf(average) },
    };
  } else if (depthAt) {
    const depth = Math.round(depthAt(centroid(drawn.path).map((v) => metres(v)) as [number, number]));
    if (!(depth > 0)) throw unmade(drawn.id, 'depth', null);
    if (depth !== layer.depth) channel = { ...channel, depth };
  }
  if (drawnLayer.profile.kind === 'circle') channel = roundBore(channel, drawn, layer);
  return channel;
}

/** A bore has one size: its width where that was measured, else its depth. */
function roundBore(channel: Channel, drawn: Channel, layer: Layer): Channel {
  const bore = channel.width === drawn.width ? (channel.depth ?? layer.depth) : channel.width[0];
  const { depth: _, ...rest } = channel;
  if (bore === drawn.width[0] && bore === layer.depth && channel === drawn) return drawn;
  return { ...rest, width: [bore, bore], ...(bore !== layer.depth && { depth: bore }) };
}

/** Widths at both ends, nm: along a straight line where the places span half the channel, else the drawn ones moved. */
function madeWidth(
  drawn: Channel,
  widths: readonly Measured[],
  along: readonly (number | null)[],
): { readonly ends: readonly [number, number]; readonly uncertainty: number } {
  const length = lengthAlong(drawn);
  const [w0, w1] = drawn.width;
  const known = widths.flatMap((one, i) => (along[i] === null ? [] : [{ ...one, s: along[i]! / length }]));
  const span = Math.max(...known.map(({ s }) => s)) - Math.min(...known.map(({ s }) => s));
  if (known.length === widths.length && known.length > 1 && span >= 0.5) {
    const line = fitLine(known);
    const ends = [nm(line.at(0)), nm(line.at(1))] as const;
    if (!(ends[0] > 0 && ends[1] > 0)) throw unmade(drawn.id, 'width', widths[0].row);
    return { ends, uncertainty: line.uncertainty };
  }
  if (w0 !== w1 && known.length < widths.length) {
    throw new Problem(
      'missing',
      `Channel "${drawn.id}" is a taper, and it is not said where its width was measured.`,
      `row ${widths[along.indexOf(null)].row}, column along`,
      'Give the distance along the channel, or the place.',
    );
  }
  // Each measurement against what is drawn there.
  const off = averaged(
    widths.map((one, i) => ({
      ...one,
      value: one.value - metres(w0 + (w1 - w0) * Math.min(1, (along[i] ?? 0) / length)),
    })),
  );
  const ends = [Math.round(w0 + off.value * NM_PER_M), Math.round(w1 + off.value * NM_PER_M)] as const;
  if (!(ends[0] > 0 && ends[1] > 0)) throw unmade(drawn.id, 'width', widths[0].row);
  return { ends, uncertainty: off.uncertainty };
}

function junctionDepth({ layer, drawn, measured }: MadeLayer, channels: readonly Channel[]): Layer {
  if (measured) return layer;
  const own = channels.filter((channel) => channel.layer === drawn.id && channel.depth !== undefined);
  if (own.length === 0) return layer;
  return { ...layer, depth: Math.round(own.reduce((sum, { depth }) => sum + depth!, 0) / own.length) };
}

function centroidOf(chip: Chip, layer: string): readonly [number, number] {
  const on = chip.channels.filter((channel) => channel.layer === layer);
  const middles = on.map(({ path }) => centroid(path));
  const mean = (axis: 0 | 1): number =>
    metres(middles.reduce((sum, at) => sum + at[axis], 0) / middles.length);
  return middles.length > 0
    ? [mean(0), mean(1)]
    : [metres(chip.outline.width / 2), metres(chip.outline.height / 2)];
}

const lengthOf = ({ uncertainty }: Pick<Average, 'uncertainty'>): { readonly length: number } => ({
  length: nm(uncertainty),
});

const unmade = (id: string, what: string, row: number | null): Problem =>
  new Problem(
    'range',
    `With these measurements ${id} would have no ${what}.`,
    row === null ? id : `row ${row}, column value`,
    'Check numbers and units.',
  );
