import { expect, test } from 'vitest';
import { plainText } from '../../main/export/note/blocks.ts';
import { type Note, tablesOf } from '../../main/export/note/content.ts';
import { noteHtml } from '../../main/export/note/html.ts';
import { notePdf } from '../../main/export/note/pdf.ts';
import { tableCsv } from '../../main/export/note/tables.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { makeEdit } from '../../solver/chip/edit.ts';
import type { Result } from '../../solver/chip/result.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { solve } from '../../solver/solve.ts';
import { random } from '../faults/random.ts';
import { EVERYTHING } from '../page/everything.ts';
import { comb, workEdit } from '../solve/random-work.ts';
import { noteFor, solvedDemo } from './note-chips.ts';

/** What the note says, before it is set. */

/** All words of a note: sentences, facts, lists. */
const said = ({ sections }: Note): string =>
  sections
    .flatMap(({ blocks }) => blocks)
    .flatMap((block) =>
      block.kind === 'words'
        ? [plainText(block.runs)]
        : block.kind === 'facts'
          ? block.rows.map(({ name, value }) => `${name}: ${plainText(value)}`)
          : block.kind === 'list'
            ? block.items.map(plainText)
            : [],
    )
    .join('\n')
    .replaceAll('\u00a0', ' ');

const column = (note: Note, table: string, head: string): readonly string[] =>
  tablesOf(note)
    .find(({ id }) => id === table)!
    .columns.find((one) => one.head === head)!.texts;

test('a chip with everything: pumps, reservoir, drift, roof, via, rating, process', async () => {
  const chip = readDescription(JSON.stringify(EVERYTHING));
  const result = await solve(chip, { junctions: 'ideal' });
  const note = noteFor(chip, result);
  const text = said(note);
  expect(text).toContain('Made by soft moulding from a film mask.');
  expect(text).toContain('The lid over layer flow is soft: Young’s modulus 2 MPa, 4 mm thick');
  expect(text).toContain('chip and fittings are stated to bear 200 kPa');
  expect(text).toContain('The assay takes 10 min.');
  expect(text).toContain('Soft lids bulge by their stated law');
  expect(column(note, 'vias', 'via')).toEqual(['shaft']);
  expect(column(note, 'ports', 'tubing, from the chip outward')[0]).toBe(
    '500 µm bore, 300 mm'.replaceAll(/ (?=µ|m)/g, '\u00a0'),
  );
  expect(column(note, 'layers', 'cross-section')[0]).toBe('trapezoid, walls at 85° to the floor');
  expect(column(note, 'drives', 'set to')).toEqual([
    'reservoir 100\u00a0mm above the chip',
    'open to the air',
  ]);
  expect(text).toContain('Limits: 4 limits, 3 met, 1 not judged');
  expect(column(note, 'limits', 'limit')).toEqual(['stress', 'floor', 'curve', 'law']);
  expect((await notePdf(note, 'letter')).length).toBeGreaterThan(10_000);
});

test('a reservoir that empties: levels and shares at the end of the assay', async () => {
  const [flow, upper] = EVERYTHING.layers;
  const { roof: _, ...rigid } = flow as Readonly<Record<string, unknown>>;
  const water = { name: 'water', temperature: '25 degC' };
  const chip = readDescription(JSON.stringify({ ...EVERYTHING, layers: [rigid, upper], fluid: water }));
  const result = await solve(chip, { junctions: 'ideal' });
  const note = noteFor(chip, result);
  expect(column(note, 'drift', 'port')).toEqual(result.drift!.ports.map(({ port }) => port));
});

test('what was accepted stands with its reason, and no longer among what is open', async () => {
  const { chip, result } = await solvedDemo('eight-way-splitter.json');
  const [finding] = result.findings;
  const accepted: Result = {
    ...result,
    findings: result.findings.map((one) =>
      one === finding ? { ...one, accepted: 'held in three runs' } : one,
    ),
  };
  const made = noteFor(chip, accepted).sections.find(({ id }) => id === 'buildability')!;
  const text = said({ ...noteFor(chip, accepted), sections: [made] });
  expect(text).toContain('Accepted by the designer, with the reason given:');
  expect(text).toContain('Accepted: held in three runs.');
  expect(text.indexOf(finding!.says.slice(0, 20))).toBeGreaterThan(text.indexOf('Accepted by the designer'));
});

test('a missed target and limit are said in words at the first glance', async () => {
  const { chip, result } = await solvedDemo('eight-way-splitter.json');
  const missed: Result = { ...result, targets: result.targets.map((one, i) => ({ ...one, met: i > 1 })) };
  const text = said(noteFor(chip, missed));
  expect(text).toContain('Flow split: 2 of 8 targets missed');
  expect(said(noteFor(chip, result))).toContain('Flow split: 8 targets, all met');
});

test('chips under random edits make a note in every format', { timeout: 240_000 }, async () => {
  const solved: { chip: Chip; result: Result }[] = [];
  for (let seed = 1; seed <= 20; seed += 1) {
    const next = random(seed);
    let chip = comb(6);
    for (let step = 1; step <= (seed % 6) + 1; step += 1)
      chip = makeEdit(chip, workEdit(chip, next, step)).chip;
    try {
      solved.push({ chip, result: await solve(chip, { junctions: 'ideal' }) });
    } catch (error) {
      if (!(error instanceof Problem)) throw error;
    }
  }
  expect(solved.length).toBeGreaterThan(10);
  for (const { chip, result } of solved) {
    const note = noteFor(chip, result);
    for (const table of tablesOf(note)) {
      for (const { texts, cells } of table.columns) {
        expect(texts).toHaveLength(table.rows);
        expect(cells).toHaveLength(table.rows);
      }
      expect(tableCsv(table)).not.toContain('undefined');
    }
    expect(noteHtml(note)).not.toMatch(/\bundefined\b|\bNaN\b|\[object/);
    expect((await notePdf(note, 'A4')).length).toBeGreaterThan(10_000);
  }
});
