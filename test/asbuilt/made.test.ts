import { describe, expect, test } from 'vitest';
import { madeChip } from '../../solver/asbuilt/made.ts';
import { readMeasured } from '../../solver/asbuilt/read-measured.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { solve } from '../../solver/solve.ts';
import { cross, table } from './chips.ts';

const IDEAL = { junctions: 'ideal' } as const;
const made = (text: string, chip: Chip = cross()) => madeChip(chip, readMeasured(table(text), chip));
const layerOf = (chip: Chip) => chip.layers[0]!;
const channel = (chip: Chip, id: string) => chip.channels.find((one) => one.id === id)!;

describe('what measurements make of a chip', () => {
  test('a layer’s depth and a channel’s width take the place of the drawn ones, their uncertainty that of the tolerance', () => {
    const { chip, measured, assumed } = made(
      'part,what,value,uncertainty\nflow,depth,18 um,0.2 um\nb,width,1.1 mm,1 %',
    );
    expect(layerOf(chip).depth).toBe(18_000);
    expect(layerOf(chip).tolerance).toEqual({ depth: { length: 200 }, width: { length: 10_000 } });
    expect(channel(chip, 'b')).toMatchObject({
      width: [1_100_000, 1_100_000],
      tolerance: { width: { length: 11_000 } },
    });
    // What was not measured stays as drawn, to the very part.
    expect(channel(chip, 'a')).toBe(channel(cross(), 'a').id === 'a' ? channel(chip, 'a') : null);
    expect(channel(chip, 'a').tolerance).toBeUndefined();
    expect([measured, assumed]).toEqual([1, 3]);
    expect(chip.name).toBe('test, as built');
  });

  test('by hand: b 10 % wider takes 1.1 of 2.1 of what comes in, d at 18 of 20 µm depth 0.9³ of its flow', () => {
    const wide = solve(made('part,what,value\nb,width,1100').chip, IDEAL);
    expect(wide.ports[1]!.share!).toBeCloseTo(1.1 / 2.1, 3);
    const deep = solve(made('part,what,value\nd,depth,18\nflow,depth,20').chip, IDEAL);
    expect(deep.ports[3]!.share!).toBeCloseTo(0.9 ** 3 / (1 + 0.9 ** 3), 3);
  });

  test('several depths of a layer: their mean, open by twice its standard error and what is stated', () => {
    const { chip } = made(
      'part,what,value,uncertainty\nflow,depth,19,0.3\nflow,depth,20,0.3\nflow,depth,21,0.3',
    );
    expect(layerOf(chip).depth).toBe(20_000);
    // scatter: variance 1 µm² of three, 4 · 1/3; stated 0.3
    expect(layerOf(chip).tolerance!.depth).toEqual({ length: Math.round(1000 * Math.sqrt(0.09 + 4 / 3)) });
  });

  test('depths at three places: a plane, each channel at its middle', () => {
    // z = 18 + x/20 + y/10 in µm, x and y in mm
    const { chip, says } = made(
      'part,what,value,x,y\nflow,depth,18 um,0 mm,0 mm\nflow,depth,20 um,40 mm,0 mm\nflow,depth,20 um,0 mm,20 mm',
    );
    // middle of a: (19, 16.5) mm
    expect(channel(chip, 'a').depth).toBe(Math.round(1000 * (18 + 19 / 20 + 16.5 / 10)));
    expect(channel(chip, 'd').depth).toBe(Math.round(1000 * (18 + 41 / 20 + 9.5 / 10)));
    // all channels' middle: (30, 13) mm
    expect(layerOf(chip).depth).toBe(Math.round(1000 * (18 + 30 / 20 + 13 / 10)));
    expect(says.join(' ')).toMatch(/plane through 3 places/);
  });

  test('depths on one line show no tilt across it: the mean', () => {
    const { chip } = made(
      'part,what,value,x,y\nflow,depth,18 um,0 mm,5 mm\nflow,depth,20 um,20 mm,5 mm\nflow,depth,22 um,40 mm,5 mm',
    );
    expect(layerOf(chip).depth).toBe(20_000);
    expect(channel(chip, 'a').depth).toBeUndefined();
  });

  test('widths along a channel: a straight line; two depths along it: the one of equal resistance', () => {
    const { chip } = made(
      'part,what,value,along\na,width,1000,0 mm\na,width,1040,10 mm\na,width,1080,20 mm\nc,depth,18 um,5 mm\nc,depth,22 um,18 mm',
    );
    const length = Math.hypot(22, 7);
    expect(channel(chip, 'a').width[0]).toBe(1_000_000);
    expect(channel(chip, 'a').width[1]).toBeCloseTo(1_000_000 + 4000 * length, -1);
    // c is 23.09 mm long: half way between the places lies 11.5 mm
    const part = 11.5 / length;
    const mean = part * 18 ** -3 + (1 - part) * 22 ** -3;
    expect(channel(chip, 'c').depth! / 1000).toBeCloseTo(mean ** (-1 / 3), 1);
  });

  test('a bias moves every width of the layer that was not measured itself, and its doubt is common', () => {
    const { chip } = made('part,what,value,uncertainty\nflow,bias,-20 um,2 um\nb,width,1000,1');
    expect(channel(chip, 'a').width).toEqual([980_000, 980_000]);
    expect(channel(chip, 'b').width).toEqual([1_000_000, 1_000_000]);
    expect(layerOf(chip).tolerance!.width).toEqual({ length: 12_000 });
    expect(layerOf(chip).tolerance!.common).toBeCloseTo(2 / 12, 9);
  });

  test('only channels measured: the junctions take their mean depth', () => {
    const { chip } = made('part,what,value\na,depth,18\nb,depth,19');
    expect(layerOf(chip).depth).toBe(18_500);
  });

  test('a place on a channel is a distance along it', () => {
    const at = made(
      'part,what,value,x,y\na,width,990,19 mm,16.5 mm\na,width,1010,30 mm,13 mm\na,width,970,8 mm,20 mm',
    );
    expect(channel(at.chip, 'a').width[0]).toBeCloseTo(970_000, -1);
    expect(channel(at.chip, 'a').width[1]).toBeCloseTo(1_010_000, -1);
  });

  test('round bores stay round', () => {
    const pipes = cross({
      layers: [{ id: 'flow', depth: 300, fillet: 0, profile: { kind: 'circle' } }],
      channels: cross().channels.map(({ id, path }) => ({
        id,
        layer: 'flow',
        path: path.map(([x, y]) => [x / 1000, y / 1000]),
        width: 300,
      })),
    });
    const { chip } = made('part,what,value\nflow,depth,290\nb,width,280', pipes);
    expect(channel(chip, 'a').width).toEqual([290_000, 290_000]);
    expect(channel(chip, 'b')).toMatchObject({ width: [280_000, 280_000], depth: 280_000 });
    expect(solve(chip, IDEAL).ports[0]!.share).toBeGreaterThan(0.5);
  });

  test('the edit leads from the drawn chip to the made one, and a chip measured as drawn is the drawn one', () => {
    const drawn = cross();
    const { chip, edit } = made('part,what,value\nb,width,1100\nflow,depth,19', drawn);
    expect({ ...applyEdit(drawn, edit), name: chip.name }).toEqual(chip);
    const same = made('part,what,value,uncertainty\nb,width,1000,0\nflow,depth,20,0', drawn);
    const [before, after] = [solve(drawn, IDEAL), solve(same.chip, IDEAL)];
    expect(after.ports.map(({ flow }) => flow)).toEqual(before.ports.map(({ flow }) => flow));
  });

  test('measured without doubt on all counts: no band', () => {
    const rows = ['flow,depth,20,0', ...['a', 'b', 'c', 'd'].map((id) => `${id},width,1000,0`)].join('\n');
    const result = solve(made(`part,what,value,uncertainty\n${rows}`).chip, IDEAL);
    expect(result.making).toBeUndefined();
  });

  test('doubt about one width is carried to the shares: ½ of 2 %, once', () => {
    const rows = [
      'flow,depth,20,0',
      'a,width,1000,20',
      'b,width,1000,0',
      'c,width,1000,0',
      'd,width,1000,0',
    ].join('\n');
    const result = solve(made(`part,what,value,uncertainty\n${rows}`).chip, IDEAL);
    expect(result.ports[0]!.making!.share.worst).toBeCloseTo(0.01, 3);
    expect(result.ports[0]!.making!.share.chief).toMatchObject({
      what: 'width',
      of: 'channel',
      id: 'a',
      part: 1,
    });
    expect(result.ports[2]!.making!.share.worst).toBeLessThan(1e-6);
  });
});
