import { type ChildProcessByStdio, spawn } from 'node:child_process';
import { rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Readable, Writable } from 'node:stream';
import { setTimeout as wait } from 'node:timers/promises';
import { chipHash } from '../../db/chip/parts.ts';
import { makeFile } from '../../db/make.ts';
import { openForWork } from '../../db/open.ts';
import type { Project } from '../../db/project.ts';
import { readProjectChip } from '../../db/read.ts';
import { Workplace } from '../../db/workplace.ts';
import { madeUpChip, random, whole } from './random.ts';
import { scratchFolder } from './sample.ts';

export interface KillCount {
  kills: number;
  acknowledged: number;
  /** Steps that were acknowledged and are not in the file. */
  lost: number;
  /** Files that did not open whole. */
  damaged: number;
  /** Openings where undo did not lead back to the states before. */
  undoBroken: number;
}

export const noCount = (): KillCount => ({ kills: 0, acknowledged: 0, lost: 0, damaged: 0, undoBroken: 0 });

const hex = (bytes: Uint8Array): string => Buffer.from(bytes).toString('hex');

/** What the child said it had kept: position, and the chips that undo and redo lead to. */
export class Model {
  seq = 1;
  readonly states = new Map<number, string>();
  done: string[] = [];
  undone: string[] = [];
  now: string;
  trials = 0;

  constructor(first: string) {
    this.now = first;
  }

  take(line: string): void {
    const [what, number, hash] = line.split(' ');
    if (what === 'trial') this.trials = Number(number);
    if (!hash) return;
    this.seq = Number(number);
    if (what === 'edit') {
      this.done.push(this.now);
      this.undone = [];
    } else if (what === 'undo') {
      this.undone.push(this.now);
      this.done.pop();
    } else if (what === 'redo') {
      this.done.push(this.now);
      this.undone.pop();
    }
    this.now = hash;
  }
}

/** Kills a child that works on one project `kills` times, and looks after each kill at what is left. */
export async function killMany(kills: number, seed: number): Promise<KillCount> {
  const folder = scratchFolder();
  const path = join(folder, 'project.chw');
  const userData = join(folder, 'data');
  const chip = madeUpChip(30);
  makeFile(path, chip, { program: 'test' });
  const model = new Model(hex(chipHash(chip)));
  const count = noCount();
  const next = random(seed);
  const settings = { userData, program: 'test', onChange: () => undefined, onTrouble: () => undefined };
  try {
    let waiting = start(path, userData, seed * 100_003);
    for (let kill = 1; kill <= kills; kill += 1) {
      const child = waiting;
      // The next one starts up meanwhile, but touches nothing yet.
      if (kill < kills) waiting = start(path, userData, seed * 100_003 + kill);
      const heard = await runUntilKilled(child, whole(next, 120));
      count.kills += 1;
      for (const line of heard) {
        model.take(line);
        if (/^(edit|undo|redo) /.test(line)) count.acknowledged += 1;
      }
      // One in five times first as another program would find it: without the log being taken in by us.
      if (next() < 0.2) await readProjectChip(path).catch(() => (count.damaged += 1));
      try {
        if (next() < 0.2) {
          const opened = await Workplace.open(settings, path);
          if (opened.standing.mode !== 'kept') count.damaged += 1;
          compare(opened.project, model, count);
          await opened.close();
        } else {
          const { project } = await openForWork(path, userData);
          compare(project, model, count);
          project.close();
        }
      } catch {
        count.damaged += 1;
      }
    }
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
  return count;
}

/** Looks whether a project is where the model is, some steps back too. */
export function compare(project: Project, model: Model, count: KillCount): void {
  const { seq } = project.position;
  if (seq < model.seq) count.lost += model.seq - seq;
  if (project.listTrials().length < model.trials) count.lost += 1;
  if (seq > model.seq + 1) count.damaged += 1;
  if (seq === model.seq + 1) {
    // Kept although the word of it did not come through: an edit leads back to what was acknowledged.
    const [last] = project.history(1);
    if (last?.seq === seq) {
      project.undo();
      if (hex(chipHash(project.chip)) !== model.now) count.undoBroken += 1;
      project.redo();
      model.done.push(model.now);
      model.undone = [];
    } else if (model.done.length > 0 && hex(chipHash(project.chip)) === model.done.at(-1)) {
      model.undone.push(model.now);
      model.done.pop();
    } else {
      model.done.push(model.now);
      model.undone.pop();
    }
  } else if (hex(chipHash(project.chip)) !== model.now) count.lost += 1;

  const steps = Math.min(5, model.done.length);
  for (let back = 1; back <= steps; back += 1) {
    project.undo();
    if (hex(chipHash(project.chip)) !== model.done.at(-back)) count.undoBroken += 1;
  }
  for (let back = 0; back < steps; back += 1) project.redo();
  if (model.undone.length > 0 && steps === 0) {
    project.redo();
    if (hex(chipHash(project.chip)) !== model.undone.at(-1)) count.undoBroken += 1;
    project.undo();
  }
  model.now = hex(chipHash(project.chip));
  model.seq = project.position.seq;
}

/** A child that has started and waits for the word to begin. */
interface Child {
  readonly process: ChildProcessByStdio<Writable, Readable, null>;
  /** Resolves when it has said its first line, or has ended without one. */
  readonly spoken: Promise<void>;
  readonly ended: Promise<void>;
  /** What it said so far. */
  heard(): string;
}

function start(path: string, userData: string, seed: number): Child {
  const program = join(import.meta.dirname, 'kill-child.ts');
  const child = spawn(process.execPath, [program, path, userData, String(seed)], {
    stdio: ['pipe', 'pipe', 'inherit'],
    env: { ...process.env, NODE_COMPILE_CACHE: join(tmpdir(), 'channelwright-compiled') },
  });
  // Listened to from the start: one that ends while its predecessor is still at work is not waited for.
  let text = '';
  const spoken = new Promise<void>((done) => {
    child.stdout.on('data', (chunk: Buffer) => {
      text += chunk.toString();
      if (text.includes('\n')) done();
    });
    child.on('exit', () => done());
  });
  const ended = new Promise<void>((done) => {
    child.on('close', () => done());
    child.on('error', () => done());
  });
  // The word to begin may find it gone already; that shows as nothing heard.
  child.stdin.on('error', () => undefined);
  return { process: child, spoken, ended, heard: () => text };
}

/** The lines of a child that is killed `after` ms from when it had the project open. */
async function runUntilKilled(child: Child, after: number): Promise<string[]> {
  child.process.stdin.end('go\n');
  await child.spoken;
  await wait(after);
  child.process.kill('SIGKILL');
  await child.ended;
  const lines = child.heard().split('\n');
  // A line that was cut was not said.
  lines.pop();
  if (lines.length === 0)
    throw new Error('A child ended before it had the project open: see its error above.');
  return lines;
}
