import type { Graph, Piece } from '../../solver/chip/graph.ts';

/** What the page draws and lists of the drawing as the fluid reads it. */
export interface ShownGraph {
  readonly sites: Graph['sites'];
  readonly pieces: readonly Pick<
    Piece,
    'channel' | 'channelIndex' | 'number' | 'from' | 'to' | 'start' | 'stop'
  >[];
}

/** Without what only the solver needs, which is the larger part and would lie in the page a second time. */
export function shownGraph({ sites, pieces }: Graph): ShownGraph {
  return {
    sites,
    pieces: pieces.map(({ channel, channelIndex, number, from, to, start, stop }) => ({
      channel,
      channelIndex,
      number,
      from,
      to,
      start,
      stop,
    })),
  };
}
