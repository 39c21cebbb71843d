import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { FINDING_KINDS } from '../../solver/checks/kinds.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { readEdit } from '../../solver/chip/edit-read.ts';
import type { Finding } from '../../solver/problem/finding.ts';
import { type Case, chipOf, findings, line, ofKind, port } from './chips.ts';
import { clamp, film, layer, MADE_CASES, made, well } from './made-cases.ts';
import { SOLVED_CASES } from './solved-cases.ts';

/** Kinds whose remedy is a number, and so a button. */
const WITH_BUTTON = [
  'burst',
  'etch-merge',
  'hole-narrow',
  'keep-out',
  'layer-wall',
  'least-gap',
  'least-width',
  'loop-passes',
  'port-hole',
  'process-profile',
  'pump-flow',
  'pump-pressure',
  'roof-sags',
  'runs-out',
  'soft-roof',
  'too-deep',
  'tool-corner',
  'via-land',
  'wall-leans',
];

describe('each kind: one chip just passes, one just fails', () => {
  const CASES = [...MADE_CASES, ...SOLVED_CASES];
  test('every kind of finding has its case, and no case a kind of its own', () => {
    expect([...new Set(CASES.map(([kind]) => kind))].sort()).toEqual(Object.keys(FINDING_KINDS).sort());
  });

  test.each(CASES.map((one) => [one[0], one] as const))(
    '%s',
    (kind, [, passes, fails, value, threshold, options]) => {
      const of = (at: Case[1]): Finding[] =>
        (typeof at === 'function' ? at() : findings(at, options)).filter((finding) => finding.kind === kind);
      expect(of(passes), 'passes').toEqual([]);
      const found = of(fails);
      expect(found.length, 'fails').toBeGreaterThan(0);
      for (const { says, do: remedy, where } of found) {
        expect(says).toMatch(/\.$/);
        expect(remedy).toMatch(/\.$/);
        expect(where).toBeTypeOf('string');
      }
      if (value !== undefined) expect(found[0]!.value).toBeCloseTo(value, value < 0.01 ? 9 : 3);
      if (threshold === undefined) return;
      expect(found[0]!.threshold).toBeCloseTo(threshold, threshold < 0.01 ? 9 : 3);
    },
  );

  test('after its remedy a finding is gone', () => {
    const tried = new Set<string>();
    for (const [kind, , fails, , , options] of CASES) {
      if (typeof fails === 'function') continue;
      const [found] = findings(fails, options).filter((finding) => finding.kind === kind);
      if (!found!.remedy) continue;
      tried.add(kind);
      const mended = applyEdit(fails, readEdit(structuredClone(found!.remedy)));
      const left = findings(mended, options).filter((one) => one.kind === kind && one.where === found!.where);
      expect(left, kind).toEqual([]);
    }
    expect([...tried].sort()).toEqual(WITH_BUTTON);
  });

  test('a chamber is spanned by the largest circle inside', () => {
    const [found] = ofKind(film({ ...well(1500) }), 'roof-sags');
    expect(found).toMatchObject({ where: 'chamber:well', severity: 'warn' });
    expect(found!.value).toBeCloseTo(15, 1);
    expect(ofKind(film({ ...well(2100) }), 'roof-sags')[0]!.severity).toBe('stop');
    expect(ofKind(film({ ...well(1000) }), 'roof-sags')).toEqual([]);
  });

  test('where room is wanting to the right or above, the chip can be made larger', () => {
    const gone = (chip: ReturnType<typeof chipOf>, kind: string): void => {
      const [found] = ofKind(chip, kind);
      expect(found!.remedy!.label, kind).toMatch(/^make the chip /);
      expect(ofKind(applyEdit(chip, readEdit(structuredClone(found!.remedy))), kind), kind).toEqual([]);
    };
    const at = (x: number, diameter: number) => ({
      ports: [
        port('in', [6000, 12000], { flow: '1 uL/min' }),
        port('out', [x, 12000], { pressure: 0 }, diameter),
      ],
      outline: { width: 68000, height: 27000 },
    });
    // the hole reaches to 68.5 mm; its centre lies 2 mm from the side of 68 mm
    gone(chipOf(at(66000, 5000)), 'outside');
    gone(film(at(66000, 1000)), 'port-edge');
    // a via or port in the lower left would have to be moved with all that joins there: said in words
    const low = film({
      ports: [port('in', [6000, 1000], { flow: '1 uL/min' }), port('out', [66000, 12000], { pressure: 0 })],
      channels: [
        {
          id: 'a',
          layer: 'flow',
          path: [
            [6000, 1000],
            [6000, 12000],
            [66000, 12000],
          ],
          width: 200,
        },
      ],
    });
    expect(ofKind(low, 'port-edge')[0]).not.toHaveProperty('remedy');
  });

  test('a neck that a channel is drawn over is none', () => {
    const outline = [
      [30000, 11000],
      [34000, 11990],
      [38000, 11000],
      [38000, 13000],
      [34000, 12010],
      [30000, 13000],
    ];
    const waist = (width: number) =>
      ofKind(
        film({
          chambers: [{ id: 'waist', layer: 'flow', outline }],
          channels: [line('a', 12000, width)],
        }),
        'chamber-neck',
      );
    // the waist is 20 µm; a channel of 15 through it leaves its walls bare, one of 200 has walls of its own
    expect(waist(15).map(({ value }) => value! * 1e6)).toEqual([expect.closeTo(20, 3)]);
    expect(waist(200)).toEqual([]);
  });

  test('a keep-out holds of channels, chambers and holes, of its own layer alone where it names one', () => {
    const two = {
      layers: [
        { id: 'flow', depth: 100 },
        { id: 'upper', depth: 50 },
      ],
    };
    const inside = (more: object): string[] =>
      ofKind(chipOf({ ...clamp(11000), ...more }), 'keep-out').map(({ where }) => where);
    expect(inside({})).toEqual(['a']);
    expect(inside({ ...two, ...clamp(11000, { layer: 'upper' }) })).toEqual([]);
    expect(inside({ ...two, ...clamp(11000, { layer: 'flow' }) })).toEqual(['a']);
    // 500 off the clamp's right side at 34000, a hole of 1000 about 35000 touches; at 35001 it does not
    const hole = (x: number) =>
      inside({
        ...clamp(13000),
        channels: [
          line('a', 12000),
          {
            id: 'up',
            layer: 'flow',
            path: [
              [x, 12000],
              [x, 14000],
            ],
            width: 100,
          },
        ],
        ports: [
          port('in', [6000, 12000], { flow: '1 uL/min' }),
          port('out', [66000, 12000], { pressure: 0 }),
          port('tap', [x, 14000], { pressure: 0 }, 1000),
        ],
      });
    expect(hole(34499)).toEqual(['port:tap']);
    expect(hole(34501)).toEqual([]);
    expect(inside({ ...well(2000), ...clamp(12500) })).toEqual(['chamber:well']);
    expect(inside({ ...well(2000), ...clamp(13001) })).toEqual([]);
    // wholly inside, no outline meeting the other
    const whole = ofKind(
      chipOf({
        ...clamp(0, {
          outline: [
            [0, 0],
            [75000, 0],
            [75000, 27000],
            [0, 27000],
          ],
        }),
      }),
      'keep-out',
    );
    expect(whole.map(({ where, severity }) => `${where} ${severity}`).sort()).toEqual([
      'a stop',
      'port:a in stop',
      'port:a out stop',
    ]);
    const [named] = ofKind(chipOf(clamp(12000, { note: 'bolt head' })), 'keep-out');
    expect(named!.says).toBe('a lies in the keep-out clamp (bolt head).');
    expect(named!.remedy).toBeUndefined();
  });

  test('a tool rounds the corners of chambers and bends; one too thick does not fit', () => {
    const corners = ofKind(made('milling', well(1000)), 'tool-corner');
    expect(corners).toMatchObject([{ where: 'chamber:well', severity: 'note', threshold: 100e-6 }]);
    const thick = ofKind(made('milling', well(1000), { toolRadius: 501 }), 'tool-corner');
    expect(thick[0]!.severity).toBe('stop');
    const bend = {
      id: 'a',
      layer: 'flow',
      path: [
        [6000, 12000],
        [66000, 12000],
        [66000, 15000],
      ],
      width: 200,
    };
    const bent = (more: object) =>
      made('milling', {
        channels: [{ ...bend, ...more }],
        ports: [
          port('in', [6000, 12000], { flow: '1 uL/min' }),
          port('out', [66000, 15000], { pressure: 0 }),
        ],
      });
    const [sharp] = ofKind(bent({}), 'tool-corner');
    expect(sharp).toMatchObject({ where: 'a', severity: 'note' });
    expect(ofKind(applyEdit(bent({}), readEdit(sharp!.remedy)), 'tool-corner')).toEqual([]);
  });
});

