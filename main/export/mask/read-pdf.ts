import { inflateSync } from 'node:zlib';
import { NM_PER_M, unitSize } from '../../../solver/chip/units.ts';
import { numberIn } from './bytes.ts';
import type { Loops } from './loops.ts';
import { POINTS_PER_MM } from './page.ts';
import { LoopsByLayer, type ReadMask, unreadable } from './read.ts';

const NM = unitSize('mm') * NM_PER_M;

/** Reads PDF as `writePdf` writes it: the marked paths of its forms, and the matrix and places of its pages. */
export function readPdf(bytes: Uint8Array): ReadMask {
  const loops = new LoopsByLayer();
  let shifts: [number, number][] | undefined;
  let off = 0;
  for (const { dictionary, body } of streams(bytes)) {
    if (/\/Subtype \/Form/.test(dictionary)) off = Math.max(off, readForm(plain(dictionary, body), loops));
    else if (!/\/(Length1|Subtype|Type)\b/.test(dictionary)) {
      const text = plain(dictionary, body).toString('latin1');
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

function plain(dictionary: string, body: Uint8Array): Buffer {
  return dictionary.includes('/FlateDecode') ? inflateSync(body) : Buffer.from(body);
}

const SPACE = 0x20;
const LINE_FEED = 0x0a;
const SLASH = 0x2f;
/** Bytes of a point: two numbers and an operator, a space after each. */
const LEAST_POINT = 6;
/** Operators of one letter; the others are not of paths, but for the marks. */
const MOVE = 0x6d;
const LINE = 0x6c;
const CURVE = 0x63;
const CLOSE = 0x68;

/** Loops by their marks, line by line: numbers, then an operator; returns how far curves lie off their arcs, nm. */
function readForm(bytes: Buffer, layers: LoopsByLayer): number {
  let off = 0;
  let loops: Loops | undefined;
  let x = 0;
  let y = 0;
  const numbers = new Float64Array(8);
  for (let at = 0; at < bytes.length; ) {
    const start = at;
    let count = 0;
    let word = at;
    for (; at < bytes.length && bytes[at] !== LINE_FEED; at++) {
      if (bytes[at] !== SPACE) continue;
      if (count < numbers.length && bytes[start] !== SLASH) numbers[count++] = numberIn(bytes, word, at) * NM;
      word = at + 1;
    }
    const end = at;
    at += 1;
    if (bytes[start] === SLASH)
      loops = layers.of(
        bytes.toString('latin1', start + 1, bytes.indexOf(SPACE, start)),
        (bytes.length - at) / LEAST_POINT,
      );
    if (end - word !== 1 || !loops) continue;
    const operator = bytes[word];
    if (count !== (operator === CURVE ? 6 : operator === MOVE || operator === LINE ? 2 : count))
      throw unreadable('a path has too few numbers');
    switch (operator) {
      case MOVE:
      case LINE:
        x = numbers[0]!;
        y = numbers[1]!;
        loops.add(x, y, 0);
        break;
      case CURVE: {
        const n = numbers;
        const arc = arcUnder(x, y, n[0]!, n[1]!, n[2]!, n[3]!, n[4]!, n[5]!);
        off = Math.max(off, arc.apart);
        loops.bend(arc.bulge);
        x = n[4]!;
        y = n[5]!;
        loops.add(x, y, 0);
        break;
      }
      case CLOSE:
        loops.dropReturn();
        loops.close();
        break;
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
  const chord = length(x1 - x0, y1 - y0);
  const mx = cubicAt(0.5, x0, ax, bx, x1);
  const my = cubicAt(0.5, y0, ay, by, y1);
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
    const px = cubicAt(i / 8, x0, ax, bx, x1);
    const py = cubicAt(i / 8, y0, ay, by, y1);
    apart = Math.max(apart, Math.abs(length(px - cx, py - cy) - Math.abs(radius)));
  }
  return { bulge, apart };
}

const length = (x: number, y: number): number => Math.sqrt(x * x + y * y);

function cubicAt(t: number, from: number, a: number, b: number, to: number): number {
  const s = 1 - t;
  return s * s * s * from + 3 * s * s * t * a + 3 * s * t * t * b + t * t * t * to;
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
