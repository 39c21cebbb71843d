import { noteOf } from '../../main/export/note/content.ts';
import { noteHtml } from '../../main/export/note/html.ts';
import { notePdf, paperOf } from '../../main/export/note/pdf.ts';
import { solve } from '../../solver/solve.ts';
import { comb } from './comb.ts';

/**
 * `node note-process.ts FORMAT COUNT RUNS`: solves a comb once, then makes its note as pdf or html again and again in a
 * process of its own; prints the wall time of the solve, and processor and wall time of each note, as JSON, ms.
 */

const [format, count, runs] = process.argv.slice(2);
const chip = comb(Number(count));
const begun = performance.now();
const result = await solve(chip, {});
const solved = performance.now() - begun;
const date = new Date('2026-12-01T12:00:00Z');
const times: { work: number; wall: number }[] = [];
for (let i = 0; i < Number(runs); i += 1) {
  const from = process.cpuUsage();
  const start = performance.now();
  const note = noteOf(chip, result, { program: 'Channelwright', date, paper: paperOf('A4') });
  if (format === 'html') noteHtml(note);
  else await notePdf(note, 'A4');
  const { user, system } = process.cpuUsage(from);
  times.push({ work: (user + system) / 1000, wall: performance.now() - start });
}
console.log(JSON.stringify({ solved, times }));
