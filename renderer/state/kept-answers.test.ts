import { expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import type { Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';
import type { Solved } from '../solving/solver.ts';
import { teeChip } from '../testing/chips.ts';
import { verdicts } from '../verdict/verdicts.ts';
import type { KeptView } from './desk.ts';
import { answersKept, fingerprint, keepAnswers } from './kept-answers.ts';
import { createStore } from './store.ts';

const chip = teeChip();
const result = solve(chip, { junctions: 'ideal' });
const now = { by: 'index-1.js', units: {}, chip };

const solvedWith = (patch: Partial<Solved> = {}): Solved => ({
  chip,
  result,
  problem: null,
  graph: null,
  graphChip: null,
  busy: false,
  waiting: 0,
  ...patch,
});

/** What is kept of a page that has come to rest so, after what was kept before; all that was kept, in turn. */
async function keptOf(
  solved: Solved,
  before: KeptView = {},
  open: { readonly chip?: Chip; readonly mode?: string } = {},
): Promise<readonly KeptView[]> {
  const store = createStore(solvedWith({ busy: true }));
  const kept: KeptView[] = [];
  const stop = keepAnswers(
    {
      chip: () => open.chip ?? chip,
      project: createStore({ mode: open.mode ?? 'kept' }) as never,
      solver: { solved: store },
      keptView: () => before,
      keepView: (patch) => kept.push(patch),
    },
    { by: now.by, units: () => ({}) },
    0,
  );
  store.set(solved);
  await new Promise((done) => setTimeout(done, 20));
  stop();
  return kept;
}

test('answers at rest are kept, and hold for the same chip read anew from its description', async () => {
  const [view, ...more] = await keptOf(solvedWith());
  expect(more).toEqual([]);
  const again = readDescription(writeDescription(chip), '');
  expect(answersKept(JSON.parse(JSON.stringify(view)), { ...now, chip: again })).toEqual(
    verdicts({ chip, result, trouble: '', waiting: 0 }),
  );
});

test('what is not final, not of the open chip, or in a project only to be read is not kept', async () => {
  expect(await keptOf(solvedWith({ waiting: 1 }))).toEqual([]);
  expect(await keptOf(solvedWith({ busy: true, waiting: 0 }))).toEqual([]);
  expect(await keptOf(solvedWith({ result: null as Result | null }))).toEqual([]);
  expect(await keptOf(solvedWith(), {}, { chip: { ...chip } })).toEqual([]);
  expect(await keptOf(solvedWith(), {}, { mode: 'read-only' })).toEqual([]);
});

test('a project that is only looked at is not written: the same answers are not kept again', async () => {
  const [view] = await keptOf(solvedWith());
  expect(await keptOf(solvedWith(), view)).toEqual([]);
});

test('answers hold for no other chip, build or units', async () => {
  const [view] = await keptOf(solvedWith());
  expect(answersKept(view, now)).not.toBeNull();
  const [feed, ...others] = chip.channels;
  const wider = { ...feed!, width: [feed!.width[0] + 1, feed!.width[1]] as const };
  expect(answersKept(view, { ...now, chip: { ...chip, channels: [wider, ...others] } })).toBeNull();
  expect(answersKept(view, { ...now, by: 'index-2.js' })).toBeNull();
  expect(answersKept(view, { ...now, units: { pressure: 'psi' } })).toBeNull();
});

test('chips are told apart by whatever they hold, not by the order in which it is written', () => {
  const own = fingerprint(chip);
  const [feed, ...others] = chip.channels;
  const turned = Object.fromEntries(Object.entries(chip).reverse()) as unknown as Chip;
  expect(fingerprint(turned)).toBe(own);
  const channels = [{ ...feed!, depth: undefined } as unknown as typeof feed & object, ...others];
  expect(fingerprint({ ...chip, channels })).toBe(own);
  const changed: readonly Chip[] = [
    { ...chip, name: `${chip.name}.` },
    { ...chip, channels: [...others, feed!] },
    { ...chip, channels: others },
    {
      ...chip,
      channels: [{ ...feed!, id: others[0]!.id }, { ...others[0]!, id: feed!.id }, ...others.slice(1)],
    },
    { ...chip, channels: [{ ...feed!, width: [feed!.width[0], feed!.width[1] + 1] }, ...others] },
    { ...chip, channels: [{ ...feed!, path: [...feed!.path].reverse() }, ...others] },
    { ...chip, channels: [{ ...feed!, bendRadius: feed!.bendRadius + 1 }, ...others] },
    { ...chip, outline: { ...chip.outline, width: chip.outline.height, height: chip.outline.width } },
  ];
  const marks = [chip, ...changed].map(fingerprint);
  expect(new Set(marks).size).toBe(marks.length);
});

test('a thousand chips that differ by a nanometre here or there have a thousand fingerprints', () => {
  const marks = new Set<string>();
  for (let i = 0; i < 1000; i += 1) {
    const channels = chip.channels.map((channel, k) =>
      k === i % chip.channels.length
        ? { ...channel, width: [channel.width[0] + Math.floor(i / 2), channel.width[1] + (i % 2)] as const }
        : channel,
    );
    marks.add(fingerprint({ ...chip, name: `trial ${i % 7}`, channels }));
  }
  expect(marks.size).toBe(1000);
});

test('whatever a file has in their place is no answer', async () => {
  const [view] = (await keptOf(solvedWith())) as { answers: Record<string, unknown> }[];
  const { answers } = view!;
  const list = answers.answers as Record<string, unknown>[];
  const first = { ...list[0]! };
  for (const wrong of [
    null,
    'yes',
    [],
    [null],
    [{ ...first, says: 'yes' }],
    [{ ...first, says: [{ strong: 1 }] }],
    [{ ...first, standing: 'maybe' }],
    [{ ...first, margin: { kind: 'dots', dots: [{}], allowed: 1, ends: ['', ''] } }],
    [{ ...first, margin: { kind: 'bar', filled: 1, limit: 'a', labels: [] } }],
    [{ ...first, margin: { kind: 'pie' } }],
    [{ ...first, culprit: 3 }],
  ])
    expect(answersKept({ answers: { ...answers, answers: wrong } }, now), JSON.stringify(wrong)).toBeNull();
  for (const view of [null, 1, {}, { answers: null }, { answers: { by: 3 } }, { answers: [] }])
    expect(answersKept(view, now)).toBeNull();
});
