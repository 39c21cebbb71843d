import { Clipper, type Path64, type Paths64 } from 'clipper2-ts';
import Flatbush from 'flatbush';
import type { Chamber, Chip, Layer, Point, Port } from '../../solver/chip/chip.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import type { Notes } from './bring-in.ts';
import type { DrawnLayer } from './drawing.ts';
import { type Frame, pathOf } from './recognise/plane.ts';
import { circleNear } from './recognise/walls.ts';

/** A circle on the chip, nm. */
export interface Round {
  readonly x: number;
  readonly y: number;
  readonly radius: number;
}

/** Least share of its own bounding circle that something round fills, and most unlikeness of its sides. */
const FILLS = 0.95;
const SIDES = 0.03;

/** The circle that an outline is, or null; what a channel's mouth takes off it is let pass. */
export function roundOf(outline: Path64): Round | null {
  const { left, top, right, bottom } = Clipper.getBounds(outline);
  const size = Math.max(right - left, bottom - top);
  if (outline.length < 8 || Math.min(right - left, bottom - top) < (1 - SIDES) * size) return null;
  const circle = circleNear(outline, 0, outline.length - 1);
  if (!circle) return null;
  const { x, y, r: radius } = circle;
  if (Math.abs(Clipper.area(outline)) < FILLS * Math.PI * radius * radius) return null;
  if (outline.some((p) => Math.hypot(p.x - x, p.y - y) > radius * (1 + SIDES))) return null;
  return { x, y, radius };
}

/** The round holes of a layer; others are noted. */
export function roundsOf({ name, regions, tracks, lines }: DrawnLayer, frame: Frame, notes: Notes): Round[] {
  const found: Round[] = [];
  for (const { loops } of regions) {
    for (const loop of loops) {
      const round = roundOf(pathOf(loop, frame));
      if (round) found.push(round);
      else notes.add('holes that are not round', `layer ${name}`);
    }
  }
  const others = tracks.length + lines.length;
  if (others > 0) notes.add('lines among the holes', `layer ${name}`, others);
  return found;
}

/** A port for each hole with fluid under it. */
export function holePorts(
  rounds: readonly Round[],
  layers: readonly Layer[],
  grounds: readonly Paths64[],
  notes: Notes,
): Port[] {
  const ports: Port[] = [];
  const seen = new Set<string>();
  const indexed = grounds.map((ground) => new Ground(ground));
  for (const { x, y, radius } of rounds) {
    const at: Point = [Math.round(x), Math.round(y)];
    // A hole drawn twice is one.
    const key = at.join(' ');
    if (seen.has(key)) continue;
    seen.add(key);
    const layer = indexed.findIndex((ground) => ground.reached(at, radius));
    if (layer < 0) notes.add('holes with no fluid under them', `x ${at[0]} nm, y ${at[1]} nm`);
    else ports.push(port(ports.length, at, layers[layer].id, Math.round(2 * radius)));
  }
  return ports;
}

function port(count: number, at: Point, layer: string, diameter: number): Port {
  return {
    id: `port ${count + 1}`,
    at,
    layer,
    diameter,
    drive: { kind: 'pressure', pressure: 0 },
    tubing: [],
  };
}

/** Where there is fluid. */
export class Ground {
  readonly #paths: Paths64;
  readonly #index: Flatbush | null;

  constructor(paths: Paths64) {
    this.#paths = paths;
    this.#index = paths.length > 0 ? new Flatbush(paths.length) : null;
    for (const path of paths) {
      const { left, top, right, bottom } = Clipper.getBounds(path);
      this.#index?.add(left, top, right, bottom);
    }
    this.#index?.finish();
  }

  /** Whether there is fluid under a hole: under its centre, or, where a channel just ends there, around it. */
  reached([x, y]: Point, radius: number): boolean {
    if (this.holds(x, y)) return true;
    for (let k = 0; k < 12; k += 1) {
      const angle = (k * Math.PI) / 6;
      if (this.holds(x + 0.5 * radius * Math.cos(angle), y + 0.5 * radius * Math.sin(angle))) return true;
    }
    return false;
  }

  holds(x: number, y: number): boolean {
    let odd = false;
    for (const i of this.#index?.search(x, y, x, y) ?? []) if (crossedOddly(this.#paths[i], x, y)) odd = !odd;
    return odd;
  }
}

function crossedOddly(path: Path64, x: number, y: number): boolean {
  let odd = false;
  for (let i = 0, j = path.length - 1; i < path.length; j = i, i += 1) {
    const [a, b] = [path[i], path[j]];
    if (a.y > y !== b.y > y && x < ((b.x - a.x) * (y - a.y)) / (b.y - a.y) + a.x) odd = !odd;
  }
  return odd;
}

/** Ports where nothing says where they are: round pads that one channel leads to, and free ends of channels. */
export function endPorts(chip: Chip): { ports: Port[]; pads: Set<string> } {
  const ports: Port[] = [];
  const pads = new Set<string>();
  const chambers = new Map<string, Chamber>(chip.chambers.map((chamber) => [chamber.id, chamber]));
  for (const { kind, at, layers, arms, chambers: ids } of readGraph(chip).sites) {
    const [layer] = layers;
    if (kind === 'end') ports.push(port(ports.length, [Math.round(at[0]), Math.round(at[1])], layer, 0));
    if (kind !== 'chamber' || arms.length !== 1 || ids.length !== 1) continue;
    const round = roundOf(chambers.get(ids[0])!.outline.map(([x, y]) => ({ x, y })));
    if (!round) continue;
    pads.add(ids[0]);
    ports.push(
      port(ports.length, [Math.round(round.x), Math.round(round.y)], layer, Math.round(2 * round.radius)),
    );
  }
  return { ports, pads };
}
