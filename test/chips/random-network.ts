import type { Channel, Chip, Point, Port, Via } from '../../solver/chip/chip.ts';
import { chamber, layer, port } from '../chip/drawings.ts';
import { random } from '../chip/random-drawing.ts';

/** Distance of neighbouring nodes, nm, and how far each is moved off its place at most, as a share of it. */
const PITCH = 2_000_000;
const JITTER = 0.22;

/**
 * A random chip as an engineer might draw one: a network of channels between nodes of a bent lattice, straight,
 * mitred or rounded, of even width or tapered, that meet end to end in twos, threes and fours or run on into one
 * another; some have a chamber, a second layer and vias. Every free end is a port, some of them driven.
 */
export function randomNetwork(seed: number): Chip {
  const next = random(seed);
  const between = (low: number, high: number): number => Math.round(low + next() * (high - low));
  const [columns, rows] = [between(3, 5), between(2, 4)];
  const two = next() < 0.3;
  const node = new Map<string, Point>();
  const key = (i: number, j: number): string => `${i} ${j}`;
  const straight = next() < 0.3;
  for (let i = 0; i < columns; i += 1) {
    for (let j = 0; j < rows; j += 1) {
      const off = (): number => (straight ? 0 : (next() - 0.5) * 2 * JITTER * PITCH);
      node.set(key(i, j), [Math.round((i + 1) * PITCH + off()), Math.round((j + 1) * PITCH + off())]);
    }
  }
  // A spanning tree, and some loops.
  const edges: [string, string][] = [];
  for (let i = 0; i < columns; i += 1) {
    for (let j = 0; j < rows; j += 1) {
      if (i + 1 < columns) edges.push([key(i, j), key(i + 1, j)]);
      if (j + 1 < rows) edges.push([key(i, j), key(i, j + 1)]);
    }
  }
  for (let k = edges.length - 1; k > 0; k -= 1) {
    const other = Math.floor(next() * (k + 1));
    [edges[k], edges[other]] = [edges[other]!, edges[k]!];
  }
  const root = new Map([...node.keys()].map((id) => [id, id]));
  const find = (id: string): string => (root.get(id) === id ? id : find(root.get(id)!));
  const channels: Channel[] = [];
  const ends = new Map<string, { count: number; layer: string }>();
  const widths = [between(40, 160) * 1000, between(40, 160) * 1000];
  const vias: Via[] = [];
  const layerAt = new Map<string, string>();
  for (const [a, b] of edges) {
    const [ra, rb] = [find(a), find(b)];
    if (ra === rb && next() < 0.75) continue;
    root.set(ra, rb);
    const on = two && next() < 0.3 ? 'upper' : 'flow';
    const wide = next() < 0.6 ? widths[0]! : between(40, 160) * 1000;
    channels.push({
      id: `c${channels.length + 1}`,
      layer: on,
      path: pathBetween(node.get(a)!, node.get(b)!, next),
      width: [wide, next() < 0.2 ? Math.round(wide * (0.6 + 0.8 * next())) : wide],
      bendRadius: next() < 0.5 ? between(180, 320) * 1000 : 0,
    });
    for (const id of [a, b]) {
      const known = ends.get(id);
      if (known && layerAt.get(id) !== on && !vias.some((v) => v.id === `v ${id}`)) {
        vias.push({ id: `v ${id}`, at: node.get(id)!, layers: ['flow', 'upper'], diameter: 300_000 });
      }
      layerAt.set(id, known ? layerAt.get(id)! : on);
      ends.set(id, { count: (known?.count ?? 0) + 1, layer: on });
    }
  }
  const ports: Port[] = [];
  // Where there are few free ends, holes in the midst of the network are ports too.
  const free = [...ends].filter(([, { count }]) => count === 1).length;
  let inside = Math.max(0, 3 - free);
  for (const [id, { count, layer: on }] of ends) {
    if (count !== 1) {
      if (inside === 0 || vias.some((v) => v.id === `v ${id}`)) continue;
      inside -= 1;
    }
    const [x, y] = node.get(id)!;
    const made = port(`p${ports.length + 1}`, [x / 1000, y / 1000], count > 1 || next() < 0.3 ? 400 : 0, on);
    const driven = ports.length === 0 || (ports.length > 2 && next() < 0.3);
    ports.push(driven ? { ...made, drive: { kind: 'pressure', pressure: 1000 * between(2, 20) } } : made);
  }
  // A well in the midst of a straight channel.
  const wells =
    next() < 0.3 ? channels.filter((c) => c.layer === 'flow' && c.path.length === 2).slice(0, 1) : [];
  return {
    name: `network ${seed}`,
    note: '',
    lengthUnit: 'um',
    outline: { width: (columns + 1) * PITCH, height: (rows + 1) * PITCH },
    layers: two ? [layer('flow'), layer('upper', 80)] : [layer('flow', between(20, 100))],
    channels,
    chambers: wells.map(({ id, path: [[ax, ay], [bx, by]] }, i) => {
      const [x, y] = [(ax + bx) / 2000, (ay + by) / 2000];
      const outline = Array.from({ length: 8 }, (_, k): [number, number] => [
        x + 300 * Math.cos(((k + 0.5) * Math.PI) / 4),
        y + 200 * Math.sin(((k + 0.5) * Math.PI) / 4),
      ]);
      return { ...chamber(`well ${i} ${id}`, outline) };
    }),
    vias,
    ports,
    fluid: { viscosity: 1e-3, density: 1000 },
    targets: [],
    limits: [],
  };
}

/** A way from one node to the next: straight, or round one or two corners that lie between them. */
function pathBetween(a: Point, b: Point, next: () => number): Point[] {
  const kind = next();
  if (kind < 0.5) return [a, b];
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  const at = (along: number, aside: number): Point => [
    Math.round(a[0] + along * dx - aside * dy),
    Math.round(a[1] + along * dy + aside * dx),
  ];
  const off = (next() < 0.5 ? -1 : 1) * (0.1 + 0.12 * next());
  return kind < 0.75 ? [a, at(0.5, off), b] : [a, at(0.33, off), at(0.67, -off), b];
}
