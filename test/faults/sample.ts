import { existsSync, mkdtempSync, readFileSync, rmSync, statfsSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { makeFile } from '../../db/make.ts';
import { openForWork } from '../../db/open.ts';
import type { Project } from '../../db/project.ts';
import type { Result } from '../../solver/chip/result.ts';
import { madeUpChip, random, randomEdit, whole } from './random.ts';

/** Memory where the system offers it as a folder: these tests are about what is kept, not about the disk's speed. */
export function scratchFolder(): string {
  const memory = '/dev/shm';
  const roomy = existsSync(memory) && statfsSync(memory).bavail * statfsSync(memory).bsize > 2e9;
  return mkdtempSync(join(roomy ? memory : tmpdir(), 'channelwright-test-'));
}

/** A folder of its own for the time of `work`. */
export async function inFolder<T>(work: (folder: string) => Promise<T>): Promise<T> {
  const folder = scratchFolder();
  try {
    return await work(folder);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** A result that is none of this chip's, but of the right form. */
export function madeUpResult(channels: number): Result {
  return {
    format: 'channelwright-result',
    version: 1,
    chip: 'made up',
    status: 'solved',
    junctions: 'ideal',
    fluid: { viscosity: 0.00089, density: 997.05 },
    ports: [{ id: 'in', pressure: 1234.5, flow: 1.667e-10, share: 1 }],
    channels: Array.from({ length: channels }, (_, index) => ({
      id: `c${index}`,
      pieces: [
        {
          from: 'port:in',
          to: 'junction:1',
          length: 0.019 + index * 1e-6,
          resistance: 1e12,
          flow: 1.667e-10,
          pressureDrop: 120.1,
          meanVelocity: 0.0167,
          peakVelocity: 0.03,
          reynolds: 1.3,
          peakWallShear: 1.9,
          meanWallShear: 1.4,
          residenceTime: 1.1,
        },
      ],
    })),
    cells: [],
    routes: [],
    targets: [],
    limits: [],
    balance: { conservationResidual: 1e-16, powerIn: 1e-7, dissipation: 1e-7 },
    findings: [],
  };
}

/** Edits at random, some undone and done again. */
export function workAtRandom(project: Project, steps: number, seed: number): void {
  const next = random(seed);
  for (let step = 0; step < steps; step += 1) {
    const { undo, redo, seq } = project.position;
    const dice = next();
    if (dice < 0.1 && undo !== null) project.undo();
    else if (dice < 0.15 && redo !== null) project.redo();
    else project.edit(randomEdit(project.chip, next), seq);
  }
}

/** The bytes of a project that has everything in it, closed. */
export async function sampleBytes(seed = 1, channels = 60, steps = 150): Promise<Buffer> {
  return await inFolder(async (folder) => {
    const path = join(folder, 'sample.chw');
    makeFile(path, madeUpChip(channels, seed), { program: 'test' });
    const { project } = await openForWork(path, join(folder, 'data'));
    const next = random(seed + 1);
    workAtRandom(project, steps, seed);
    project.freezeTrial('first', project.position.seq, madeUpResult(20));
    workAtRandom(project, 10, seed + 2);
    project.freezeTrial('second', project.position.seq, null);
    project.keepResult(project.position.seq, 'ideal', madeUpResult(channels));
    const cell = (key: string, size: number) => ({
      key,
      bytes: Uint8Array.from({ length: size }, () => whole(next, 256)),
    });
    project.putCells(
      Array.from({ length: 20 }, (_, index) => cell(`cell ${index}`, 500 + whole(next, 9000))),
    );
    project.close();
    return readFileSync(path);
  });
}
