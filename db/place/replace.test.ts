import { mkdirSync, readdirSync, readFileSync, utimesSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { PROBLEM_KINDS } from '../../solver/problem/problem.ts';
import { inFolder } from '../../test/faults/sample.ts';
import { projectProblem } from '../words.ts';
import { moveToFree, replaceFile, writeProblem } from './replace.ts';

test('a file is replaced whole, or not at all where it was not to be', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.csv');
    await replaceFile(path, 'one');
    await replaceFile(path, new Uint8Array([50, 51]));
    expect(readFileSync(path, 'utf8')).toBe('23');
    await expect(replaceFile(path, 'three', false)).rejects.toThrow('of this name already');
    await expect(replaceFile(join(folder, 'none', 'a.csv'), 'x')).rejects.toThrow('not there');
    mkdirSync(join(folder, 'folder'));
    await expect(replaceFile(join(folder, 'folder'), 'x')).rejects.toThrow();
    await expect(replaceFile(join(folder, `${'x'.repeat(300)}.csv`), 'x')).rejects.toThrow('too long');
    expect(readFileSync(path, 'utf8')).toBe('23');
    expect(readdirSync(folder).sort()).toEqual(['a.csv', 'folder']);
  });
});

test('what a write left that was cut off long ago is taken away, what is being written is not', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.csv');
    const [old, now, other] = ['.a.csv.1-x-1.new', '.a.csv.1-x-2.new', '.b.csv.1-x-1.new'].map((name) =>
      join(folder, name),
    ) as [string, string, string];
    for (const file of [old, now, other]) writeFileSync(file, 'half');
    const long = new Date(Date.now() - 7_200_000);
    utimesSync(old, long, long);
    utimesSync(other, long, long);
    await replaceFile(path, 'whole');
    expect(readdirSync(folder).sort()).toEqual(['.a.csv.1-x-2.new', '.b.csv.1-x-1.new', 'a.csv']);
  });
});

test('a finished file is moved to a free name, never over another', async () => {
  await inFolder(async (folder) => {
    const [from, to] = [join(folder, 'from'), join(folder, 'to')];
    writeFileSync(from, 'new');
    writeFileSync(to, 'old');
    await expect(moveToFree(from, to)).rejects.toThrow();
    expect(readFileSync(to, 'utf8')).toBe('old');
    await moveToFree(from, join(folder, 'free'));
    expect(readdirSync(folder).sort()).toEqual(['free', 'to']);
  });
});

test('every failure is told in words of the person’s, with what is safe and what to do', () => {
  const codes = [
    'SQLITE_FULL',
    'SQLITE_BUSY',
    'SQLITE_LOCKED',
    'SQLITE_READONLY',
    'SQLITE_IOERR_FSYNC',
    'SQLITE_CORRUPT',
    'SQLITE_NOTADB',
    'SQLITE_CANTOPEN',
    'SQLITE_CONSTRAINT',
  ];
  codes.push(
    'ENOSPC',
    'EACCES',
    'EPERM',
    'EROFS',
    'EBUSY',
    'EIO',
    'ENOENT',
    'EEXIST',
    'EISDIR',
    'ENAMETOOLONG',
    'EDQUOT',
    'odd',
  );
  for (const code of codes) {
    for (const told of [projectProblem, writeProblem]) {
      const problem = told(Object.assign(new Error(`raw ${code}`), { code }), '/a/b.chw');
      const text = `${problem.what} ${problem.remedy}`;
      expect(text, code).not.toMatch(
        /sqlite|database|\bwal\b|journal|transaction|schema|corrupt|pragma|constraint|raw/i,
      );
      expect(text, code).not.toMatch(/\bE[A-Z]{3,}\b/);
      expect(problem.what.length, code).toBeGreaterThan(20);
      expect(problem.remedy.length, code).toBeGreaterThan(5);
      expect(problem.where).toBe('/a/b.chw');
      expect(PROBLEM_KINDS).toContain(problem.kind);
    }
  }
});
