import type { Chip } from '../../chip/chip.ts';
import {
  type Area,
  areaOf,
  areasOverlap,
  areasOverlapOnce,
  commonGround,
  commonGroundOnce,
  disc,
} from '../../chip/geometry/area.ts';
import { type Body, halfAt } from '../../chip/geometry/body.ts';
import { distanceTo, nearest, pointAt } from '../../chip/geometry/curve.ts';
import { type Drawing, layerNumbers } from '../../chip/read-graph-drawing.ts';
import { addSource, type Hole, type Sources, span } from './sources.ts';

/** Chambers with all that opens into them. */
export function chambers(chip: Chip, drawing: Drawing, found: Sources): void {
  const layers = layerNumbers(chip);
  const areas = chip.chambers.map((c) => areaOf(c.outline));
  const sources = areas.map(() => addSource(found));
  const overlap = drawing.keeps ? areasOverlapOnce : areasOverlap;
  const ground = drawing.keeps ? commonGroundOnce : commonGround;
  chip.chambers.forEach((c, i) => {
    const layer = layers.get(c.layer)!;
    const source = sources[i]!;
    found.chambers.set(source, [i]);
    const { fillet } = chip.layers[layer]!;
    for (const b of bodiesAt(drawing, areas[i]!, layer)) {
      const corners = ground(areas[i]!, b);
      span(found, b, corners, source, 1.5 * fillet);
    }
    found.holes.forEach((hole, k) => {
      if (hole.layer !== layer || !overlap(areas[i]!, hole.area)) return;
      for (const edge of areas[i]!.edges) clearOf(hole, distanceTo(edge, hole.x, hole.y), hole.radius);
      recut(hole);
      addHole(found, source, k);
    });
  });
}

function addHole(found: Sources, source: number, hole: number): void {
  const set = found.holesOf.get(source) ?? new Set();
  found.holesOf.set(source, set.add(hole));
}

function bodiesAt(drawing: Drawing, area: Area, layer: number): Body[] {
  const near: number[] = drawing.index?.search(area.minX, area.minY, area.maxX, area.maxY) ?? [];
  return near
    .filter((i) => drawing.layerOf[drawing.elements.channel[i]!] === layer)
    .sort((p, q) => p - q)
    .map((i) => drawing.body(i));
}

/** A rim closer to a wall than this share of the half width (in a chamber, of its radius) leaves a sliver no mesh can fill. */
const SLIVER = 0.06;

/**
 * Strips that reach under a hole: each its own source, for at the rim the pressure is the hole's. A hole
 * that all but touches a wall is taken so much wider that it cuts it: what flowed in that gap is nothing.
 */
export function holeContacts(drawing: Drawing, found: Sources): void {
  const ground = drawing.keeps ? commonGroundOnce : commonGround;
  found.holes.forEach((hole, k) => {
    const under = bodiesAt(drawing, hole.area, hole.layer);
    for (const b of under) {
      const { offset, half } = footOf(hole, b);
      for (const gap of [half - offset, half + offset]) clearOf(hole, gap, half);
    }
    recut(hole);
    for (const b of under) {
      const met = ground(hole.area, b);
      if (met.length === 0) continue;
      const corners = [...met];
      // the rim bulges along the strip beyond where it meets the walls
      const { d, offset, half } = footOf(hole, b);
      const c = b.element.curve;
      if (offset < half) {
        for (const end of [d - hole.radius, d + hole.radius]) {
          corners.push(pointAt(c, Math.min(Math.max(end, 0), c.length)));
        }
      }
      const source = addSource(found);
      addHole(found, source, k);
      span(found, b, corners, source, 0);
    }
  });
}

/** Widens a hole whose rim all but touches a wall at `distance` from its centre; `size` is what that is small against. */
function clearOf(hole: Hole, distance: number, size: number): void {
  if (Math.abs(distance - hole.radius) < SLIVER * size) hole.radius = distance + SLIVER * size;
}

/** The area of a hole that may have been widened; the same object where it was not. */
function recut(hole: Hole): void {
  const { x, y, radius, area } = hole;
  if (area.maxX !== x + radius) hole.area = disc(x, y, radius);
}

/** Distance along an element to below a hole's centre, how far that lies from the centreline, and half the width. */
function footOf(hole: Hole, b: Body): { d: number; offset: number; half: number } {
  const d = nearest(b.element.curve, hole.x, hole.y);
  const [x, y] = pointAt(b.element.curve, d);
  return { d, offset: Math.hypot(x - hole.x, y - hole.y), half: halfAt(b.element, b.element.s0 + d) };
}
