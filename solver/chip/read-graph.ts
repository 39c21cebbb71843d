import type { Finding } from '../problem/finding.ts';
import type { Chip } from './chip.ts';
import type { Graph, Piece, Site } from './graph.ts';
import { readPlaces } from './read-graph-areas.ts';
import { drawingOf } from './read-graph-drawing.ts';
import { joinChannels } from './read-graph-joins.ts';
import { Links } from './read-graph-links.ts';
import { readOverlaps } from './read-graph-overlaps.ts';
import { dropDoubles, readPieces } from './read-graph-pieces.ts';
import { readSites } from './read-graph-sites.ts';

/**
 * The drawing as the fluid reads it: what overlaps on a layer is one cavity, a gap is a wall, and
 * layers meet only in vias. Throws a Problem of kind 'place' where a port or via has no fluid.
 */
export function readGraph(chip: Chip): Graph {
  const drawing = drawingOf(chip);
  const findings: Finding[] = [...drawing.findings];
  const links = new Links(4 * chip.channels.length);
  const encounters = joinChannels(drawing, links);
  const places = readPlaces(drawing, links, findings);
  readOverlaps(drawing, links, encounters, places.areas, findings);
  const { drafts, holds, portSite } = readSites(drawing, links, places);
  let pieces: Piece[] = [];
  for (let c = 0; c < holds.length; c++) readPieces(drawing, links, c, holds[c]!, pieces);
  if (encounters.sameLine) pieces = dropDoubles(pieces, findings);
  const cavity = cavities(drafts.length, pieces);
  return {
    sites: sitesWithArms(drafts, pieces),
    pieces,
    portSite,
    cavity,
    channelCavity: Int32Array.from(holds, (list) => cavity[list[0]!.site]!),
    findings,
  };
}

function sitesWithArms(drafts: readonly Omit<Site, 'arms'>[], pieces: readonly Piece[]): Site[] {
  const arms: { piece: number; end: 'from' | 'to' }[][] = drafts.map(() => []);
  pieces.forEach((piece, i) => {
    arms[piece.from]!.push({ piece: i, end: 'from' });
    arms[piece.to]!.push({ piece: i, end: 'to' });
  });
  return drafts.map((draft, i) => ({ ...draft, arms: arms[i]! }));
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
