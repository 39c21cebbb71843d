import { describe, expect, test } from 'vitest';
import type { Chip, Limit, Target } from '../../solver/chip/chip.ts';
import type { CellResult, Result } from '../../solver/chip/result.ts';
import { emptyChip, teeChip } from '../testing/chips.ts';
import { piece, resultOf, target } from '../testing/results.ts';
import { type Answer, placeName, placeRef, plainText } from './answer.ts';
import { verdicts } from './verdicts.ts';

const ORDER = { split: 0, cells: 1, pump: 2, made: 3, trust: 4 } as const;
const ask = (which: keyof typeof ORDER, chip: Chip, result: Result | null, trouble = ''): Answer =>
  verdicts({ chip, result, trouble })[ORDER[which]]!;
const text = (answer: Answer): string => plainText(answer.says).replaceAll('\u00a0', ' ');

const wish = (port: string, share: number, within = 0.02): Target => ({ port, share, within });
const withTargets = (...targets: Target[]): Chip => ({ ...teeChip(), targets });
const withLimits = (...limits: Limit[]): Chip => ({ ...teeChip(), limits });

describe('Does it split right?', () => {
  test('not asked is not yes', () => {
    const answer = ask('split', teeChip(), resultOf());
    expect(answer.standing).toBe('not asked');
    expect(text(answer)).toBe('No target is given.');
  });
  test('one', () => {
    const answer = ask(
      'split',
      withTargets(wish('well 1', 0.5)),
      resultOf({ targets: [target('well 1', 0.5, 0.504, true)] }),
    );
    expect(answer).toMatchObject({ standing: 'yes', culprit: 'port:well 1' });
    expect(text(answer)).toBe('Yes: well 1 is within 0.80 % of its target.');
  });
  test('two and eight, by their own noun', () => {
    const many = (n: number) => Array.from({ length: n }, (_, i) => i + 1);
    for (const [n, words] of [
      [2, 'Both wells'],
      [8, 'All eight wells'],
    ] as const) {
      const chip = withTargets(...many(n).map((i) => wish(`well ${i}`, 1 / n)));
      const targets = many(n).map((i) =>
        target(`well ${i}`, 1 / n, (1 / n) * (i === 2 ? 0.986 : 1.001), true),
      );
      expect(text(ask('split', chip, resultOf({ targets })))).toBe(
        `${words} within 1.4 % of their share; the worst is well 2.`,
      );
    }
  });
  test('mixed names are outlets; two hundred are counted in figures', () => {
    const names = Array.from({ length: 200 }, (_, i) => `${i % 2 ? 'a' : 'bb'}${i}`);
    const chip = withTargets(...names.map((name) => wish(name, 0.005)));
    const answer = ask(
      'split',
      chip,
      resultOf({ targets: names.map((name) => target(name, 0.005, 0.005, true)) }),
    );
    expect(text(answer)).toBe('All 200 outlets within 0.010 % of their share; the worst is bb0.');
    expect(answer.margin).toMatchObject({ kind: 'dots' });
    if (answer.margin?.kind === 'dots') expect(answer.margin.dots.length).toBeLessThanOrEqual(61);
  });
  test('missed, alone and with others', () => {
    const chip = withTargets(wish('well 1', 0.5), wish('well 2', 0.5), wish('in', 1));
    const one = [
      target('well 1', 0.5, 0.45, false),
      target('well 2', 0.5, 0.505, true),
      target('in', 1, 1, true),
    ];
    const answer = ask('split', chip, resultOf({ targets: one }));
    expect(answer).toMatchObject({ standing: 'no', culprit: 'port:well 1' });
    expect(text(answer)).toBe('No: well 1 is −10 % off, 2.0 % is allowed.');
    const two = [one[0]!, target('well 2', 0.5, 0.55, false), target('in', 1, 0.9, false)];
    expect(text(ask('split', chip, resultOf({ targets: two })))).toContain('two more miss as well.');
    expect(text(ask('split', chip, resultOf({ targets: two.slice(0, 2) })))).toContain(
      'one more misses as well.',
    );
  });
  test('what making may move is said beside it, and where it is more than is allowed', () => {
    const by = (likely: number) => ({ making: { worst: 2 * likely, likely } });
    const one = (likely: number): string =>
      text(
        ask(
          'split',
          withTargets(wish('well 1', 0.5)),
          resultOf({ targets: [{ ...target('well 1', 0.5, 0.504, true), ...by(likely) }] }),
        ),
      );
    expect(one(0)).toBe('Yes: well 1 is within 0.80 % of its target.');
    expect(one(0.004)).toBe('Yes: well 1 is within 0.80 %; making adds ± 0.40 %.');
    expect(one(0.022)).toBe('Yes: well 1 is within 0.80 %; making adds ± 2.2 %, 2.0 % is allowed.');
    const targets = [
      { ...target('well 1', 0.5, 0.5, true), ...by(0.03) },
      { ...target('well 2', 0.5, 0.5, true), ...by(0.01) },
    ];
    const both = ask('split', withTargets(wish('well 1', 0.5), wish('well 2', 0.5)), resultOf({ targets }));
    expect(text(both)).toBe('Both wells within 0.010 %; making adds ± 3.0 %, 2.0 % is allowed.');
    expect(both.culprit).toBe('port:well 1');
  });
  test('unresolved flow is not known', () => {
    const answer = ask(
      'split',
      withTargets(wish('well 1', 0.5)),
      resultOf({ targets: [target('well 1', 0.5, null, false)] }),
    );
    expect(answer.standing).toBe('unknown');
    expect(text(answer)).toBe('Not known: the flow at well 1 is too small to be resolved.');
  });
  test('unsolved says why, empty says so', () => {
    expect(text(ask('split', teeChip(), null, 'well 2 has no drive.'))).toBe(
      'Not known: well 2 has no drive.',
    );
    expect(text(ask('split', teeChip(), null))).toBe('Not solved yet.');
    expect(text(ask('split', emptyChip(), null))).toBe('Nothing is drawn yet.');
  });
});

