import { cpSync, existsSync, mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { canonical } from '../../db/chip/canonical.ts';
import { chipHash } from '../../db/chip/parts.ts';
import { openForWork } from '../../db/open.ts';
import type { Place } from '../../db/place/judge.ts';
import { readProjectChip } from '../../db/read.ts';
import { seam } from '../../db/seam.ts';
import { Workplace, type WorkplaceSettings } from '../../db/workplace.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { madeUpChip, random, randomEdit } from './random.ts';

/** The ways in which a disk or an engine refuses, by their codes. */
export const CODES = [
  'SQLITE_FULL',
  'SQLITE_BUSY',
  'SQLITE_IOERR_WRITE',
  'SQLITE_READONLY',
  'SQLITE_CORRUPT',
  'ENOSPC',
  'EIO',
  'EACCES',
] as const;

interface Plan {
  /** Which step fails, from 1. */
  readonly k: number;
  /** Before it is done, or after, when it was done but reported as failed. */
  readonly when: 'before' | 'after';
  /** Only this one, or all from this one on. */
  readonly once: boolean;
  readonly code: string;
}

/** Runs `work` with a step failing; tells whether any did. */
async function failing(plan: Plan, work: () => Promise<void>): Promise<{ reached: boolean; error: unknown }> {
  let step = 0;
  let reached = false;
  seam.watch = (name, when) => {
    if (when === 'before') step += 1;
    if (when !== plan.when || step < plan.k || (plan.once && reached)) return;
    reached = true;
    throw Object.assign(new Error(`made to fail at ${name}`), { code: plan.code });
  };
  try {
    await work();
    return { reached, error: null };
  } catch (error) {
    return { reached, error };
  } finally {
    seam.watch = null;
  }
}

/** What a scenario works with, fresh each time: a project as made beforehand and a folder beside. */
interface Bench {
  readonly folder: string;
  readonly path: string;
  readonly settings: WorkplaceSettings;
}

interface Scenario {
  readonly name: string;
  /** Whether the place counts as one that cannot be trusted. */
  readonly place?: Place['kind'];
  /** Work before any step fails; returns what is to be done while one does. */
  readonly prepare: (
    bench: Bench,
    once: boolean,
  ) => Promise<{
    run: () => Promise<void>;
    /** Lets go of what is open, with nothing failing any more. */
    leave: () => Promise<void>;
    /** The chips that the project may hold afterwards. */
    allowed: () => string[];
  }>;
}

const text = (chip: Chip): string => canonical(chip);
const nothing = async (): Promise<void> => undefined;

async function opened(bench: Bench): Promise<Workplace> {
  const workplace = await Workplace.open(bench.settings, bench.path);
  await workplace.quiet();
  return workplace;
}

export const SCENARIOS: readonly Scenario[] = [
  {
    name: 'open',
    prepare: async (bench) => {
      const before = text(await readProjectChip(bench.path));
      let workplace: Workplace | null = null;
      return {
        run: async () => {
          workplace = await Workplace.open(bench.settings, bench.path);
          await workplace.quiet();
        },
        leave: async () => await workplace?.close(),
        allowed: () => [before],
      };
    },
  },
  {
    name: 'make',
    prepare: async (bench) => {
      const chip = madeUpChip(5);
      const before = text(await readProjectChip(bench.path));
      let workplace: Workplace | null = null;
      return {
        run: async () => {
          workplace = await Workplace.draft(bench.settings, chip);
        },
        leave: async () => await workplace?.close(),
        allowed: () => [before],
      };
    },
  },
  ...(['edit', 'undo', 'redo'] as const).map(
    (kind): Scenario => ({
      name: kind,
      prepare: async (bench, once) => {
        const workplace = await opened(bench);
        const { project } = workplace;
        if (kind === 'redo') project.undo();
        const chips = [text(project.chip)];
        const edit = randomEdit(project.chip, random(9));
        let after = '';
        if (kind === 'edit') after = text(applyEdit(project.chip, edit));
        else {
          project[kind]();
          after = text(project.chip);
          project[kind === 'undo' ? 'redo' : 'undo']();
        }
        let acknowledged = false;
        return {
          run: async () => {
            if (kind === 'edit') project.edit(edit, project.position.seq);
            else project[kind]();
            acknowledged = true;
            chips.push(text(project.chip));
          },
          leave: async () => {
            // What is shown afterwards must be what is kept.
            chips.push(text(project.chip));
            await workplace.close();
          },
          // Done, reported as failed, and nothing readable since: it is there when the file is opened again.
          allowed: () => (acknowledged ? chips.slice(1) : once ? chips : [...chips, after]),
        };
      },
    }),
  ),
  {
    name: 'settle',
    prepare: async (bench) => {
      const workplace = await opened(bench);
      workplace.project.edit(randomEdit(workplace.project.chip, random(3)), workplace.project.position.seq);
      const after = text(workplace.project.chip);
      return {
        run: async () => workplace.project.settle(),
        leave: () => workplace.close(),
        allowed: () => [after],
      };
    },
  },
  {
    name: 'close',
    prepare: async (bench) => {
      const workplace = await opened(bench);
      workplace.project.edit(randomEdit(workplace.project.chip, random(4)), workplace.project.position.seq);
      const after = text(workplace.project.chip);
      return { run: () => workplace.close(), leave: nothing, allowed: () => [after] };
    },
  },
  {
    name: 'save as over another project',
    prepare: async (bench) => {
      const workplace = await opened(bench);
      const other = `${bench.path}-other.chw`;
      cpSync(bench.path, other);
      workplace.project.edit(randomEdit(workplace.project.chip, random(5)), workplace.project.position.seq);
      const after = text(workplace.project.chip);
      const before = text(await readProjectChip(other));
      let next: Workplace | null = null;
      return {
        run: async () => {
          next = await workplace.saveAs(other, true);
        },
        leave: async () => {
          if (next) await next.close();
          if (workplace.project.isOpen) await workplace.close();
          const there = text(await readProjectChip(other));
          if (there !== before && there !== after) throw new Error('the other file is neither old nor new');
        },
        allowed: () => [after],
      };
    },
  },
  {
    name: 'trial',
    prepare: async (bench) => {
      const workplace = await opened(bench);
      const before = text(workplace.project.chip);
      let made = 0;
      return {
        run: async () => {
          workplace.project.freezeTrial('t', workplace.project.position.seq, null);
          made = 1;
        },
        leave: async () => {
          if (workplace.project.listTrials().length < made) throw new Error('an acknowledged trial is gone');
          await workplace.close();
        },
        allowed: () => [before],
      };
    },
  },
  {
    name: 'work in a private copy',
    place: 'network',
    prepare: async (bench) => {
      const before = text(await readProjectChip(bench.path));
      let after = before;
      // What is not acknowledged may be there all the same, whole.
      let wanted = before;
      let workplace: Workplace | null = null;
      return {
        run: async () => {
          workplace = await Workplace.open(bench.settings, bench.path);
          const { project } = workplace;
          const edit = randomEdit(project.chip, random(6));
          wanted = text(applyEdit(project.chip, edit));
          project.edit(edit, project.position.seq);
          // Found damaged, it is worked on as a draft of what was recovered; the file itself stays.
          if (workplace.standing.mode === 'private copy') after = text(project.chip);
          await workplace.close();
        },
        leave: async () => {
          if (workplace?.project.isOpen) await workplace.close();
          // Opened again where nothing fails: what was acknowledged is there, and goes to its place.
          const again = await Workplace.open(bench.settings, bench.path);
          const found = text(again.project.chip);
          if (found !== after && !(after === before && found === wanted))
            throw new Error('an acknowledged edit is gone');
          after = found;
          await again.close();
        },
        allowed: () => [after],
      };
    },
  },
];

export interface InjectCount {
  runs: number;
  readonly wrong: string[];
}

/**
 * Makes every step of a scenario fail in turn, in the ways of `plans`, and looks at what is left. With
 * `stride` above 1 only every so many steps, each plan beginning at another.
 */
export async function injectInto(
  scenario: Scenario,
  folder: string,
  plans: readonly Omit<Plan, 'k'>[],
  stride = 1,
): Promise<InjectCount> {
  const count: InjectCount = { runs: 0, wrong: [] };
  const original = join(folder, 'original.chw');
  await makeOriginal(original, folder);
  for (const [index, plan] of plans.entries()) {
    for (let k = 1 + (index % stride); ; k += stride) {
      const here = join(folder, 'run');
      rmSync(here, { recursive: true, force: true });
      mkdirSync(here);
      const path = join(here, 'project.chw');
      cpSync(original, path);
      const kind = scenario.place ?? 'trusted';
      const settings = {
        userData: join(here, 'data'),
        program: 'test',
        onChange: () => undefined,
        onTrouble: () => undefined,
        judge: async () => ({ kind }) as Place,
      };
      const { run, leave, allowed } = await scenario.prepare({ folder: here, path, settings }, plan.once);
      const { reached, error } = await failing({ ...plan, k }, run);
      const label = `${scenario.name}: step ${k} ${plan.when}, ${plan.once ? 'once' : 'for ever'}, ${plan.code}`;
      count.runs += 1;
      if (error && !(error instanceof Problem)) count.wrong.push(`${label}: ${String(error)}`);
      try {
        await leave();
        const found = text(await readProjectChip(path));
        if (!allowed().includes(found))
          count.wrong.push(`${label}: the chip is neither as before nor as after`);
        if (existsSync(`${path}-other.chw`)) await readProjectChip(`${path}-other.chw`);
        const { project } = await openForWork(path, settings.userData);
        while (project.position.undo !== null) project.undo();
        if (Buffer.compare(chipHash(project.chip), chipHash(madeUpChip(12))) !== 0)
          count.wrong.push(`${label}: undo does not lead back to the beginning`);
        project.close();
      } catch (problem) {
        count.wrong.push(`${label}: ${String(problem)}`);
      }
      if (!reached) break;
    }
  }
  return count;
}

/** A project with a few steps in it, some folded and some not. */
async function makeOriginal(path: string, folder: string): Promise<void> {
  if (existsSync(path)) return;
  const { makeFile } = await import('../../db/make.ts');
  makeFile(path, madeUpChip(12), { program: 'test' });
  const { project } = await openForWork(path, join(folder, 'data'));
  const next = random(2);
  for (let step = 0; step < 6; step += 1) {
    project.edit(randomEdit(project.chip, next), project.position.seq);
    if (step === 3) project.settle();
  }
  project.close();
}
