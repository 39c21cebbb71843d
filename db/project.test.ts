import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { applyEdit } from '../solver/chip/edit.ts';
import { madeUpChip, random, randomEdit } from '../test/faults/random.ts';
import { inFolder, madeUpResult, workAtRandom } from '../test/faults/sample.ts';
import { canonical } from './chip/canonical.ts';
import { chipHash } from './chip/parts.ts';
import { LEAST_STEPS, MOST_STEPS } from './journal/fold.ts';
import { MOST_CELL_BYTES } from './kept/cells.ts';
import { makeFile } from './make.ts';
import { openForReading, openForWork } from './open.ts';
import type { Project } from './project.ts';
import { readProjectChip } from './read.ts';
import { seam } from './seam.ts';

/** A project of `channels` channels in a folder of its own. */
async function withProject<T>(
  channels: number,
  work: (project: Project, path: string, folder: string) => Promise<T>,
) {
  return await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    makeFile(path, madeUpChip(channels), { program: 'test' });
    const { project } = await openForWork(path, folder);
    try {
      return await work(project, path, folder);
    } finally {
      project.close();
    }
  });
}

test('a chip comes back from a new file as it went in', async () => {
  await withProject(40, async (project, path) => {
    expect(project.chip).toEqual(madeUpChip(40));
    expect(project.position).toEqual({ seq: 1, undo: null, redo: null });
    expect(await readProjectChip(path)).toEqual(madeUpChip(40));
  });
});

test('what is kept of the view comes back with the file, and is no step', async () => {
  await withProject(3, async (project, path, folder) => {
    const before = project.position;
    expect(project.view).toEqual({});
    project.keepView({ locked: ['channel:a'] });
    project.keepView({ locked: ['channel:b', 'port:in'] });
    expect(project.position).toEqual(before);
    project.close();
    const { project: again } = await openForWork(path, folder);
    expect(again.view).toEqual({ locked: ['channel:b', 'port:in'] });
    again.close();
    const read = await openForReading(path);
    expect(read.view).toEqual({ locked: ['channel:b', 'port:in'] });
    expect(() => read.keepView({})).toThrow('reading only');
    read.close();
  });
});

test('steps are in the file at once, and undo and redo go on after reopening', async () => {
  await withProject(10, async (project, path, folder) => {
    const states = [canonical(project.chip)];
    const next = random(4);
    for (let step = 0; step < 30; step += 1) {
      project.edit({ ...randomEdit(project.chip, next), label: `step ${step}` }, project.position.seq);
      states.push(canonical(project.chip));
      if (step === 12) project.settle();
    }
    expect(canonical(await readProjectChip(path))).toBe(states.at(-1));
    for (let back = 0; back < 10; back += 1) project.undo();
    expect(project.position).toMatchObject({ undo: 'step 19', redo: 'step 20' });
    project.close();

    const { project: again } = await openForWork(path, folder);
    expect(canonical(again.chip)).toBe(states[20]);
    expect(again.position).toMatchObject({ undo: 'step 19', redo: 'step 20' });
    expect(again.history(3).map(({ label, undone }) => [label, undone])).toEqual([
      ['step 29', true],
      ['step 28', true],
      ['step 27', true],
    ]);
    for (let forth = 20; forth < 30; forth += 1) again.redo();
    expect(canonical(again.chip)).toBe(states[30]);
    for (let back = 29; back >= 0; back -= 1) {
      const before = again.chip;
      const { edit } = again.undo();
      // What a page is told leads it to the same chip.
      expect(canonical(applyEdit(before, edit))).toBe(states[back]);
      expect(canonical(again.chip)).toBe(states[back]);
    }
    expect(() => again.undo()).toThrow('nothing to undo');
    again.close();
  });
});

