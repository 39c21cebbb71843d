import { parseGDS, RecordType } from 'gdsii';
import { describe, expect, test } from 'vitest';
import { inverse8, writeGdsii } from '../../main/export/mask/gdsii.ts';
import { readGdsii } from '../../main/export/mask/read-gdsii.ts';
import { areaOf, perimeterOf } from '../../main/export/mask/shapes.ts';
import { channel, chipOf, layer, port } from '../chip/drawings.ts';
import { randomDrawing } from '../chip/random-drawing.ts';
import { apart, BARE, bend, modelOf } from './mask-drawings.ts';

const hex = (bytes: Uint8Array): string => Buffer.from(bytes).toString('hex').toUpperCase();

/** A bar from (10, 10) to (30, 10) µm, 4 µm wide, on a chip of 40 by 20 µm. */
const bar = () =>
  chipOf({
    name: 'bar',
    outline: { width: 40_000, height: 20_000 },
    layers: [layer('a')],
    channels: [
      channel(
        'c',
        [
          [10, 10],
          [30, 10],
        ],
        4,
        { layer: 'a' },
      ),
    ],
  });

describe('GDSII', () => {
  // Worked by hand from the published structure of the stream (Calma GDSII stream format, release 6.0; record
  // codes as listed in its manual). Each record: length, type, data type, data.
  test('a bar is these bytes', () => {
    const stamp = '07EA 000C 0001 000C 0022 0038'; // 2026-12-01 12:34:56
    const wanted = [
      '0006 0002 0258', // HEADER, release 600
      `001C 0102 ${stamp} ${stamp}`, // BGNLIB
      '0012 0206 4348 414E 4E45 4C57 5249 4748 5400', // LIBNAME CHANNELWRIGHT, padded
      '0014 0305 3E41 8937 4BC6 A7F0 3944 B82F A09B 5A53', // UNITS 1e-3, 1e-9
      `001C 0502 ${stamp} ${stamp}`, // BGNSTR
      '0008 0606 4348 4950', // STRNAME CHIP
      '0004 0800', // BOUNDARY
      '0006 0D02 0001', // LAYER 1
      '0006 0E02 0000', // DATATYPE 0
      '002C 1003', // XY, five points in nm
      '00002710 00001F40', // 10000, 8000
      '00007530 00001F40', // 30000, 8000
      '00007530 00002EE0', // 30000, 12000
      '00002710 00002EE0', // 10000, 12000
      '00002710 00001F40',
      '0004 1100', // ENDEL
      '0004 0700', // ENDSTR
      '0004 0400', // ENDLIB
    ];
    expect(hex(writeGdsii(modelOf(bar(), BARE)))).toBe(wanted.join('').replaceAll(' ', ''));
  });

  // Excess-64 numbers as the same manual defines them. 1e-9 is 2^84 / 1e9 = 0x44B82FA09B5A52.CB… times 16^-21.
  // Writers that go through doubles end it in 54; the exact value is nearer to 53.
  test('its numbers', () => {
    expect(hex(inverse8(1))).toBe('4110000000000000');
    expect(hex(inverse8(16))).toBe('4010000000000000');
    expect(hex(inverse8(3))).toBe('4055555555555555');
    expect(hex(inverse8(1e3))).toBe('3E4189374BC6A7F0');
    expect(hex(inverse8(1e9))).toBe('3944B82FA09B5A53');
  });

  test('another reader (npm gdsii) finds the same polygons, closed, of at most 200 points', () => {
    for (const chip of [bend(), ...[1, 2, 3].map((seed) => randomDrawing(seed))]) {
      const model = modelOf(chip, { labels: true });
      const bytes = writeGdsii(model);
      const theirs = new Map<string, { x: number; y: number; bulge: 0; tag: 0 }[][]>();
      let at = { layer: 0, datatype: 0, kind: 0 };
      let units: number[] = [];
      for (const { tag, data } of parseGDS(bytes)) {
        if (tag === RecordType.UNITS) units = Object.values(data as object).map(Number);
        else if (tag === RecordType.BOUNDARY || tag === RecordType.TEXT)
          at = { layer: 0, datatype: 0, kind: tag };
        else if (tag === RecordType.LAYER) at.layer = Number(data);
        else if (tag === RecordType.DATATYPE) at.datatype = Number(data);
        else if (tag === RecordType.XY && at.kind === RecordType.BOUNDARY) {
          const points = data as [number, number][];
          expect(points.length).toBeLessThanOrEqual(200);
          expect(points[points.length - 1]).toEqual(points[0]);
          const key = `${at.layer}/${at.datatype}`;
          const loop = points.slice(0, -1).map(([x, y]) => ({ x, y, bulge: 0 as const, tag: 0 as const }));
          theirs.set(key, [...(theirs.get(key) ?? []), loop]);
        }
      }
      expect(units[0]).toBeCloseTo(1e-3, 15);
      expect(units[1]! / 1e-9).toBeCloseTo(1, 12);
      const ours = readGdsii(bytes).loops;
      expect([...theirs.keys()].sort()).toEqual([...ours.keys()].sort());
      for (const [key, loops] of theirs) expect(loops).toEqual(ours.get(key)!.edges());
      // what they cover together is the drawing: no piece lost, none twice
      for (const plane of model.planes) {
        if (plane.cavities.length === 0) continue;
        const loops = theirs.get(`${plane.number}/0`)!;
        const within = model.settings.chordError * perimeterOf(plane.cavities);
        expect(apart(plane.cavities, loops, 10)).toBeLessThanOrEqual(within);
        const sum = areaOf(loops.map((loop) => [loop]));
        expect(Math.abs(sum - areaOf(plane.cavities))).toBeLessThanOrEqual(within);
      }
    }
  });

  test('a wafer is one structure set many times, rows of equal length as an array', () => {
    const model = modelOf(bar(), {
      ...BARE,
      wafer: { diameter: 1_000_000, edge: 0, pitch: [100_000, 50_000] },
    });
    const { shifts } = readGdsii(writeGdsii(model));
    const places = model.wafer!.centres.map(([x, y]) => [x - model.centre[0], y - model.centre[1]]);
    expect(places.length).toBeGreaterThan(100);
    const sorted = (list: readonly (readonly number[])[]) => list.map(String).sort();
    expect(sorted(shifts)).toEqual(sorted(places));
    expect(model.wafer!.blocks.length).toBeLessThan(places.length / 5);
  });

  test('names in any script survive as escapes', () => {
    const names = ['α-β', 'כניסה', 'مدخل', 'x²', 'a\\U+0041'];
    const chip = { ...bar(), ports: names.map((id, i) => port(id, [10 + i, 10], 0, 'a')) };
    const texts: string[] = [];
    for (const { tag, data } of parseGDS(writeGdsii(modelOf(chip))))
      if (tag === RecordType.STRING) texts.push(String(data).replaceAll('\0', ''));
    const read = texts.map((text) =>
      text.replace(/\\U\+([0-9A-F]{4})/g, (_, code: string) =>
        String.fromCharCode(Number.parseInt(code, 16)),
      ),
    );
    for (const name of names) expect(read).toContain(name);
    for (const text of texts) expect(text).toMatch(/^[\x20-\x7e]*$/);
    expect(read.join(' ')).toMatch(/1 user unit = 1 micrometre/);
    expect(read.join(' ')).toMatch(/Not for diagnosis/);
  });
});
