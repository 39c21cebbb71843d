import { SaxesParser } from 'saxes';
import { NM_PER_M, unitSize } from '../../../solver/chip/units.ts';
import { numberIn } from './bytes.ts';
import type { Loops } from './loops.ts';
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
      const path = get('d');
      addPath(loops.of(get('id'), path.length / LEAST_POINT), Buffer.from(path, 'latin1'));
    } else if (tag.name === 'use') shifts.push([Number(get('x')) * NM, 0 - Number(get('y')) * NM]);
  });
  parser.write(text).close();
  if (!scaled) throw unreadable('its unit is not the millimetre');
  return { loops: loops.map, shifts: shifts.length > 0 ? shifts : [[0, 0]], offArc: 0 };
}

const MOVE = 0x4d;
const LINE = 0x4c;
const ARC = 0x41;
const CLOSE = 0x5a;
const SPACE = 0x20;
/** Bytes of a point: a letter and two numbers with a space between. */
const LEAST_POINT = 4;

/** Letters with the numbers that follow them, one space between two. */
function addPath(loops: Loops, path: Uint8Array): void {
  const numbers = new Float64Array(7);
  for (let at = 0; at < path.length; ) {
    const step = path[at]!;
    at += 1;
    let count = 0;
    for (let word = at; at < path.length && path[at - 1] !== CLOSE; at++) {
      const letter = path[at]! >= ARC;
      if (!letter && path[at] !== SPACE) continue;
      if (count < numbers.length) numbers[count++] = numberIn(path, word, at);
      word = at + 1;
      if (letter) break;
    }
    if (count !== (step === ARC ? 7 : step === CLOSE ? 0 : 2)) throw unreadable('a path is not as written');
    if (step === CLOSE) {
      if (loops.points < loops.from(loops.length) + 2) throw unreadable(OPEN);
      // an arc that closes the loop ends on its first point
      loops.dropReturn();
      loops.close();
    } else if (step === ARC) addArc(loops, numbers);
    else if (step === LINE || (step === MOVE && loops.points === loops.from(loops.length)))
      loops.add(numbers[0]! * NM, 0 - numbers[1]! * NM, 0);
    else throw unreadable(OPEN);
  }
  if (loops.points > loops.from(loops.length)) throw unreadable(OPEN);
}

const OPEN = 'an outline is open';

function addArc(loops: Loops, numbers: Float64Array): void {
  const x = numbers[5]! * NM;
  const y = 0 - numbers[6]! * NM;
  const from = loops.points - 1;
  const [dx, dy] = [x - loops.x[from]!, y - loops.y[from]!];
  const half = Math.sqrt(dx * dx + dy * dy) / 2;
  const sweep = 2 * Math.asin(Math.min(1, half / (numbers[0]! * NM)));
  loops.bend(Math.tan(sweep / 4) * (numbers[4] === 1 ? -1 : 1));
  loops.add(x, y, 0);
}