test('100 random histories: the file opens to the same chip, undone to the beginning it is the first one', async () => {
  await inFolder(async (folder) => {
    for (let seed = 1; seed <= 100; seed += 1) {
      const path = join(folder, `${seed}.chw`);
      makeFile(path, madeUpChip(4, seed), { program: 'test' });
      const { project } = await openForWork(path, folder);
      workAtRandom(project, 8, seed);
      if (seed % 2) project.settle();
      workAtRandom(project, 4, seed + 1000);
      const hash = chipHash(project.chip);
      project.close();
      const { project: again } = await openForWork(path, folder);
      expect(chipHash(again.chip), `seed ${seed}`).toEqual(hash);
      while (again.position.undo !== null) again.undo();
      expect(again.chip, `seed ${seed}`).toEqual(madeUpChip(4, seed));
      again.close();
    }
  });
});

test('an edit that does not fit changes nothing and says why', async () => {
  await withProject(5, async (project, path) => {
    const before = project.position;
    const bad = { label: 'remove', changes: [{ kind: 'remove', list: 'channels', id: 'nobody' } as const] };
    expect(() => project.edit(bad, 1)).toThrow(/nobody/);
    expect(() => project.edit({ label: 'odd', changes: [{ kind: 'put' }] as never }, 1)).toThrow();
    const good = randomEdit(project.chip, random(1));
    expect(() => project.edit(good, 7)).toThrow('The chip has changed since this edit was begun.');
    expect(project.position).toEqual(before);
    expect(await readProjectChip(path)).toEqual(madeUpChip(5));
  });
});

test('a step that is in the file although it was reported as failed is taken in before the next', async () => {
  await withProject(5, async (project, path, folder) => {
    const edit = randomEdit(project.chip, random(1));
    seam.watch = (_name, when) => {
      if (when === 'after') throw Object.assign(new Error('made to fail'), { code: 'SQLITE_IOERR' });
    };
    try {
      expect(() => project.edit(edit, 1)).toThrow('The disk reported a fault');
    } finally {
      seam.watch = null;
    }
    const next = randomEdit(madeUpChip(5), random(2));
    expect(() => project.edit(next, 1)).toThrow('has changed since');
    expect(project.chip).toEqual(applyEdit(madeUpChip(5), edit));
    project.undo();
    project.edit(next, 3);
    expect(project.position.seq).toBe(4);
    project.close();
    const { project: again } = await openForWork(path, folder);
    expect(again.chip).toEqual(applyEdit(madeUpChip(5), next));
    again.close();
  });
});

test('going back to how it was at opening is one step that can be undone', async () => {
  await withProject(20, async (project) => {
    expect(() => project.revert()).toThrow('Nothing has changed');
    workAtRandom(project, 40, 8);
    const worked = canonical(project.chip);
    project.revert();
    expect(project.chip).toEqual(madeUpChip(20));
    project.undo();
    expect(canonical(project.chip)).toBe(worked);
  });
});

test('trials keep chip and result, whatever is edited afterwards', async () => {
  await withProject(6, async (project, path, folder) => {
    const trial = project.freezeTrial('first', 1, madeUpResult(6));
    workAtRandom(project, 5, 3);
    const other = project.freezeTrial('second', project.position.seq, null);
    expect(() => project.freezeTrial('late', 1, null)).toThrow('has changed');
    project.renameTrial(trial.id, 'the wide one');
    project.close();
    const { project: again } = await openForWork(path, folder);
    expect(again.listTrials().map(({ name, hasResult }) => [name, hasResult])).toEqual([
      ['the wide one', true],
      ['second', false],
    ]);
    expect(again.getTrial(trial.id)).toMatchObject({ chip: madeUpChip(6), result: madeUpResult(6) });
    again.deleteTrial(trial.id);
    expect(() => again.getTrial(trial.id)).toThrow('no such trial');
    expect(again.listTrials()).toHaveLength(1);
    expect(again.getTrial(other.id).result).toBeNull();
    again.close();
    const { project: last } = await openForWork(path, folder);
    last.close();
  });
});

