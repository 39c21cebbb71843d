import type { Channel, Chip, Layer, Tolerance } from '../chip/chip.ts';

/** One thing that making gets wrong by itself, independent of all others. */
export interface Source {
  readonly what: 'depth' | 'width';
  /** Whether `id` is a layer, on all of which it is off alike, or one channel. */
  readonly of: 'layer' | 'channel';
  readonly id: string;
}

/** How far one source, its tolerance used up, moves a size: by a share of it, or by a length in metres. */
export type Reach = { readonly source: number } & ({ readonly share: number } | { readonly length: number });

export interface ChannelReach {
  readonly depth: readonly Reach[];
  readonly width: readonly Reach[];
}

/** The sources of a chip, and which of them reach which channel and which layer's junctions. */
export interface Sources {
  readonly all: readonly Source[];
  /** In the chip's order. */
  readonly channels: readonly ChannelReach[];
  /** Depth of each layer, in the chip's order. */
  readonly layers: readonly (readonly Reach[])[];
}

const NM = 1e9;
const none: readonly Reach[] = [];

const given = (tolerance: Tolerance | undefined): tolerance is Tolerance =>
  tolerance !== undefined && ('share' in tolerance ? tolerance.share > 0 : tolerance.length > 0);

/** Whether anything may be off at all: where not, nothing is reckoned. */
export const hasTolerances = (chip: Chip): boolean =>
  chip.layers.some(({ tolerance }) => given(tolerance?.depth) || given(tolerance?.width)) ||
  chip.channels.some(({ tolerance }) => given(tolerance?.depth) || given(tolerance?.width));

/**
 * What may be off in making, each once. The depth is off alike all over a layer. A width is each channel's own
 * but for the share of it that its layer has in common; a channel's own tolerance takes the place of its layer's
 * and is independent of the rest.
 */
export function sourcesOf(chip: Chip): Sources {
  const all: Source[] = [];
  const add = (what: Source['what'], of: Source['of'], id: string): number => all.push({ what, of, id }) - 1;
  const reach = (source: number, tolerance: Tolerance, part = 1): Reach =>
    'share' in tolerance
      ? { source, share: tolerance.share * part }
      : { source, length: (tolerance.length * part) / NM };

  const layers = new Map<
    string,
    { readonly layer: Layer; readonly depth: readonly Reach[]; common: number }
  >();
  for (const layer of chip.layers) {
    const tolerance = layer.tolerance?.depth;
    const depth = given(tolerance) ? [reach(add('depth', 'layer', layer.id), tolerance)] : none;
    layers.set(layer.id, { layer, depth, common: -1 });
  }
  const channels = chip.channels.map((channel: Channel): ChannelReach => {
    const on = layers.get(channel.layer)!;
    const own = channel.tolerance;
    const depth = given(own?.depth)
      ? [reach(add('depth', 'channel', channel.id), own.depth)]
      : own?.depth
        ? none
        : on.depth;
    if (own?.width) {
      return {
        depth,
        width: given(own.width) ? [reach(add('width', 'channel', channel.id), own.width)] : none,
      };
    }
    const tolerance = on.layer.tolerance?.width;
    if (!given(tolerance)) return { depth, width: none };
    const common = on.layer.tolerance?.common ?? 0;
    const width: Reach[] = [];
    if (common < 1) width.push(reach(add('width', 'channel', channel.id), tolerance, 1 - common));
    if (common > 0) {
      if (on.common < 0) on.common = add('width', 'layer', on.layer.id);
      width.push(reach(on.common, tolerance, common));
    }
    return { depth, width };
  });
  return { all, channels, layers: chip.layers.map(({ id }) => layers.get(id)!.depth) };
}
