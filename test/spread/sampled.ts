import type { Chip } from '../../solver/chip/chip.ts';
import { randomFrom } from '../sparse/matrices.ts';

/** Two independent normal numbers made of two equal ones (Box and Muller 1958). */
export function normalFrom(seed: number): () => number {
  const random = randomFrom(seed);
  let kept: number | null = null;
  return () => {
    if (kept !== null) {
      const value = kept;
      kept = null;
      return value;
    }
    const size = Math.sqrt(-2 * Math.log(1 - random()));
    const angle = 2 * Math.PI * random();
    kept = size * Math.sin(angle);
    return size * Math.cos(angle);
  };
}

const off = (
  nominal: number,
  tolerance: { share: number } | { length: number } | undefined,
  by: number,
): number =>
  tolerance === undefined ? 0 : ('share' in tolerance ? nominal * tolerance.share : tolerance.length) * by;

/**
 * A chip as it may come out of making, independently of how the solver sees it: each layer's depth off by one draw,
 * each width by its channel's own draw and its layer's. A draw of 1 uses a tolerance up.
 */
export function madeOnce(chip: Chip, draw: () => number): Chip {
  const common = new Map<string, number>();
  const layers = chip.layers.map((layer) => {
    common.set(layer.id, draw());
    return { ...layer, depth: Math.round(layer.depth + off(layer.depth, layer.tolerance?.depth, draw())) };
  });
  const channels = chip.channels.map((channel) => {
    const tolerance = chip.layers.find(({ id }) => id === channel.layer)!.tolerance;
    const part = tolerance?.common ?? 0;
    const by = (1 - part) * draw() + part * common.get(channel.layer)!;
    const width = channel.width.map((w) => Math.round(w + off(w, tolerance?.width, by)));
    return { ...channel, width: [width[0]!, width[1]!] as const };
  });
  return { ...chip, layers, channels };
}

export const deviation = (values: readonly number[]): number => {
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length;
  return Math.sqrt(values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (values.length - 1));
};
