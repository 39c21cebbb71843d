import { inflateSync } from 'node:zlib';
import { NM_PER_M, unitSize } from '../../../solver/chip/units.ts';
import { POINTS_PER_MM } from './page.ts';
import { LoopsByLayer, type ReadMask, unreadable } from './read.ts';

const NM = unitSize('mm') * NM_PER_M;

/** Reads PDF as `writePdf` writes it: the marked paths of its forms, and the matrix and places of its pages. */
export function readPdf(bytes: Uint8Array): ReadMask {
  const loops = new LoopsByLayer();
  let shifts: [number, number][] | undefined;
  let off = 0;
  for (const { dictionary, body } of streams(bytes)) {
    if (/\/Subtype \/Form/.test(dictionary)) off = Math.max(off, readForm(textOf(dictionary, body), loops));
    else if (!/\/(Length1|Subtype|Type)\b/.test(dictionary)) {
      const text = textOf(dictionary, body);
      if (!text.includes('/Chip Do')) continue;
      const placed = readPlaces(text);
      if (shifts && JSON.stringify(shifts) !== JSON.stringify(placed)) throw unreadable('its pages differ');
      shifts = placed;
    }
  }
  if (!shifts) throw unreadable('it has no page');
  return { loops: loops.map, shifts, offArc: off };
}

function* streams(bytes: Uint8Array): Generator<{ dictionary: string; body: Uint8Array }> {
  const whole = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  for (let at = 0; ; ) {
    const from = whole.indexOf('stream\n', at);
    if (from < 0) return;
    const head = whole.lastIndexOf('obj\n', from);
    const dictionary = whole.toString('latin1', head, from);
    const length = Number(/\/Length (\d+)/.exec(dictionary)?.[1]);
    const start = from + 'stream\n'.length;
    if (!(length >= 0) || start + length > whole.length) throw unreadable('a stream is cut short');
    yield { dictionary, body: whole.subarray(start, start + length) };
    at = start + length + 'endstream'.length;
  }
}

function textOf(dictionary: string, body: Uint8Array): string {
  const plain = dictionary.includes('/FlateDecode') ? inflateSync(body) : Buffer.from(body);
  return plain.toString('latin1');
}

/** Loops by their marks; returns how far the curves lie off the arcs they stand for, nm. */
function readForm(text: string, loops: LoopsByLayer): number {
  let off = 0;
  let layer = '';
  let x = 0;
  let y = 0;
  let loop: { x: number; y: number; bulge: number; tag: number }[] = [];
  for (const line of text.split('\n')) {
    const words = line.split(' ');
    const operator = words.pop();
    const at = (i: number): number => Number(words[i]) * NM;
    switch (operator) {
      case 'BMC':
        layer = words[0]!.slice(1);
        break;
      case 'm':
        [x, y] = [at(0), at(1)];
        loop = [{ x, y, bulge: 0, tag: 0 }];
        break;
      case 'l':
        [x, y] = [at(0), at(1)];
        loop.push({ x, y, bulge: 0, tag: 0 });
        break;
      case 'c': {
        const { bulge, apart } = arcUnder(x, y, at(0), at(1), at(2), at(3), at(4), at(5));
        off = Math.max(off, apart);
        loop[loop.length - 1]!.bulge = bulge;
        [x, y] = [at(4), at(5)];
        loop.push({ x, y, bulge: 0, tag: 0 });
        break;
      }
      case 'h': {
        const [first, last] = [loop[0]!, loop[loop.length - 1]!];
        if (loop.length > 1 && first.x === last.x && first.y === last.y) loop.pop();
        loops.add(layer, loop);
        break;
      }
    }
  }
  return off;
}

/** The arc with a cubic's ends and its middle point, and how far the cubic lies off it. */
function arcUnder(
  x0: number,
  y0: number,
  ax: number,
  ay: number,
  bx: number,
  by: number,
  x1: number,
  y1: number,
): { bulge: number; apart: number } {
  const chord = Math.hypot(x1 - x0, y1 - y0);
  const point = (t: number): [number, number] => {
    const s = 1 - t;
    const [p, q, r, w] = [s * s * s, 3 * s * s * t, 3 * s * t * t, t * t * t];
    return [p * x0 + q * ax + r * bx + w * x1, p * y0 + q * ay + r * by + w * y1];
  };
  const [mx, my] = point(0.5);
  // to the right of the chord is the outer side of a counter-clockwise arc
  const sagitta = ((mx - x0) * (y1 - y0) - (my - y0) * (x1 - x0)) / chord;
  const bulge = (2 * sagitta) / chord;
  if (bulge === 0) return { bulge, apart: 0 };
  const sweep = 4 * Math.atan(bulge);
  const radius = chord / 2 / Math.sin(sweep / 2);
  const reach = Math.cos(sweep / 2) * radius;
  const cx = (x0 + x1) / 2 - ((y1 - y0) / chord) * reach;
  const cy = (y0 + y1) / 2 + ((x1 - x0) / chord) * reach;
  let apart = 0;
  for (let i = 1; i < 8; i++) {
    const [px, py] = point(i / 8);
    apart = Math.max(apart, Math.abs(Math.hypot(px - cx, py - cy) - Math.abs(radius)));
  }
  return { bulge, apart };
}

function readPlaces(text: string): [number, number][] {
  const matrix = /q (\S+) 0 0 -(\S+) \S+ \S+ cm/.exec(text);
  if (Number(matrix?.[1]) !== POINTS_PER_MM || Number(matrix?.[2]) !== POINTS_PER_MM)
    throw unreadable('it is not at true size');
  return [...text.matchAll(/q 1 0 0 1 (\S+) (\S+) cm \/Chip Do Q/g)].map(([, x, y]) => [
    Number(x) * NM,
    Number(y) * NM,
  ]);
}