describe('Do the cells survive?', () => {
  const bear: Limit = { name: 'suspended cells', shear: 1.5 };
  test('no limit is not yes', () => {
    const answer = ask('cells', teeChip(), resultOf());
    expect(answer).toMatchObject({ standing: 'not asked', culprit: 'channel:feed' });
    expect(text(answer)).toBe(
      'No limit is given; the highest wall shear is 0.800 Pa, in feed.'.replace('0.800', '0.800'),
    );
  });
  test('no limit and nothing known', () => {
    const still = resultOf({ channels: [{ id: 'feed', pieces: [piece({ peakWallShear: null })] }] });
    expect(text(ask('cells', teeChip(), still))).toBe('No limit is given.');
  });
  test('yes', () => {
    const answer = ask(
      'cells',
      withLimits(bear),
      resultOf({ limits: [{ name: 'suspended cells', limit: 1.5, worst: 0.8, where: 'feed#1', met: true }] }),
    );
    expect(answer).toMatchObject({
      standing: 'yes',
      culprit: 'channel:feed',
      margin: { kind: 'bar', over: false },
    });
    expect(text(answer)).toBe('Yes: at most 0.800 Pa in feed; suspended cells bear 1.50 Pa.');
  });
  test('no, alone and with another', () => {
    const limits = [{ name: 'suspended cells', limit: 1.5, worst: 1.83, where: 'junction:3', met: false }];
    const answer = ask('cells', withLimits(bear), resultOf({ limits }));
    expect(answer).toMatchObject({
      standing: 'no',
      culprit: 'junction:3',
      margin: { kind: 'bar', over: true },
    });
    expect(text(answer)).toBe('No: 1.83 Pa in junction 3; suspended cells: at most 1.50 Pa.');
    const two = withLimits(bear, { name: 'platelets', shear: 1 });
    const both = [...limits, { name: 'platelets', limit: 1, worst: 1.83, where: 'junction:3', met: false }];
    expect(text(ask('cells', two, resultOf({ limits: both })))).toBe(
      'No: 1.83 Pa in junction 3; platelets: at most 1.00 Pa, and one more limit missed.',
    );
  });
  test('a limit that could not be judged is not known', () => {
    const answer = ask(
      'cells',
      withLimits(bear),
      resultOf({
        limits: [{ name: 'suspended cells', limit: 1.5, worst: null, where: 'junction:2', met: null }],
      }),
    );
    expect(answer.standing).toBe('unknown');
    expect(text(answer)).toBe('Not known: suspended cells could not be judged in junction 2.');
    expect(ask('cells', withLimits(bear), resultOf()).standing).toBe('unknown');
  });
});

