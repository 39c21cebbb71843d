import { TOUCH } from '../../chip/geometry/tolerance.ts';
import type { Graph } from '../../chip/graph.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import type { Ground } from './assemble.ts';
import type { Hold } from './holds.ts';
import type { Hole, Sources } from './sources.ts';
import type { Span } from './spans.ts';

/** What each cluster takes up: its spans of channel, chambers, holes, and the sites inside. */
export function groundsOf(
  drawing: Drawing,
  graph: Graph,
  found: Sources,
  of: Int32Array,
  byChannel: readonly (readonly Span[])[],
  holds: readonly (readonly Hold[])[],
): Map<number, Ground> {
  interface Draftable extends Ground {
    readonly spans: Span[];
    readonly chambers: number[];
    readonly holes: Hole[];
    readonly sites: number[];
  }
  const grounds = new Map<number, Draftable>();
  byChannel.forEach((list, channel) => {
    let start = 0;
    for (const span of list) {
      const layer = drawing.layerOf[channel]!;
      const ground = grounds.get(span.cluster) ?? { layer, spans: [], chambers: [], holes: [], sites: [] };
      grounds.set(span.cluster, ground);
      ground.spans.push(span);
      // at a port the cell ends on its site; at an end wall the site is inside
      const below = span.high.s + (span.high.kind === 'wall' ? TOUCH : -TOUCH);
      const above = span.low.s - (span.low.kind === 'wall' ? TOUCH : -TOUCH);
      const here = holds[channel]!;
      while (start < here.length && here[start]!.high <= above) start++;
      for (let k = start; k < here.length && here[k]!.low < below; k++) {
        if (!ground.sites.includes(here[k]!.site)) ground.sites.push(here[k]!.site);
      }
    }
  });
  const siteOfChamber = new Map(graph.sites.flatMap((s, i) => s.chambers.map((id) => [id, i] as const)));
  for (const [source, chambers] of found.chambers) {
    const ground = grounds.get(of[source]!);
    if (!ground) continue;
    ground.chambers.push(...chambers);
    for (const i of chambers) {
      const site = siteOfChamber.get(drawing.chip.chambers[i]!.id)!;
      if (!ground.sites.includes(site)) ground.sites.push(site);
    }
  }
  for (const [source, holes] of found.holesOf) {
    const ground = grounds.get(of[source]!);
    for (const k of holes) {
      const hole = found.holes[k]!;
      if (ground && !ground.holes.includes(hole)) ground.holes.push(hole);
    }
  }
  for (const ground of grounds.values()) ground.sites.sort((a, b) => a - b);
  return grounds;
}
