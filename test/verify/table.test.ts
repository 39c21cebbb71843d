import { expect, test } from 'vitest';
import { NOT_CHECKED } from './not-checked.ts';
import { html, markdown } from './render.ts';
import type { Row as Recorded } from './row.ts';
import { parseRows, tableOf } from './table.ts';

const about = { program: '1.2.3', date: '2026-01-01T00:00:00.000Z', runtime: 'Node v24' };

function row(over: Partial<Recorded>): Recorded {
  return {
    quantity: 'resistance',
    check: 'exact',
    at: 'a = 1',
    source: 'a book',
    tolerance: 1e-3,
    error: 1e-4,
    file: 'x.test.ts',
    ...over,
  };
}

test('only what was recorded stands in the table, worst margins first', () => {
  const table = tableOf(
    [
      row({ at: 'a = 10', error: 5e-4 }),
      row({ at: 'a = 2', error: 0 }),
      row({ at: 'a = 3', error: 2e-3 }),
      row({ at: 'a = 4', error: null }),
    ],
    about,
  );
  expect(table.rows.map((r) => [r.at, r.passed])).toEqual([
    ['a = 2', true],
    ['a = 3', false],
    ['a = 4', false],
    ['a = 10', true],
  ]);
  expect(table.failed).toBe(2);
  expect(table.thinnest.map((place) => table.rows[place].at)).toEqual(['a = 4', 'a = 3', 'a = 10', 'a = 2']);
  expect(table.rows[3].margin).toBeCloseTo(2, 12);
});

test('at most ten thin margins are listed', () => {
  const rows = Array.from({ length: 30 }, (_, i) => row({ at: `${i}`, error: i * 1e-5 }));
  const table = tableOf(rows, about);
  expect(table.thinnest).toHaveLength(10);
  expect(table.rows[table.thinnest[0]].at).toBe('29');
});

test('a check without an error has no margin, even where its tolerance is zero', () => {
  const [exact] = tableOf([row({ error: 0, tolerance: 0 })], about).rows;
  expect(exact).toMatchObject({ passed: true, margin: null });
});

test('pages carry every row, every gap, no script, and no markup of the text', () => {
  const table = tableOf([row({ quantity: 'flow <b>|x', source: 'A & B "C"' }), row({ error: 1 })], about);
  const page = html(table);
  expect(page).toContain('flow &lt;b&gt;|x');
  expect(page).toContain('A &amp; B &quot;C&quot;');
  expect(page).not.toMatch(/<script|<b>\|/);
  expect(page.match(/class="bad">failed/g)).toHaveLength(1);
  expect(page.match(/class="bad">1 failed/g)).toHaveLength(1);
  const text = markdown(table);
  expect(text).toContain('flow <b>\\|x');
  expect(text).toContain('1 FAILED');
  // Every line of the overview leads to the checks of its quantity.
  const links = [...page.matchAll(/href="#(q\d+)"/g)].map(([, id]) => id);
  expect(links).toHaveLength(2);
  for (const id of links) expect(page.split(`id="${id}"`)).toHaveLength(2);
  for (const { what } of NOT_CHECKED) {
    expect(page).toContain(what.replaceAll('"', '&quot;').replaceAll('&', '&amp;'));
    expect(text).toContain(what);
  }
});

test('recorded lines are read back as they were', () => {
  const rows = [row({}), row({ error: null })];
  expect(parseRows(`${rows.map((r) => JSON.stringify(r)).join('\n')}\n`)).toEqual(rows);
});
