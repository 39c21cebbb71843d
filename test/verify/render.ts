import type { CheckedRow, Table } from './table.ts';

/** How the kinds of check are told to a reader. */
export const KINDS: Readonly<Record<CheckedRow['check'], string>> = {
  exact: 'an exact solution or a hand-computed value',
  published: 'a published value or formula',
  package: 'a general-purpose package, run separately',
  manufactured: 'a solution made up so that it is known',
  order: 'the order at which the error falls',
  invariant: 'something that must always hold',
  band: 'a band that the value must lie in',
};

export function number(value: number | null): string {
  if (value === null) return 'not a number';
  if (value === 0) return '0';
  return value >= 1e-3 && value < 1e4 ? String(Number(value.toPrecision(3))) : value.toExponential(1);
}

export function margin(row: CheckedRow): string {
  if (row.error === null) return 'none';
  return row.margin === null ? 'no error' : `${number(row.margin)} ×`;
}

/** Rows of one quantity together, in the table's order. */
function groups(table: Table): Map<string, CheckedRow[]> {
  const found = new Map<string, CheckedRow[]>();
  for (const row of table.rows) {
    const rows = found.get(row.quantity);
    if (rows) rows.push(row);
    else found.set(row.quantity, [row]);
  }
  return found;
}

interface Overview {
  readonly quantity: string;
  readonly checks: number;
  readonly kinds: string;
  readonly failed: number;
  /** Of the row that came closest to its tolerance. */
  readonly thinnest: CheckedRow;
}

/** One line per quantity: how often and how it was checked, and its thinnest margin. */
function overview(table: Table): Overview[] {
  const used = (row: CheckedRow): number =>
    row.error === null ? Number.POSITIVE_INFINITY : row.margin === null ? 0 : 1 / row.margin;
  return [...groups(table)].map(([quantity, rows]) => ({
    quantity,
    checks: rows.length,
    kinds: [...new Set(rows.map(({ check }) => check))].join(', '),
    failed: rows.filter(({ passed }) => !passed).length,
    thinnest: rows.reduce((a, b) => (used(b) > used(a) ? b : a)),
  }));
}

function verdict(table: Table): string {
  const rows = `${table.rows.length} checks ran on ${groups(table).size} quantities`;
  return table.failed === 0 ? `${rows}; all passed.` : `${rows}; ${table.failed} FAILED.`;
}

export function markdown(table: Table): string {
  const cell = (text: string): string => text.replaceAll('|', '\\|').replaceAll('\n', ' ');
  const line = (...cells: string[]): string => `| ${cells.map(cell).join(' | ')} |`;
  const rule = (n: number): string => `|${' --- |'.repeat(n)}`;
  const full = (row: CheckedRow): string =>
    line(
      row.at,
      row.check,
      row.source,
      number(row.error),
      number(row.tolerance),
      margin(row),
      row.passed ? 'yes' : 'NO',
    );
  const out = [
    `# Verification of Channelwright ${table.program}`,
    '',
    `${verdict(table)} ${table.date}, ${table.runtime}.`,
    '',
    'Errors are relative unless the quantity says otherwise. Margin: tolerance over error.',
    '',
    '## Thinnest margins',
    '',
    line('quantity', 'case', 'error', 'tolerance', 'margin'),
    rule(5),
    ...table.thinnest.map((place) => {
      const row = table.rows[place];
      return line(row.quantity, row.at, number(row.error), number(row.tolerance), margin(row));
    }),
    '',
    '## Quantities',
    '',
    line('quantity', 'checks', 'kinds', 'thinnest margin', 'failed'),
    rule(5),
    ...overview(table).map(({ quantity, checks, kinds, thinnest, failed }) =>
      line(quantity, String(checks), kinds, margin(thinnest), String(failed)),
    ),
    '',
    '## Not checked',
    '',
    ...table.notChecked.map(({ what, why }) => `- **${what}.** ${why}`),
    '',
    '## Checks',
  ];
  for (const [quantity, rows] of groups(table)) {
    out.push(
      '',
      `### ${quantity}`,
      '',
      line('case', 'check', 'source', 'error', 'tolerance', 'margin', 'passed'),
      rule(7),
    );
    out.push(...rows.map(full));
  }
  return `${out.join('\n')}\n`;
}

