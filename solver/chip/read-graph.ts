import type { Finding } from '../problem/finding.ts';
import type { Chip } from './chip.ts';
import type { Graph, Piece } from './graph.ts';
import { readPlaces } from './read-graph-areas.ts';
import { drawingOf } from './read-graph-drawing.ts';
import { joinChannels } from './read-graph-joins.ts';
import { Links } from './read-graph-links.ts';
import { readOverlaps } from './read-graph-overlaps.ts';
import { dropDoubles, readPieces } from './read-graph-pieces.ts';
import { readSites, type SiteDraft } from './read-graph-sites.ts';

/**
 * The drawing as the fluid reads it: what overlaps on a layer is one cavity, a gap is a wall, and
 * layers meet only in vias. Throws a Problem of kind 'place' where a port or via has no fluid.
 */
export function readGraph(chip: Chip): Graph {
  const drawing = drawingOf(chip);
  const findings: Finding[] = [...drawing.findings];
  const links = new Links(3 * chip.channels.length);
  const encounters = joinChannels(drawing, links);
  const places = readPlaces(drawing, links, findings);
  readOverlaps(drawing, links, encounters, places.areas, findings);
  let pieces: Piece[] = [];
  const firstSite = new Int32Array(chip.channels.length);
  const { sites, portSite } = readSites(drawing, links, places, (channel, holds) => {
    firstSite[channel] = holds[0]!.site;
    readPieces(drawing, links, channel, holds, pieces);
  });
  if (encounters.sameLine) pieces = dropDoubles(pieces, findings);
  giveArms(sites, pieces);
  const cavity = cavities(sites.length, pieces);
  return {
    sites,
    pieces,
    portSite,
    cavity,
    channelCavity: firstSite.map((site) => cavity[site]!),
    findings,
  };
}

/** Tells each site its arms; the lists are made as long as they will be, since lists that grow take much more. */
function giveArms(sites: readonly SiteDraft[], pieces: readonly Piece[]): void {
  const count = new Int32Array(sites.length);
  for (const { from, to } of pieces) {
    count[from]!++;
    count[to]!++;
  }
  for (let i = 0; i < sites.length; i++) sites[i]!.arms = new Array<SiteDraft['arms'][number]>(count[i]!);
  count.fill(0);
  for (let i = 0; i < pieces.length; i++) {
    const { from, to } = pieces[i]!;
    sites[from]!.arms[count[from]!++] = { piece: i, end: 'from' };
    sites[to]!.arms[count[to]!++] = { piece: i, end: 'to' };
  }
}

/** Number of the connected part of each site, in order of first sites. */
function cavities(sites: number, pieces: readonly Piece[]): Int32Array {
  const parent = new Int32Array(sites);
  for (let i = 0; i < sites; i++) parent[i] = i;
  const root = (i: number) => {
    while (parent[i] !== i) {
      parent[i] = parent[parent[i]!]!;
      i = parent[i]!;
    }
    return i;
  };
  for (const piece of pieces) {
    const a = root(piece.from);
    const b = root(piece.to);
    if (a < b) parent[b] = a;
    else parent[a] = b;
  }
  const number = new Int32Array(sites).fill(-1);
  const cavity = new Int32Array(sites);
  let count = 0;
  for (let i = 0; i < sites; i++) {
    const r = root(i);
    if (number[r]! < 0) number[r] = count++;
    cavity[i] = number[r]!;
  }
  return cavity;
}
