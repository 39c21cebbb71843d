import { startImport } from '../../main/import/thread.ts';
import { largeDxf } from './import-drawing.ts';
import type { BenchRow } from './row.ts';

const SETTINGS = { unit: null, depth: 50_000, roles: {}, lineWidth: null, portsAtEnds: true } as const;

/** A DXF of 50,000 entities from bytes to a checked chip, in the thread it is always read in; wall and processor time. */
export default async function bench(): Promise<BenchRow[]> {
  const bytes = new TextEncoder().encode(largeDxf(50_000));
  const walls: number[] = [];
  const works: number[] = [];
  let steps = 0;
  for (let k = 0; k < 3; k += 1) {
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
  const median = (values: number[]): number => values.sort((a, b) => a - b)[1]!;
  return [
    {
      what: 'import of a DXF of 50,000 entities, wall clock',
      median: median(walls),
      unit: 'ms',
      runs: 3,
      target: 5000,
      note: `told ${Math.round(steps / 3)} times how far it was`,
    },
    { what: 'the same, processor time of all threads', median: median(works), unit: 'ms', runs: 3 },
  ];
}
