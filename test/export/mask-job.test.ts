import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import type { Client } from '../../main/contract/client.ts';
import type { EventData } from '../../main/contract/contract.ts';
import { readDxf } from '../../main/export/mask/read-dxf.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { withHost } from '../host/started.ts';

type State = EventData<'mask'>;

/** The states of a job until it ends. */
function ended(client: Client): { states: State[]; end: (job: number) => Promise<State> } {
  const states: State[] = [];
  const waiting = new Set<() => void>();
  client.on('mask', (state) => {
    states.push(state);
    for (const look of waiting) look();
  });
  const end = (job: number): Promise<State> =>
    new Promise((done) => {
      const look = (): void => {
        const last = states.find((state) => state.job === job && state.state !== 'running');
        if (last) {
          waiting.delete(look);
          done(last);
        }
      };
      waiting.add(look);
      look();
    });
  return { states, end };
}

const refused = async (work: Promise<unknown>): Promise<Problem> =>
  await work.then(
    () => {
      throw new Error('it was not refused');
    },
    (error: unknown) => {
      expect(error).toBeInstanceOf(Problem);
      return error as Problem;
    },
  );

describe('masks as a page asks for them', () => {
  test('handed back, written, refused, cancelled; the project goes on being edited meanwhile', async () => {
    await withHost(async ({ client, folder }) => {
      const page = client('window-1');
      const { states, end } = ended(page);
      await page.call('project.demo', { id: 'gradient-tree' });

      // handed back
      const { job } = await page.call('mask.start', { formats: ['dxf', 'svg'], options: { mirror: true } });
      expect((await refused(page.call('mask.take', { job }))).what).toMatch(/not made yet/);
      // a job is in a thread of its own: other requests are answered before it is done
      await page.call('project.state', {});
      expect(states.some((state) => state.job === job && state.state === 'done')).toBe(false);
      expect((await end(job)).state).toBe('done');
      const parts = states.filter((state) => state.state === 'running').map(({ part }) => part);
      expect(parts.length).toBeGreaterThan(2);
      expect([...parts].sort((a, b) => a - b)).toEqual(parts);
      const { files, report } = await page.call('mask.take', { job });
      expect(files.map(({ name }) => name)).toEqual(report.files.map(({ name }) => name));
      expect(report.options.mirror).toBe(true);
      expect(readDxf(files[0]!.bytes!).loops.get('L1_FLOW')!.length).toBe(6);
      expect((await refused(page.call('mask.take', { job }))).what).toMatch(/no such mask job/);

      // written to a place, and never over what is there unless that is asked for
      const to = join(folder, 'masks');
      mkdirSync(to);
      const path = join(to, 'plate.dxf');
      writeFileSync(path, 'the old file');
      const first = await page.call('mask.start', { formats: ['dxf'], options: {}, path });
      const failed = await end(first.job);
      expect([failed.state, failed.says]).toEqual(['failed', 'There is a file of this name already.']);
      expect((await refused(page.call('mask.take', first))).where).toBe(path);
      expect(readFileSync(path, 'utf8')).toBe('the old file');
      const second = await page.call('mask.start', { formats: ['dxf'], options: {}, path, replace: true });
      expect((await end(second.job)).state).toBe('done');
      const taken = await page.call('mask.take', second);
      expect(taken.files).toEqual([{ name: 'Gradient_tree.mask-um.dxf', path, bytes: null }]);
      expect(taken.report.files[0]!.path).toBe(path);
      expect(readFileSync(path, 'utf8')).toMatch(/^999\r\nGradient tree/);
      expect(readdirSync(to)).toEqual(['plate.dxf']);

      // what cannot be made says why
      const third = await page.call('mask.start', { formats: ['gdsii'], options: { undercut: 10_000_000 } });
      expect((await end(third.job)).says).toMatch(/would be closed/);
      expect((await refused(page.call('mask.take', third))).remedy).toMatch(/undercut/);

      // cancelled: ended at once, nothing written
      const other = join(to, 'other.pdf');
      const fourth = await page.call('mask.start', { formats: ['pdf', 'gdsii'], options: {}, path: other });
      await page.call('mask.cancel', fourth);
      expect((await end(fourth.job)).state).toBe('cancelled');
      expect((await refused(page.call('mask.take', fourth))).what).toMatch(/no such mask job/);
      expect(existsSync(other)).toBe(false);
    });
  });

  test('options that are none are refused before anything is begun', async () => {
    await withHost(async ({ client }) => {
      const page = client('window-1');
      await page.call('project.demo', { id: 'eight-way-splitter' });
      const bad = [
        { formats: ['dxf'], options: { chordError: 0.5 } },
        { formats: [], options: {} },
        { formats: ['dwg'], options: {} },
        { formats: ['dxf'], options: { shrink: 2 } },
        { formats: ['dxf'], options: { mirrored: true } },
      ];
      for (const input of bad) {
        const { kind } = await refused(page.call('mask.start', input as never));
        expect(kind).toBe('format');
      }
    });
  });
});
