import { join } from 'node:path';
import { expect, test } from 'vitest';
import { chipHash } from '../../db/chip/parts.ts';
import { makeFile } from '../../db/make.ts';
import { openForWork } from '../../db/open.ts';
import { harmMany, opening } from './damage.ts';
import { fillDisk } from './full-disk.ts';
import { HAND_MADE, handMade, openMutated } from './hostile.ts';
import { CODES, injectInto, SCENARIOS } from './inject.ts';
import { compare, killMany, Model, noCount } from './kill.ts';
import { madeUpChip } from './random.ts';
import { salvageEveryPage } from './salvage.ts';
import { inFolder, sampleBytes, workAtRandom } from './sample.ts';

// The numbers here are those of every run; `npm run faults` does the same in full.

test('60 kills at random moments lose nothing that was acknowledged', { timeout: 900_000 }, async () => {
  const count = await killMany(60, Date.now() % 100_000);
  expect(count.kills).toBe(60);
  expect(count.acknowledged).toBeGreaterThan(60);
  expect(count).toMatchObject({ lost: 0, damaged: 0, undoBroken: 0 });
});

test('the count of lost steps can count: a step said but not kept, a state that is another', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    makeFile(path, madeUpChip(4), { program: 'test' });
    const { project } = await openForWork(path, folder);
    const first = Buffer.from(chipHash(project.chip)).toString('hex');
    const model = new Model(first);
    workAtRandom(project, 1, 3);
    const count = noCount();
    model.take(`edit 2 ${Buffer.from(chipHash(project.chip)).toString('hex')}`);
    compare(project, model, count);
    expect(count).toMatchObject({ lost: 0, undoBroken: 0 });
    const ahead = new Model(model.now);
    ahead.seq = project.position.seq + 3;
    compare(project, ahead, count);
    expect(count.lost).toBeGreaterThanOrEqual(3);
    const wrong = new Model('0'.repeat(64));
    wrong.seq = project.position.seq;
    const other = noCount();
    compare(project, wrong, other);
    expect(other.lost).toBe(1);
    project.close();
  });
});

for (const scenario of SCENARIOS) {
  test(`${scenario.name}: whichever step fails, the project is as before or as after`, async () => {
    await inFolder(async (folder) => {
      const plans = CODES.flatMap((code, index) => [
        { when: index % 2 ? ('before' as const) : ('after' as const), once: true, code },
        { when: 'before' as const, once: false, code },
      ]);
      const long = ['open', 'make', 'save as over another project', 'work in a private copy'];
      const count = await injectInto(scenario, folder, plans, long.includes(scenario.name) ? 41 : 3);
      expect(count.wrong).toEqual([]);
      expect(count.runs).toBeGreaterThanOrEqual(plans.length);
    });
  });
}

test('harm that changes content is found at opening', async () => {
  const count = harmMany(await sampleBytes(), 500, 20_261_201);
  expect(count.misses).toEqual([]);
  expect(count.found).toBeGreaterThan(250);
  expect(count.harmless).toBeGreaterThan(0);
});

test('whichever page is broken, every row that lies on another is recovered', async () => {
  await inFolder(async (folder) => {
    const count = await salvageEveryPage(await sampleBytes(3, 12, 20), folder);
    expect(count).toMatchObject({ refused: 0, rowsLost: [], silent: 0 });
    expect(count.recovered).toBeGreaterThan(15);
  });
});

test('hostile files come to a verdict, none breaks or hangs the program', async () => {
  const bytes = await sampleBytes(2, 30, 40);
  const count = openMutated(bytes, 250, 7);
  expect(count.refused).toBeGreaterThan(120);
  expect(count.slowest).toBeLessThan(2_000);
  await inFolder(async (folder) => {
    for (const made of HAND_MADE) {
      const { verdict, store } = opening(handMade(bytes, made, folder));
      store?.close();
      expect(made.expect, made.name).toContain(verdict);
    }
  });
});

test('a full disk: what was acknowledged is there, what was not is said in plain words', async () => {
  const full = await fillDisk();
  expect(full.acknowledged).toBeGreaterThan(50);
  expect(full.seq).toBe(full.acknowledged + 1);
  expect(full.same).toBe(true);
  expect(full.told).toMatch(/no room left on the disk|disk reported a fault/);
});