describe('Can the pump drive it?', () => {
  test('no pump given is not yes', () => {
    const answer = ask('pump', teeChip(), resultOf());
    expect(answer).toMatchObject({ standing: 'not asked', culprit: 'port:in' });
    expect(text(answer)).toBe('It needs 31.2 kPa at port in; no pump is given.');
  });
  test('a reservoir is no pump', () => {
    const chip = teeChip();
    const ports = chip.ports.map((port) =>
      port.id === 'in' ? { ...port, drive: { kind: 'head', head: 0.15 } as const } : port,
    );
    expect(text(ask('pump', { ...chip, ports }, resultOf()))).toBe(
      'It needs 31.2 kPa at port in, which its reservoir gives; what that holds is not stated.',
    );
  });
  test('sucking is said', () => {
    const ports = [
      { id: 'in', pressure: 0, flow: 1, share: 1 },
      { id: 'well 1', pressure: -2000, flow: -1, share: 1 },
    ];
    expect(text(ask('pump', teeChip(), resultOf({ ports })))).toBe(
      'It needs 2.00 kPa from port in to well 1, which sucks; no pump is given.',
    );
  });
  test('a pump that can, and one that cannot', () => {
    const pumped = {
      port: 'in',
      pressure: 31_200,
      flow: 1e-8 / 60,
      ratedPressure: 100_000,
      runTime: null,
      met: true,
    };
    const yes = ask('pump', teeChip(), resultOf({ pumps: [pumped] }));
    expect(yes).toMatchObject({ standing: 'yes', margin: { kind: 'bar', over: false } });
    expect(text(yes)).toBe('Yes: port in needs 31.2 kPa of the 100 kPa its pump can give.');
    const weak = { ...pumped, ratedPressure: 20_000, met: false };
    const finding = {
      kind: 'pump-pressure',
      severity: 'stop',
      where: 'port:in',
      says: 'The pump at in must hold 31.2 kPa, tubing included; it can do 20.0 kPa.',
      do: 'Widen.',
    } as const;
    const no = ask('pump', teeChip(), resultOf({ pumps: [weak], findings: [finding] }));
    expect(no).toMatchObject({ standing: 'no', culprit: 'port:in', margin: { over: true } });
    expect(text(no)).toContain('No: The pump at in must hold 31.2 kPa');
    // what the pump cannot do is no doubt about the numbers
    expect(ask('trust', teeChip(), resultOf({ findings: [finding] })).standing).toBe('yes');
  });
  test('a flow within its rate, and what runs out', () => {
    const moved = {
      port: 'in',
      pressure: 100,
      flow: 1e-8 / 60,
      ratedFlow: 1e-7 / 60,
      runTime: null,
      met: true,
    };
    expect(text(ask('pump', teeChip(), resultOf({ pumps: [moved] })))).toBe(
      'Yes: port in needs 10.0 µL/min of the 100 µL/min its pump can give.',
    );
    const { ratedFlow: _, ...held } = { ...moved, runTime: 600 };
    expect(text(ask('pump', teeChip(), resultOf({ pumps: [held] })))).toBe(
      'Yes: what port in holds lasts 10.0 min.',
    );
  });
  test('nothing drives', () =>
    expect(ask('pump', { ...teeChip(), ports: [] }, resultOf()).standing).toBe('unknown'));
});

describe('Can it be made?', () => {
  test('without a process the narrowest feature is named, and it is no yes', () => {
    const answer = ask('made', teeChip(), resultOf());
    expect(answer).toMatchObject({ standing: 'not asked', culprit: 'channel:up' });
    expect(text(answer)).toBe('The narrowest channel is 120 µm, up; no process is given.');
  });
  test('by a process; a stop is a no until it is accepted, and stands before a doubt', () => {
    const chip: Chip = { ...teeChip(), process: { kind: 'film-mask' } };
    expect(ask('made', chip, resultOf())).toMatchObject({ standing: 'yes' });
    expect(text(ask('made', chip, resultOf()))).toBe(
      'Yes, by soft moulding from a film mask: the narrowest channel is 120 µm, up.',
    );
    const doubt = {
      kind: 'edge',
      severity: 'warn',
      where: 'up',
      says: 'up is near.',
      do: 'Move it.',
    } as const;
    const stop = {
      kind: 'least-width',
      severity: 'stop',
      where: 'up',
      says: 'up is thin.',
      do: 'Widen.',
    } as const;
    const no = ask('made', chip, resultOf({ findings: [doubt, stop] }));
    expect(no).toMatchObject({ standing: 'no', culprit: 'channel:up' });
    expect(text(no)).toBe('No: up is thin, and one more finding.');
    const wall = { ...stop, says: 'The wall between up and In is thin.' };
    expect(text(ask('made', chip, resultOf({ findings: [wall] })))).toBe(
      'No: the wall between up and In is thin.',
    );
    const held = { ...stop, accepted: 'made before' };
    expect(ask('made', chip, resultOf({ findings: [held, doubt] })).standing).toBe('unknown');
    const yes = ask('made', chip, resultOf({ findings: [held] }));
    expect(yes.standing).toBe('yes');
    expect(text(yes)).toContain('one finding accepted.');
  });
  test('nothing drawn', () => expect(text(ask('made', emptyChip(), null))).toBe('Nothing is drawn yet.'));
});

