import { spawn } from 'node:child_process';
import { once } from 'node:events';
import {
  copyFileSync,
  existsSync,
  readdirSync,
  readFileSync,
  statSync,
  utimesSync,
  writeFileSync,
} from 'node:fs';
import { hostname } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { expect, test, vi } from 'vitest';
import type { Problem } from '../solver/problem/problem.ts';
import { madeUpChip, random, randomEdit } from '../test/faults/random.ts';
import { inFolder } from '../test/faults/sample.ts';
import { Backups } from './backup/backups.ts';
import { canonical } from './chip/canonical.ts';
import { makeFile } from './make.ts';
import { draftFolder } from './place/drafts.ts';
import type { Place } from './place/judge.ts';
import { markPath } from './place/lock.ts';
import { readProjectChip } from './read.ts';
import { Workplace, type WorkplaceSettings } from './workplace.ts';

/** For what comes a moment later, on a busy machine too. */
const WAIT = { timeout: 30_000, interval: 100 };

interface Bench {
  readonly folder: string;
  readonly path: string;
  readonly settings: WorkplaceSettings;
  readonly troubles: Problem[];
}

/** A project with its settings in a folder of its own. */
async function withBench(
  work: (bench: Bench) => Promise<void>,
  kind: Place['kind'] = 'trusted',
): Promise<void> {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    makeFile(path, madeUpChip(8), { program: 'test' });
    const troubles: Problem[] = [];
    const settings: WorkplaceSettings = {
      userData: join(folder, 'data'),
      program: 'test',
      onChange: () => undefined,
      onTrouble: (problem) => troubles.push(problem),
      judge: async () => ({ kind }) as Place,
    };
    await work({ folder, path, settings, troubles });
  });
}

function edit(workplace: Workplace, seed = 1): string {
  const { project } = workplace;
  project.edit(randomEdit(project.chip, random(seed)), project.position.seq);
  workplace.touched();
  return canonical(project.chip);
}

test('a draft is kept, gets its place by saving, and leaves nothing behind', async () => {
  await withBench(async ({ folder, settings }) => {
    const draft = await Workplace.draft(settings, madeUpChip(3));
    expect(draft.standing).toMatchObject({ name: 'made up', path: null, mode: 'draft', edited: false });
    const chip = edit(draft);
    expect(draft.standing.edited).toBe(true);
    const to = join(folder, 'mine.chw');
    const kept = await draft.saveAs(to, false);
    expect(kept.standing).toMatchObject({ name: 'mine.chw', path: to, mode: 'kept', modeSays: '' });
    expect(kept.project.position.undo).not.toBeNull();
    expect(canonical(kept.project.chip)).toBe(chip);
    await expect(kept.saveAs(to, true)).rejects.toThrow('kept in this file already');
    await kept.close();
    expect(readdirSync(draftFolder(settings))).toEqual([]);
    expect(readdirSync(folder).sort()).toEqual(['a.chw', 'data', 'mine.chw']);
  });
});

test('an untouched draft goes when it is closed, an edited one stays', async () => {
  await withBench(async ({ settings }) => {
    await (await Workplace.draft(settings, madeUpChip(1))).close();
    expect(readdirSync(draftFolder(settings))).toEqual([]);
    const draft = await Workplace.draft(settings, madeUpChip(1));
    const chip = edit(draft);
    await draft.close();
    const [name] = readdirSync(draftFolder(settings));
    const again = await Workplace.open(settings, join(draftFolder(settings), name!));
    expect(again.standing.mode).toBe('draft');
    expect(canonical(again.project.chip)).toBe(chip);
    await again.close();
  });
});

test('the bare file is whole a moment after the last step', async () => {
  await withBench(async ({ folder, path, settings }) => {
    const workplace = await Workplace.open(settings, path);
    await workplace.quiet();
    const chip = edit(workplace);
    const bare = join(folder, 'bare.chw');
    copyFileSync(path, bare);
    expect(canonical(await readProjectChip(bare))).not.toBe(chip);
    await vi.waitFor(async () => {
      copyFileSync(path, bare);
      expect(canonical(await readProjectChip(bare))).toBe(chip);
      expect(statSync(`${path}-wal`).size).toBe(0);
    }, WAIT);
    await workplace.close();
  });
});

test('whoever comes second looks on, is told who works, and may save a copy', async () => {
  await withBench(async ({ folder, path, settings }) => {
    const first = await Workplace.open(settings, path);
    const chip = edit(first);
    const second = await Workplace.open(settings, path);
    expect(second.standing.mode).toBe('read-only');
    expect(second.standing.modeSays).toContain(hostname());
    expect(second.standing.modeSays).toContain('nothing is written from here');
    expect(canonical(second.project.chip)).toBe(chip);
    expect(() => edit(second)).toThrow('for reading only');
    await expect(second.duplicate(path, true)).rejects.toThrow('kept in this file already');
    const own = await second.saveAs(join(folder, 'own.chw'), false);
    expect(own.standing.mode).toBe('kept');
    edit(own, 4);
    await own.close();
    await first.close();
    expect(canonical(await readProjectChip(path))).toBe(chip);
    const again = await Workplace.open(settings, path);
    expect(again.standing.mode).toBe('kept');
    await again.close();
  });
});

