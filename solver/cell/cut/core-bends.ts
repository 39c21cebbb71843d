import type { Chip } from '../../chip/chip.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import { BEND_RADIUS, BEND_TURN, TAPER_SLOPE } from './bounds.ts';
import { addSource, type Sources } from './sources.ts';

/** Corners, tight arcs and steep tapers. */
export function bends(chip: Chip, drawing: Drawing, found: Sources): void {
  const { elements } = drawing;
  for (let c = 0; c < chip.channels.length; c++) {
    const { fillet } = chip.layers[drawing.layerOf[c]!]!;
    const first = elements.first[c]!;
    const last = elements.first[c + 1]! - 1;
    const total = elements.total(c);
    const [w0, w1] = chip.channels[c]!.width;
    if (Math.abs(w1 - w0) / 2 / total > TAPER_SLOPE) {
      found.cores.push({ channel: c, low: 0, high: total, source: addSource(found, false, true) });
      continue;
    }
    for (let id = first; id <= last; id++) {
      const e = elements.at(id);
      const width = 2 * Math.max(e.h0, e.h1);
      if (e.curve.curvature !== 0 && Math.abs(1 / e.curve.curvature) < BEND_RADIUS * width) {
        found.cores.push({ channel: c, low: e.s0, high: e.s1, source: addSource(found) });
      }
      const turn = Math.abs(e.turn1);
      if (turn < 1e-6 || id === last) continue;
      const next = elements.at(id + 1);
      // many small turns in a row are a bend of their mean radius
      const radius = (e.curve.length + next.curve.length) / 2 / turn;
      if (turn <= BEND_TURN && (radius >= BEND_RADIUS * width || turn < BEND_TURN / 20)) continue;
      const reach = (e.h1 + fillet) * Math.tan(turn / 2);
      found.cores.push({
        channel: c,
        low: e.s1 - Math.min(reach, e.curve.length),
        high: e.s1 + Math.min(reach, next.curve.length),
        source: addSource(found),
      });
    }
  }
}