describe('Can I trust it?', () => {
  const cell: CellResult = {
    id: 'junction:1',
    kind: 'junction',
    at: [0.02, 0.013],
    faces: [],
    portMatrix: [],
    peakWallShear: 1,
    peakAt: null,
    accuracy: 0.004,
  };
  test('solved, with the band', () => {
    const answer = ask('trust', teeChip(), resultOf({ cells: [cell] }));
    expect(answer).toMatchObject({ standing: 'yes', margin: { kind: 'band' } });
    expect(text(answer)).toBe('Within 0.40 %: one junction solved, Re at most 1.2.');
  });
  test('what is solved is told by its kinds, as the ledger and the sheet name them', () => {
    const of = (...kinds: readonly string[]): string =>
      text(
        ask(
          'trust',
          teeChip(),
          resultOf({ cells: kinds.map((kind, i) => ({ ...cell, id: `${kind}:${i}`, kind })) }),
        ),
      );
    expect(of('port', 'port')).toContain(': two holes solved, ');
    expect(of('port', 'bend', 'junction', 'via', 'port')).toContain(
      ': five junctions, bends and holes solved, ',
    );
    expect(of('chamber', 'step')).toContain(': two chambers and steps solved, ');
    expect(of()).not.toContain('solved');
  });
  test('ideal junctions are said', () => {
    const answer = ask('trust', teeChip(), resultOf({ junctions: 'ideal' }));
    expect(answer.standing).toBe('unknown');
    expect(text(answer)).toBe('Roughly: junctions are taken as ideal; Re at most 1.2.');
    expect(text(ask('trust', teeChip(), resultOf({ junctions: 'mixed', cells: [cell] })))).toBe(
      'Nearly: some junctions are still ideal, one junction solved; Re at most 1.2.',
    );
  });
  test('bands are said where they are known', () => {
    const bands = { share: 0.003, flow: 0.004, shear: 0.052, pressure: 0.01 };
    expect(text(ask('trust', teeChip(), resultOf({ cells: [cell], bands })))).toBe(
      'Splits within 0.30 %, wall shear within 5.2 %: one junction solved, Re at most 1.2.',
    );
    const imposed = text(ask('trust', teeChip(), resultOf({ cells: [cell], bands: { ...bands, share: 0 } })));
    expect(imposed).toContain('Splits follow from the drives, wall shear within 5.2 %');
    expect(text(ask('trust', teeChip(), resultOf({ junctions: 'ideal', bands })))).toBe(
      'Roughly: junctions are taken as ideal, splits may be off by 0.30 %; Re at most 1.2.',
    );
  });
  test('junctions on their way are counted', () => {
    const say = (waiting: number) =>
      plainText(
        verdicts({ chip: teeChip(), result: resultOf({ junctions: 'mixed' }), trouble: '', waiting })[4]!
          .says,
      );
    expect(say(1)).toBe('One junction is being solved; ideal until then. Re at most 1.2.');
    expect(say(15)).toContain('15 junctions are being solved');
  });
  test('nothing flows', () => {
    const still = resultOf({
      junctions: 'ideal',
      channels: [{ id: 'feed', pieces: [piece({ reynolds: null })] }],
    });
    expect(text(ask('trust', teeChip(), still))).toContain('nothing flows.');
  });
  test('what is dragged is roughly so', () => {
    const say = (waiting: number) =>
      plainText(
        verdicts({ chip: teeChip(), result: resultOf(), trouble: '', waiting, preview: true })[4]!.says,
      );
    expect(say(0).replaceAll('\u00a0', ' ')).toBe(
      'Roughly, while it is dragged: junctions are solved within 3.0 %. Re at most 1.2.',
    );
    expect(say(2)).toContain('some junctions are still ideal');
  });
  test('a doubt is told first', () => {
    const doubt = {
      kind: 'inertia',
      severity: 'warn',
      where: 'feed#1',
      says: 'Re is 80 in feed.',
      do: 'Slow the flow.',
    } as const;
    const answer = ask('trust', teeChip(), resultOf({ findings: [doubt, doubt] }));
    expect(answer).toMatchObject({ standing: 'unknown', culprit: 'channel:feed' });
    expect(text(answer)).toBe('With care: Re is 80 in feed, and one more doubt.');
  });
});

test('places by name and reference', () => {
  expect(
    ['', 'port:in', 'junction:3', 'feed#2', 'chamber:well', 'channel:channel 1', 'via:x'].map(placeName),
  ).toEqual(['the chip', 'port in', 'junction 3', 'feed', 'well', 'channel 1', 'via x']);
  expect(placeRef('feed#2', teeChip())).toBe('channel:feed');
  expect(placeRef('in', teeChip())).toBe('port:in');
  expect(placeRef('', teeChip())).toBeNull();
  expect(placeRef('nobody', teeChip())).toBeNull();
});