test('a mark left by a process that died is recognised, one of another machine is respected', async () => {
  await withBench(async ({ path, settings }) => {
    const gone = spawn(process.execPath, ['-e', '']);
    await once(gone, 'exit');
    const mark = { mark: 'x', process: gone.pid, host: hostname(), user: 'someone', since: Date.now() };
    writeFileSync(markPath(path), JSON.stringify(mark));
    const mine = await Workplace.open(settings, path);
    expect(mine.standing.mode).toBe('kept');
    await mine.close();

    writeFileSync(markPath(path), JSON.stringify({ ...mark, host: 'elsewhere' }));
    const looking = await Workplace.open(settings, path);
    expect(looking.standing).toMatchObject({ mode: 'read-only' });
    expect(looking.standing.modeSays).toContain('someone on elsewhere');
    await looking.close();

    const old = new Date(Date.now() - 600_000);
    utimesSync(markPath(path), old, old);
    const later = await Workplace.open(settings, path);
    expect(later.standing.mode).toBe('kept');
    await later.close();

    writeFileSync(markPath(path), 'nonsense');
    utimesSync(markPath(path), old, old);
    await (await Workplace.open(settings, path)).close();
    expect(existsSync(markPath(path))).toBe(false);
  });
});

test('in a place that cannot be trusted a private copy is worked on and goes back whole', async () => {
  await withBench(async ({ folder, path, settings, troubles }) => {
    const workplace = await Workplace.open(settings, path);
    expect(workplace.standing).toMatchObject({ name: 'a.chw', path, mode: 'private copy' });
    expect(workplace.standing.modeSays).toContain('on the network');
    const before = readFileSync(path);
    const chip = edit(workplace);
    expect(readFileSync(path).equals(before)).toBe(true);
    expect(existsSync(`${path}-wal`)).toBe(false);
    await vi.waitFor(async () => expect(canonical(await readProjectChip(path))).toBe(chip), WAIT);
    await workplace.quiet();
    const last = edit(workplace, 2);
    await workplace.close();
    expect(canonical(await readProjectChip(path))).toBe(last);
    expect(readdirSync(folder).sort()).toEqual(['a.chw', 'data']);
    expect(troubles).toEqual([]);
  }, 'network');
});

test('where someone else changed the original meanwhile, both are kept', async () => {
  await withBench(async ({ folder, path, settings, troubles }) => {
    const workplace = await Workplace.open(settings, path);
    const mine = edit(workplace);
    const other = join(folder, 'other.chw');
    makeFile(other, madeUpChip(3, 9), { program: 'test' });
    copyFileSync(other, path);
    await workplace.close();
    expect(await readProjectChip(path)).toEqual(madeUpChip(3, 9));
    const beside = readdirSync(folder).find((name) => name.startsWith('a (edited on '))!;
    expect(canonical(await readProjectChip(join(folder, beside)))).toBe(mine);
    expect(troubles.map((problem) => problem.what).join()).toContain('changed by someone else');
  }, 'synced');
});

test('steps that did not reach the place are taken up again, or set aside where it has moved on', async () => {
  await withBench(async ({ path, settings }) => {
    let judged: Place['kind'] = 'network';
    const own = { ...settings, judge: async () => ({ kind: judged }) as Place };
    const first = await Workplace.open(own, path);
    const mine = edit(first);
    // As after a kill: the copy holds a step, the place does not, and the mark is stale.
    first.project.close();
    const stale = new Date(Date.now() - 600_000);
    for (const marked of [path, join(settings.userData, 'copies')]) {
      for (const name of existsSync(marked) && statSync(marked).isDirectory() ? readdirSync(marked) : [])
        utimesSync(markPath(join(marked, name, 'work.chw')), stale, stale);
    }
    utimesSync(markPath(path), stale, stale);
    const second = await Workplace.open(own, path);
    expect(second.notes.join()).toContain('taken up again');
    expect(canonical(second.project.chip)).toBe(mine);
    await second.close();
    expect(canonical(await readProjectChip(path))).toBe(mine);

    const third = await Workplace.open(own, path);
    const more = edit(third, 5);
    third.project.close();
    utimesSync(markPath(path), stale, stale);
    for (const name of readdirSync(join(settings.userData, 'copies')))
      utimesSync(markPath(join(settings.userData, 'copies', name, 'work.chw')), stale, stale);
    judged = 'synced';
    writeFileSync(path, await freshBytes(settings.userData));
    const fourth = await Workplace.open(own, path);
    expect(fourth.project.chip).toEqual(madeUpChip(2, 7));
    expect(fourth.notes.join()).toContain('kept as the draft');
    const [draft] = readdirSync(draftFolder(settings)).filter((name) => name.endsWith('.chw'));
    expect(canonical(await readProjectChip(join(draftFolder(settings), draft!)))).toBe(more);
    await fourth.close();
  });
});

