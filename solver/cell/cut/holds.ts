import type { Graph } from '../../chip/graph.ts';

/** A site as an interval of a channel's distance; open at the channel's first and last site. */
export interface Hold {
  readonly site: number;
  readonly low: number;
  readonly high: number;
}

/** Where the sites lie on each channel, in path order, read back from the pieces between them. */
export function holdsOf(graph: Graph, channels: number): Hold[][] {
  const holds: Hold[][] = Array.from({ length: channels }, () => []);
  for (const p of graph.pieces) {
    const list = holds[p.channelIndex]!;
    const start = p.start + p.trim[0];
    const stop = p.stop - p.trim[1];
    const last = list[list.length - 1];
    if (!last) list.push({ site: p.from, low: -Infinity, high: start });
    else if (last.site === p.from) list[list.length - 1] = { ...last, high: start };
    else list.push({ site: p.from, low: start, high: start });
    list.push({ site: p.to, low: stop, high: Infinity });
  }
  return holds;
}