const STYLE = `
:root { color-scheme: light dark; --ink: #1c2430; --paper: #fbfaf7; --line: #d8d4ca; --soft: #5b6472; --bad: #a3142a; --good: #1d6b3f; }
@media (prefers-color-scheme: dark) { :root { --ink: #e8e6e1; --paper: #16191e; --line: #363b44; --soft: #a2a9b4; --bad: #ff8a94; --good: #7fd6a3; } }
body { margin: 0 auto; max-width: 74rem; padding: 2rem 1.5rem 4rem; color: var(--ink); background: var(--paper); font: 15px/1.5 system-ui, sans-serif; }
h1 { font-size: 1.7rem; margin: 0 0 .4rem; } h2 { font-size: 1.2rem; margin: 2.4rem 0 .6rem; } h3 { font-size: 1rem; margin: 1.8rem 0 .3rem; }
p, li { max-width: 48rem; } .soft { color: var(--soft); }
.wide { overflow-x: auto; } a { color: inherit; }
table { border-collapse: collapse; width: 100%; font-size: .88rem; }
th, td { text-align: left; vertical-align: top; padding: .3rem .7rem .3rem 0; border-bottom: 1px solid var(--line); }
th { font-weight: 600; color: var(--soft); } td.n, th.n { text-align: right; font-variant-numeric: tabular-nums; white-space: nowrap; }
.bad { color: var(--bad); font-weight: 600; } .good { color: var(--good); }
`;

function plain(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;');
}

export function html(table: Table): string {
  const head = (cells: readonly string[]): string =>
    `<tr>${cells.map((cell) => `<th scope="col"${NUMERIC.has(cell) ? ' class="n"' : ''}>${cell}</th>`).join('')}</tr>`;
  const cells = (texts: readonly string[], numbers: readonly string[], tail = ''): string =>
    `<tr>${texts.map((text) => `<td>${plain(text)}</td>`).join('')}${numbers
      .map((text) => `<td class="n">${plain(text)}</td>`)
      .join('')}${tail}</tr>`;
  const figures = (row: CheckedRow): string[] => [number(row.error), number(row.tolerance), margin(row)];
  const outcome = (row: CheckedRow): string =>
    row.passed ? '<td class="good">passed</td>' : '<td class="bad">failed</td>';
  const grid = (titles: readonly string[], body: readonly string[]): string =>
    `<div class="wide"><table><thead>${head(titles)}</thead><tbody>\n${body.join('\n')}\n</tbody></table></div>`;

  const sections: string[] = [];
  for (const [quantity, rows] of groups(table)) {
    sections.push(
      `<h3 id="q${sections.length / 2}">${plain(quantity)}</h3>`,
      grid(
        ['case', 'check', 'source', 'error', 'tolerance', 'margin', 'result'],
        rows.map((row) => cells([row.at, row.check, row.source], figures(row), outcome(row))),
      ),
    );
  }
  const used = new Set(table.rows.map((row) => row.check));
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>Verification of Channelwright ${plain(table.program)}</title>
<style>${STYLE}</style>
</head>
<body>
<h1>Verification of Channelwright ${plain(table.program)}</h1>
<p class="${table.failed === 0 ? 'good' : 'bad'}">${plain(verdict(table))}</p>
<p class="soft">${plain(table.date)}, ${plain(table.runtime)}. Every row is a check that ran to make this page.
Errors are relative unless the quantity says otherwise. Margin is the tolerance over the error.</p>
<h2>Kinds of check</h2>
<ul>
${(Object.keys(KINDS) as CheckedRow['check'][])
  .filter((kind) => used.has(kind))
  .map((kind) => `<li><b>${kind}</b>: against ${plain(KINDS[kind])}</li>`)
  .join('\n')}
</ul>
<h2>Thinnest margins</h2>
${grid(
  ['quantity', 'case', 'error', 'tolerance', 'margin'],
  table.thinnest.map((place) => {
    const row = table.rows[place];
    return cells([row.quantity, row.at], figures(row));
  }),
)}
<h2>Quantities</h2>
${grid(
  ['quantity', 'kinds', 'checks', 'margin', 'result'],
  overview(table).map(
    ({ quantity, checks, kinds, thinnest, failed }, k) =>
      `<tr><td><a href="#q${k}">${plain(quantity)}</a></td><td>${kinds}</td><td class="n">${checks}</td><td class="n">${plain(
        margin(thinnest),
      )}</td>${failed === 0 ? '<td class="good">passed</td>' : `<td class="bad">${failed} failed</td>`}</tr>`,
  ),
)}
<h2>Not checked</h2>
<ul>
${table.notChecked.map(({ what, why }) => `<li><b>${plain(what)}.</b> ${plain(why)}</li>`).join('\n')}
</ul>
<h2>Checks</h2>
${sections.join('\n')}
</body>
</html>
`;
}

const NUMERIC = new Set(['error', 'tolerance', 'margin', 'checks']);