async function freshBytes(folder: string): Promise<Buffer> {
  const path = join(folder, `fresh-${Date.now()}.chw`);
  makeFile(path, madeUpChip(2, 7), { program: 'test' });
  return readFileSync(path);
}

test('a place that cannot be written to is left alone, and the work is kept', async () => {
  await withBench(async ({ folder, path, settings }) => {
    const before = readFileSync(path);
    const workplace = await Workplace.open(settings, path);
    expect(workplace.standing.modeSays).toContain('cannot be written to');
    const mine = edit(workplace);
    await workplace.close();
    expect(readFileSync(path).equals(before)).toBe(true);
    expect(readdirSync(folder).sort()).toEqual(['a.chw', 'data']);
    const again = await Workplace.open(settings, path);
    expect(canonical(again.project.chip)).toBe(mine);
    await again.close();
  }, 'write-protected');
});

test('copies get the next free name beside the file; another file is only replaced when told to', async () => {
  await withBench(async ({ folder, path, settings }) => {
    const workplace = await Workplace.open(settings, path);
    const chip = edit(workplace);
    expect(await workplace.duplicate(null, false)).toBe(join(folder, 'a copy.chw'));
    expect(await workplace.duplicate(null, false)).toBe(join(folder, 'a copy 2.chw'));
    const other = join(folder, 'other.chw');
    writeFileSync(other, 'precious');
    await expect(workplace.duplicate(other, false)).rejects.toThrow('There is a file of this name already.');
    expect(readFileSync(other, 'utf8')).toBe('precious');
    await workplace.duplicate(other, true);
    expect(canonical(await readProjectChip(other))).toBe(chip);
    await expect(workplace.duplicate(join(folder, 'nowhere', 'b.chw'), false)).rejects.toThrow('not there');
    await workplace.close();
  });
});

test('a damaged file is not written to: what can be read becomes a draft, with a report', async () => {
  await withBench(async ({ path, settings }) => {
    const first = await Workplace.open(settings, path);
    const chip = edit(first);
    await first.close();
    const bytes = readFileSync(path);
    const at = bytes.indexOf('"c3"');
    bytes[at + 1] = 0x7a;
    writeFileSync(path, bytes);
    await expect(readProjectChip(path)).rejects.toThrow('damaged');
    const workplace = await Workplace.open(settings, path);
    expect(workplace.standing.mode).toBe('draft');
    expect(workplace.notes[0]).toContain('It is left as it is');
    expect(canonical(workplace.project.chip)).toBe(chip);
    workplace.project.undo();
    expect(workplace.project.chip).toEqual(madeUpChip(8));
    await workplace.close();
    expect(readFileSync(path).equals(bytes)).toBe(true);
  });
});

test('backups: five recent ones and one a day for two weeks; restored beside the file, which stays', async () => {
  await withBench(async ({ folder, path, settings }) => {
    const backups = new Backups(settings.userData, path);
    const source = { backup: async (to: string) => copyFileSync(path, to) };
    const day = 86_400_000;
    const now = (Math.floor(Date.now() / day) - 0.5) * day;
    for (let back = 30; back >= 1; back -= 1) {
      for (const hour of [0, 3])
        await backups.make(
          source,
          Buffer.alloc(32, back + hour * 64),
          0,
          now - back * day + hour * 3_600_000,
        );
    }
    for (let minute = 0; minute < 12; minute += 1)
      await backups.make(source, Buffer.alloc(32, 100 + minute), 0, now + minute * 60_000);
    await backups.make(source, Buffer.alloc(32, 111), 0, now + 13 * 60_000);
    await backups.make(source, Buffer.alloc(32, 200), 600_000, now + 14 * 60_000);
    const kept = await backups.list();
    const today = kept.filter((backup) => backup.made >= now);
    expect(today.map((backup) => (backup.made - now) / 60_000)).toEqual([11, 10, 9, 8, 7]);
    expect(kept.length - today.length).toBe(14);

    const workplace = await Workplace.open(settings, path);
    edit(workplace);
    await workplace.close();
    const real = new Backups(settings.userData, path);
    await real.make({ backup: async (to) => copyFileSync(path, to) }, Buffer.alloc(32, 250));
    const [newest] = await real.list();
    const restored = await Workplace.restored(settings, path, newest!.id);
    expect(restored).toContain(join(folder, 'a (backup of '));
    expect(await readProjectChip(restored)).toEqual(await readProjectChip(path));
    await expect(Workplace.restored(settings, path, '../../a')).rejects.toThrow('no such backup');
  });
});

test('a backup is made at opening, and again while working, not every moment', async () => {
  await withBench(async ({ path, settings }) => {
    const first = await Workplace.open(settings, path);
    edit(first);
    await first.close();
    const second = await Workplace.open(settings, path);
    await second.quiet();
    expect(await second.backups.list()).toHaveLength(1);
    edit(second, 3);
    await wait(2_300);
    await second.quiet();
    expect(await second.backups.list()).toHaveLength(1);
    await second.close();
  });
});