test('a result is found again for exactly the chip and settings that it was made from', async () => {
  await withProject(6, async (project) => {
    expect(project.findResult('ideal')).toBeNull();
    expect(project.keepResult(1, 'ideal', madeUpResult(6))).toBe(true);
    expect(project.findResult('ideal')).toEqual(madeUpResult(6));
    expect(project.findResult('solved')).toBeNull();
    project.edit(randomEdit(project.chip, random(5)), 1);
    expect(project.findResult('ideal')).toBeNull();
    expect(project.keepResult(1, 'ideal', madeUpResult(6))).toBe(false);
    project.undo();
    expect(project.findResult('ideal')).toEqual(madeUpResult(6));
    for (let more = 0; more < 80; more += 1) project.keepResult(3, `${more}`, madeUpResult(1));
    expect(project.findResult('79')).not.toBeNull();
    expect(project.findResult('ideal')).toBeNull();
  });
});

test('solved cells are found by key, and those longest unused go when there are too many', async () => {
  await withProject(2, async (project) => {
    const size = 4 * 1024 * 1024;
    const most = MOST_CELL_BYTES / size;
    for (let index = 0; index < most; index += 1)
      project.putCells([{ key: `k${index}`, bytes: new Uint8Array(size).fill(index) }]);
    expect(project.getCells(['k0', 'none', 'k3']).map(({ key, bytes }) => [key, bytes[7]])).toEqual([
      ['k0', 0],
      ['k3', 3],
    ]);
    project.putCells([{ key: 'one more', bytes: new Uint8Array(size) }]);
    const left = project.getCells([...Array.from({ length: most }, (_, index) => `k${index}`), 'one more']);
    const keys = left.map((entry) => entry.key);
    expect(keys).toContain('one more');
    expect(keys).toContain('k0');
    expect(keys).not.toContain('k1');
    expect(keys.length * size).toBeLessThanOrEqual(MOST_CELL_BYTES * 0.75);
    project.putCells([{ key: 'too large', bytes: new Uint8Array(17 * 1024 * 1024) }]);
    expect(project.getCells(['too large'])).toEqual([]);
  });
});

test('more steps than are kept: the oldest go, at least ten thousand can be undone, the chain holds', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    makeFile(path, madeUpChip(2), { program: 'test' });
    const { project } = await openForWork(path, folder);
    const note = (value: string) => ({
      label: value,
      changes: [{ kind: 'set', key: 'note', value } as const],
    });
    for (let step = 0; step < MOST_STEPS + 20; step += 1) {
      project.edit(note(`${step}`), project.position.seq);
      if (step % 100 === 50) project.undo();
    }
    project.close();
    const { project: again } = await openForWork(path, folder);
    expect(again.chip.note).toBe(`${MOST_STEPS + 19}`);
    let undone = 0;
    while (again.position.undo !== null && undone < LEAST_STEPS / 2) {
      again.undo();
      undone += 1;
    }
    expect(undone).toBe(LEAST_STEPS / 2);
    expect(again.history(20_000).length).toBeLessThan(MOST_STEPS);
    expect(again.history(20_000).length).toBeGreaterThan(LEAST_STEPS * 0.95);
    again.close();
  });
});

test('looking on changes nothing on disk and refuses to be edited', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    makeFile(path, madeUpChip(5), { program: 'test' });
    const before = readFileSync(path);
    const project = await openForReading(path);
    expect(() => project.edit(randomEdit(project.chip, random(1)), 1)).toThrow('for reading only');
    expect(() => project.freezeTrial('x', 1, null)).toThrow('for reading only');
    project.putCells([{ key: 'a', bytes: new Uint8Array(3) }]);
    expect(project.keepResult(1, '', madeUpResult(1))).toBe(false);
    project.close();
    expect(readFileSync(path).equals(before)).toBe(true);
  });
});

test('what is no project is named for what it is', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'odd.chw');
    await expect(readProjectChip(path)).rejects.toThrow('There is no such file');
    await expect(readProjectChip(folder)).rejects.toThrow('not a file');
    writeFileSync(path, '');
    await expect(readProjectChip(path)).rejects.toThrow('The file is empty.');
    writeFileSync(path, '{"format":"channelwright-chip"}');
    await expect(readProjectChip(path)).rejects.toThrow('no Channelwright project');
    writeFileSync(path, Buffer.concat([Buffer.from('SQLite format 3\0'), Buffer.alloc(5000)]));
    await expect(readProjectChip(path)).rejects.toThrow('no Channelwright project');
  });
});
