import { Problem } from '../../../solver/problem/problem.ts';
import type { WaferOptions } from '../../contract/mask.ts';
import { MARK_GAP } from './marks.ts';
import type { MaskPlane } from './model.ts';
import type { MaskSettings } from './settings.ts';
import { type Box, boxOf, rectangle, reversed, united } from './shapes.ts';
import { mm, type WaferLayout, waferLayout } from './wafer.ts';

/**
 * Chips side by side on a wafer. Neighbours share what lies between them: where nothing but the saw passes,
 * one lane, half of it drawn with each; where marks stand, a lane at each edge and one set of marks, unless
 * sets on both sides of every chip cost none of the chips.
 */

/** Pitches chosen here are whole multiples of this, nm. */
const ROUND = 10_000;

type Pair = readonly [number, number];

interface Room {
  /** Where each chip has its marks. */
  readonly marks: 'both sides' | 'right' | 'none';
  /** Least pitch, nm. */
  readonly least: Pair;
}

export interface OnWafer {
  readonly planes: readonly MaskPlane[];
  readonly field: Box;
  readonly wafer: WaferLayout;
  readonly shared: Shared;
}

/** What chips next to each other have in common. */
export interface Shared {
  /** Each has its marks on the right alone. */
  readonly marks: boolean;
  /** Somewhere no more lies between two than one lane. */
  readonly lane: boolean;
}

/** Drawings of one chip as they are set on the wafer, and where. Throws a `Problem` where it does not go. */
export function onWafer(
  planes: readonly MaskPlane[],
  outline: { readonly width: number; readonly height: number },
  settings: MaskSettings,
  options: WaferOptions,
): OnWafer {
  const centre = [outline.width / 2, outline.height / 2] as const;
  const edges = planes.map(({ scale }): Box => {
    const [w, h] = [centre[0] * scale, centre[1] * scale];
    return { x0: centre[0] - w, y0: centre[1] - h, x1: centre[0] + w, y1: centre[1] + h };
  });
  const body = united([
    ...edges,
    ...planes.flatMap(({ cavities }) => {
      const box = boxOf(cavities);
      return box ? [box] : [];
    }),
  ]);
  const rooms = roomsOf(planes, body, centre[0], settings);
  const { pitch } = options;
  const held = pitch ? rooms.filter(({ least }) => least.every((length, i) => length <= pitch[i]!)) : rooms;
  if (held.length === 0) throw tooClose(pitch!, rooms.at(-1)!, body, settings);
  let best: OnWafer | null = null;
  let refused: unknown;
  for (const room of held) {
    try {
      const found = laid(planes, edges, room, pitch ?? room.least, centre, settings, options);
      if (!best || found.wafer.centres.length > best.wafer.centres.length) best = found;
    } catch (error) {
      refused = error;
    }
  }
  if (!best) throw refused;
  return best;
}

/** How much room a chip can do with, the most first. */
function roomsOf(
  planes: readonly MaskPlane[],
  body: Box,
  middle: number,
  { lane, markUnit }: MaskSettings,
): Room[] {
  const most = Math.max(...planes.map(({ scale }) => scale));
  const around = lane * most;
  const [width, height] = [body.x1 - body.x0, body.y1 - body.y0];
  const up = (x: number, y: number): Pair => [Math.ceil(x / ROUND) * ROUND, Math.ceil(y / ROUND) * ROUND];
  const marks = planes.flatMap((plane) => plane.marks);
  const right = boxOf(marks.filter((shape) => boxOf([shape])!.x0 > middle));
  if (!right) return [{ marks: 'none', least: up(width + around, height + around) }];
  const gap = MARK_GAP * markUnit * most;
  const high = Math.max(height + around, right.y1 - right.y0 + gap);
  const all = boxOf(marks)!;
  return [
    { marks: 'both sides', least: up(all.x1 - all.x0 + gap, high) },
    { marks: 'right', least: up(right.x1 + gap - (body.x0 - around), high) },
  ];
}

function laid(
  planes: readonly MaskPlane[],
  edges: readonly Box[],
  { marks }: Room,
  pitch: Pair,
  centre: Pair,
  { lane }: MaskSettings,
  options: WaferOptions,
): OnWafer {
  const set = planes.map((plane, i): MaskPlane => {
    const edge = edges[i]!;
    const full = lane * plane.scale;
    // up to the middle between two chips where there is no more between them than their lanes
    const share = (between: number): number => Math.min(full, between / 2);
    const x = marks === 'none' ? share(pitch[0] - (edge.x1 - edge.x0)) : full;
    const y = share(pitch[1] - (edge.y1 - edge.y0));
    const outer = rectangle(edge.x0 - x, edge.y0 - y, edge.x1 + x, edge.y1 + y);
    const inner = rectangle(edge.x0, edge.y0, edge.x1, edge.y1);
    return {
      ...plane,
      lane: lane > 0 ? [[outer, reversed(inner)]] : [],
      marks: marks === 'right' ? plane.marks.filter((shape) => boxOf([shape])!.x0 > centre[0]) : plane.marks,
    };
  });
  const field = united(
    set.flatMap((plane, i) => [
      edges[i]!,
      ...[plane.cavities, plane.marks, plane.lane].flatMap((shapes) => {
        const box = boxOf(shapes);
        return box ? [box] : [];
      }),
    ]),
  );
  const narrow = (i: 0 | 1): boolean => {
    const between = edges.map((edge) => pitch[i] - (i === 0 ? edge.x1 - edge.x0 : edge.y1 - edge.y0));
    return planes.some(({ scale }, k) => between[k]! < 2 * lane * scale);
  };
  const shared = {
    marks: marks === 'right',
    lane: lane > 0 && (narrow(1) || (marks === 'none' && narrow(0))),
  };
  return { planes: set, field, wafer: waferLayout(field, centre, options, pitch), shared };
}

function tooClose(pitch: Pair, { marks, least }: Room, body: Box, { lane }: MaskSettings): Problem {
  const [x, y] = least;
  const bare = [body.x1 - body.x0 + lane, body.y1 - body.y0 + lane] as const;
  const without = marks !== 'none' && pitch[0] >= bare[0] && pitch[1] >= bare[1];
  return new Problem(
    'range',
    `The pitch of ${mm(pitch[0])} × ${mm(pitch[1])} is too small: a chip with its dicing lane${marks === 'none' ? '' : ' and one set of marks'} takes ${mm(x)} × ${mm(y)}.`,
    'pitch',
    `Give a larger pitch, or leave it out${without ? '; without alignment marks it is enough' : ''}.`,
  );
}