describe('what is said of a chip', () => {
  test('without a process, only what every process must obey', () => {
    const thin = { channels: [line('a', 12000, 3)] };
    expect(ofKind(chipOf(thin), 'least-width')).toEqual([]);
    expect(ofKind(film(thin), 'least-width')).toHaveLength(1);
  });

  test('numbers of the workshop stand in place of the usual ones', () => {
    const own = made(
      'film-mask',
      { channels: [line('a', 12000, 40)], ...layer({ depth: 30 }) },
      { leastWidth: 50 },
    );
    expect(ofKind(own, 'least-width')[0]).toMatchObject({ threshold: 50e-6, severity: 'stop' });
    expect(ofKind(own, 'least-width')[0]!.says).toContain('own number');
  });

  test('accepted findings go on being listed, with the reason', () => {
    const chip = film({
      channels: [line('a', 12000, 24)],
      accepted: [{ kind: 'least-width', where: 'a', reason: 'held in three runs' }],
    });
    expect(ofKind(chip, 'least-width')).toMatchObject([{ where: 'a', accepted: 'held in three runs' }]);
  });

  test('many of a kind are listed to forty, the worst first, and the rest counted', () => {
    const channels = Array.from({ length: 60 }, (_, i) => ({
      id: `c${i}`,
      layer: 'flow',
      path: [
        [6000, 2000 + 400 * i],
        [66000, 2000 + 400 * i],
      ],
      width: 10 + (i % 10),
    }));
    const ports = channels.flatMap(({ id }, i) => [
      port(`${id} in`, [6000, 2000 + 400 * i], { flow: '1 nL/min' }, 0),
      port(`${id} out`, [66000, 2000 + 400 * i], { pressure: 0 }, 0),
    ]);
    const found = ofKind(film({ channels, ports, ...layer({ depth: 10 }) }), 'least-width');
    expect(found).toHaveLength(40);
    expect(found[0]!.value).toBeCloseTo(10e-6, 9);
    expect(found.at(-1)!.says).toContain('20 more');
  });

  test('the eight-way demo is clean for its process', () => {
    const text = readFileSync(join(import.meta.dirname, '../../assets/demo/eight-way-splitter.json'), 'utf8');
    const chip = readDescription(text);
    expect(chip.process).toEqual({ kind: 'film-mask' });
    expect(findings(chip).filter(({ severity }) => severity !== 'note')).toEqual([]);
  });

  test('nothing fires on a clean demo and on a clean chip with a process, junctions solved', () => {
    const text = readFileSync(join(import.meta.dirname, '../../assets/demo/gravity-crossing.json'), 'utf8');
    for (const chip of [readDescription(text), film()]) {
      expect(findings(chip, { accuracy: 0.01 }), chip.name).toEqual([]);
    }
  });
});
