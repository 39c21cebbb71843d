import type { Channel, Chip, Point } from '../../solver/chip/chip.ts';
import { chamber, channel, chipOf, layer, port } from './drawings.ts';

/** Small generator of uniform numbers (mulberry32), so that a failing seed can be named. */
export function random(seed: number): () => number {
  let a = seed >>> 0;
  return () => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = a;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/**
 * A random network on two layers: channels that start and end at free points, on vertices of others,
 * in the middle of others, with straight, mitred and rounded paths and tapers. Lengths in nm.
 */
export function randomDrawing(seed: number, count = 14): Chip {
  const next = random(seed);
  const size = 4e6;
  const anywhere = (): Point => [Math.round(next() * size), Math.round(next() * size)];
  const channels: Channel[] = [];
  const start = (): Point => {
    if (channels.length === 0 || next() < 0.4) return anywhere();
    const { path } = channels[Math.floor(next() * channels.length)]!;
    const i = Math.floor(next() * (path.length - 1));
    if (next() < 0.5) return path[i + (next() < 0.5 ? 0 : 1)]!;
    const t = next();
    const [a, b] = [path[i]!, path[i + 1]!];
    return [Math.round(a[0] + t * (b[0] - a[0])), Math.round(a[1] + t * (b[1] - a[1]))];
  };
  for (let c = 0; c < count; c++) {
    const path: Point[] = [start()];
    const vertices = 1 + Math.floor(next() * 3);
    for (let k = 0; k < vertices; k++) path.push(k === vertices - 1 && next() < 0.5 ? start() : anywhere());
    const distinct = path.filter((p, k) => k === 0 || p[0] !== path[k - 1]![0] || p[1] !== path[k - 1]![1]);
    if (distinct.length < 2) continue;
    const width = Math.round(20e3 + next() * 100e3);
    channels.push({
      id: `c${c}`,
      layer: next() < 0.7 ? 'flow' : 'upper',
      path: distinct,
      width: [width, next() < 0.3 ? Math.round(width * (0.5 + next())) : width],
      bendRadius: next() < 0.3 ? Math.round(next() * 300e3) : 0,
    });
  }
  return {
    name: `random ${seed}`,
    note: '',
    lengthUnit: 'um',
    outline: { width: size, height: size },
    layers: [layer('flow'), layer('upper')],
    channels,
    chambers: [],
    vias: [],
    ports: [],
    fluid: { viscosity: 1e-3, density: 1000 },
    targets: [],
    limits: [],
  };
}

/**
 * A crowded drawing on a coarse raster: coincident ends, walls that touch exactly, channels on one line,
 * paths that double back, bends that do not fit, holes on corners, a chamber in the midst.
 */
export function crowdedDrawing(seed: number): Chip {
  const next = random(seed);
  const pick = <T>(list: readonly T[]): T => list[Math.floor(next() * list.length)]!;
  const at = (): [number, number] => [Math.floor(next() * 12) * 100, Math.floor(next() * 12) * 100];
  const channels: Channel[] = [];
  const count = 3 + Math.floor(next() * 8);
  for (let i = 0; i < count; i++) {
    const path = [at()];
    for (let k = Math.floor(next() * 4); k >= 0; k--) {
      const [x, y] = path[path.length - 1]!;
      const [p, q] = at();
      path.push(next() < 0.7 ? (next() < 0.5 ? [x, q] : [p, y]) : [p, q]);
    }
    const distinct = path.filter((p, k) => k === 0 || p[0] !== path[k - 1]![0] || p[1] !== path[k - 1]![1]);
    if (distinct.length < 2) continue;
    const width = pick([20, 50, 100, 100, 200]);
    const bendRadius = next() < 0.3 ? pick([50, 100, 200]) : 0;
    const on = next() < 0.8 ? 'flow' : 'upper';
    channels.push(
      channel(`c${i}`, distinct, next() < 0.2 ? [width, width / 2] : width, { bendRadius, layer: on }),
    );
  }
  const well = chamber('w', [
    [300, 300],
    [600, 300],
    [600, 600],
    [300, 600],
  ]);
  return chipOf({
    layers: [layer('flow', 50, pick([0, 5, 20])), layer('upper')],
    channels,
    chambers: next() < 0.5 ? [well] : [],
    ports: channels.slice(0, 3).map((c) => {
      const [x, y] = c.path[0]!;
      return port(`p${c.id}`, [x / 1000, y / 1000], pick([0, 50, 100, 200, 300]), c.layer);
    }),
  });
}
