import { SaxesParser } from 'saxes';
import { NM_PER_M, unitSize } from '../../../solver/chip/units.ts';
import type { Edge } from '../../../solver/mesh/mesh.ts';
import { LoopsByLayer, type ReadMask, unreadable } from './read.ts';

const NM = unitSize('mm') * NM_PER_M;

/** Reads SVG as `writeSvg` writes it: paths by their ids, and where the chip is used; checks that it is to scale. */
export function readSvg(text: string): ReadMask {
  const loops = new LoopsByLayer();
  const shifts: [number, number][] = [];
  let scaled = false;
  const parser = new SaxesParser({ xmlns: true });
  parser.on('error', (error) => {
    throw unreadable(error.message);
  });
  parser.on('opentag', (tag) => {
    const get = (name: string): string => tag.attributes[name]?.value ?? '';
    if (tag.name === 'svg') {
      const [, , width, height] = get('viewBox').split(' ').map(Number);
      scaled = get('width') === `${width}mm` && get('height') === `${height}mm`;
    } else if (tag.name === 'path') {
      for (const loop of get('d').split(/(?<=Z)/)) loops.add(get('id'), loopOf(loop));
    } else if (tag.name === 'use') shifts.push([Number(get('x')) * NM, 0 - Number(get('y')) * NM]);
  });
  parser.write(text).close();
  if (!scaled) throw unreadable('its unit is not the millimetre');
  return { loops: loops.map, shifts: shifts.length > 0 ? shifts : [[0, 0]], offArc: 0 };
}

const STEP = /([MLAZ])([^MLAZ]*)/g;

function loopOf(d: string): Edge[] {
  const loop: { x: number; y: number; bulge: number; tag: number }[] = [];
  let closed = false;
  for (const [, kind, numbers] of d.matchAll(STEP)) {
    if (kind === 'Z') {
      closed = true;
      break;
    }
    const values = numbers!.trim().split(/[ ,]+/).map(Number);
    const x = values[values.length - 2]! * NM;
    const y = 0 - values[values.length - 1]! * NM;
    if (kind === 'A') {
      const from = loop[loop.length - 1]!;
      const half = Math.hypot(x - from.x, y - from.y) / 2;
      const sweep = 2 * Math.asin(Math.min(1, half / (values[0]! * NM)));
      from.bulge = Math.tan(sweep / 4) * (values[4] === 1 ? -1 : 1);
    }
    loop.push({ x, y, bulge: 0, tag: 0 });
  }
  if (!closed || loop.length < 2) throw unreadable('an outline is open');
  // an arc that closes the loop ends on its first point
  const [first, last] = [loop[0]!, loop[loop.length - 1]!];
  if (first.x === last.x && first.y === last.y) loop.pop();
  return loop;
}
