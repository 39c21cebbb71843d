import { noteOf } from '../../main/export/note/content.ts';
import { noteHtml } from '../../main/export/note/html.ts';
import { notePdf, paperOf } from '../../main/export/note/pdf.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { solve } from '../../solver/solve.ts';
import type { BenchRow } from './row.ts';

/** A feed with outlets along it, channel after channel: `count` channels, half of them outlets with a target each. */
function comb(count: number): Chip {
  const outlets = Math.floor(count / 2);
  const channels = Array.from({ length: outlets }, (_, i) => [
    {
      id: `feed ${i + 1}`,
      layer: 'flow',
      path: [
        [1000 + 1200 * i, 13_000],
        [2200 + 1200 * i, 13_000],
      ],
      width: 400,
    },
    {
      id: `lane ${i + 1}`,
      layer: 'flow',
      path: [
        [2200 + 1200 * i, 13_000],
        [2200 + 1200 * i, 4000],
      ],
      width: 60,
    },
  ]).flat();
  return readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: `comb of ${count}`,
      outline: { width: 1200 * outlets + 4000, height: 16_000 },
      layers: [{ id: 'flow', depth: 50, fillet: 5, tolerance: { depth: '3 %', width: '2 um' } }],
      channels,
      ports: [
        { id: 'in', at: [1000, 13_000], layer: 'flow', diameter: 800, drive: { flow: '50 uL/min' } },
        ...Array.from({ length: outlets }, (_, i) => ({
          id: `out ${i + 1}`,
          at: [2200 + 1200 * i, 4000],
          layer: 'flow',
          diameter: 700,
          drive: { pressure: 0 },
          tubing: [{ bore: '0.5 mm', length: '200 mm' }],
        })),
      ],
      fluid: { name: 'water', temperature: '25 degC' },
      targets: Array.from({ length: outlets }, (_, i) => ({
        port: `out ${i + 1}`,
        share: 1 / outlets,
        within: '5 %',
      })),
      limits: [{ name: 'cells', shear: '2 Pa', cellDiameter: '12 um' }],
      process: { kind: 'film-mask' },
    }),
  );
}

const DATE = new Date('2026-12-01T12:00:00Z');
const RUNS = 9;

async function medianOf(work: () => Promise<unknown>, warmup = 1): Promise<number> {
  const times: number[] = [];
  for (let i = -warmup; i < RUNS; i += 1) {
    const start = performance.now();
    await work();
    if (i >= 0) times.push(performance.now() - start);
  }
  return times.sort((a, b) => a - b)[Math.floor(RUNS / 2)]!;
}

/** The note from a solved chip to bytes, cold fonts excluded after the first; against solving the same chip. */
export default async function bench(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  for (const count of [100, 400]) {
    const chip = comb(count);
    const result = await solve(chip, {});
    const solved = await medianOf(async () => await solve(chip, {}), 0);
    const note = () => noteOf(chip, result, { program: 'Channelwright', date: DATE, paper: paperOf('A4') });
    const start = performance.now();
    await notePdf(note(), 'A4');
    const first = performance.now() - start;
    const pdf = await medianOf(async () => await notePdf(note(), 'A4'));
    const html = await medianOf(async () => noteHtml(note()));
    const against = 'solving it with all junctions';
    const row = { unit: 'ms', runs: RUNS } as const;
    rows.push({
      ...row,
      what: `note of ${count} channels as PDF`,
      median: pdf,
      ...(count === 100 && { target: 1500 }),
      note: `the first of the process ${first.toFixed(0)} ms; ${(pdf / solved).toPrecision(3)} x ${against}`,
    });
    rows.push({ ...row, what: `note of ${count} channels as HTML`, median: html });
  }
  return rows;
}
