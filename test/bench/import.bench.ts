import { startImport } from '../../main/import/thread.ts';
import { largeDxf, networksDxf } from './import-drawing.ts';
import type { BenchRow } from './row.ts';

const SETTINGS = { unit: null, depth: 50_000, roles: {}, lineWidth: null, portsAtEnds: true } as const;

/** Drawings from bytes to a checked chip, in the thread they are always read in; wall and processor time. */
export default async function bench(): Promise<BenchRow[]> {
  const apart = await measured(largeDxf(50_000), 3);
  const joined = await measured(networksDxf(10_000, 50), 1);
  return [
    {
      what: 'import of a DXF of 50,000 entities, wall clock',
      median: apart.wall,
      unit: 'ms',
      runs: 3,
      target: 5000,
      note: `told ${apart.steps} times how far it was`,
    },
    { what: 'the same, processor time of all threads', median: apart.work, unit: 'ms', runs: 3 },
    {
      what: '10,000 outlines that join to 200 networks, no two alike, wall clock',
      median: joined.wall,
      unit: 'ms',
      runs: 1,
    },
    { what: 'the same, processor time of all threads', median: joined.work, unit: 'ms', runs: 1 },
  ];
}

async function measured(text: string, runs: number): Promise<{ wall: number; work: number; steps: number }> {
  const bytes = new TextEncoder().encode(text);
  const walls: number[] = [];
  const works: number[] = [];
  let steps = 0;
  for (let k = 0; k < runs; k += 1) {
    const start = performance.now();
    const from = process.cpuUsage();
    const ended = await startImport({ bytes, file: 'large.dxf', settings: SETTINGS }, () => {
      steps += 1;
    }).ended;
    if (ended.kind !== 'made') throw new Error(`not made: ${JSON.stringify(ended)}`);
    const { user, system } = process.cpuUsage(from);
    walls.push(performance.now() - start);
    works.push((user + system) / 1000);
  }
  const median = (values: number[]): number => values.sort((a, b) => a - b)[values.length >> 1]!;
  return { wall: median(walls), work: median(works), steps: Math.round(steps / runs) };
}
