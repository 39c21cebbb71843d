import { readdirSync, readlinkSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { makeFile } from '../../db/make.ts';
import { Workplace } from '../../db/workplace.ts';
import { encode } from '../../main/contract/wire.ts';
import { createSessions } from '../../main/session/sessions.ts';
import { madeUpChip, random, randomEdit } from './random.ts';
import { inFolder } from './sample.ts';

/** Files that this process holds open below a folder. */
function held(folder: string): string[] {
  const links = readdirSync('/proc/self/fd');
  return links.flatMap((link) => {
    try {
      const target = readlinkSync(`/proc/self/fd/${link}`);
      return target.startsWith(folder) ? [target] : [];
    } catch {
      return [];
    }
  });
}

test('200 projects opened, edited and closed: no file, timer or memory is left behind', async () => {
  await inFolder(async (folder) => {
    const path = join(folder, 'a.chw');
    makeFile(path, madeUpChip(10), { program: 'test' });
    const settings = {
      userData: join(folder, 'data'),
      program: 'test',
      onChange: () => undefined,
      onTrouble: (problem: Error) => {
        throw problem;
      },
    };
    const next = random(1);
    const once = async (): Promise<void> => {
      const workplace = await Workplace.open(settings, path);
      const { project } = workplace;
      project.edit(randomEdit(project.chip, next), project.position.seq);
      project.undo();
      workplace.touched();
      await workplace.close();
    };
    for (let round = 0; round < 20; round += 1) await once();
    const timers = (): number => process.getActiveResourcesInfo().filter((name) => name === 'Timeout').length;
    const before = { timers: timers(), memory: process.memoryUsage().rss };
    for (let round = 0; round < 180; round += 1) await once();
    expect(held(folder)).toEqual([]);
    expect(timers()).toBeLessThanOrEqual(before.timers);
    expect(process.memoryUsage().rss - before.memory).toBeLessThan(120e6);
    expect(readdirSync(folder).sort()).toEqual(['a.chw', 'data']);
  });
});

test('windows that end leave no thread behind', async () => {
  await inFolder(async (folder) => {
    const sessions = createSessions({
      host: 'browser',
      dialogs: false,
      userData: join(folder, 'data'),
      assets: folder,
      version: '0',
    });
    const threads = (): number =>
      process.getActiveResourcesInfo().filter((name) => name === 'MessagePort').length;
    const before = threads();
    for (let round = 0; round < 5; round += 1) {
      await sessions.call(`window-${round}`, 'project.new', encode({ chip: madeUpChip(2) }));
      await sessions.end(`window-${round}`);
    }
    expect(sessions.windows()).toEqual([]);
    expect(threads()).toBe(before);
    expect(held(folder)).toEqual([]);
    await sessions.close();
  });
});
