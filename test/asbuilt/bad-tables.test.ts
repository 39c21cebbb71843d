import { expect, test } from 'vitest';
import { tableCsv } from '../../main/export/note/tables.ts';
import { readTable } from '../../main/measurements/read-table.ts';
import { madeChip } from '../../solver/asbuilt/made.ts';
import { readMeasured } from '../../solver/asbuilt/read-measured.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { solve } from '../../solver/solve.ts';
import { awkwardChip, noteFor } from '../export/note-chips.ts';
import { cross } from './chips.ts';

const made = (text: string, chip: Chip = cross()) => madeChip(chip, readMeasured(readTable(text), chip));

const HEAD = 'part,what,value,uncertainty,along,x,y\n';
const measured = cross({
  layers: [
    {
      id: 'flow',
      depth: 20,
      profile: {
        kind: 'polygon',
        points: [
          [0, 0],
          [1000, 0],
          [1000, 20],
          [0, 20],
        ],
      },
    },
  ],
});
const tapered = cross({
  channels: cross().channels.map(({ id, path }) => ({
    id,
    layer: 'flow',
    path: path.map(([x, y]) => [x / 1000, y / 1000]),
    width: id === 'a' ? [1000, 800] : 1000,
  })),
});

type Case = readonly [name: string, text: string, where: string, what: RegExp, remedy: RegExp, chip?: Chip];
const BAD: readonly Case[] = [
  ['nothing', '', 'row 1', /table is empty/, /names the columns/],
  ['only blank rows', '\n \n,,\n', 'row 1', /table is empty/, /names the columns/],
  ['a head alone', HEAD, 'row 1', /a head but no measurement/, /one measurement to a row/],
  ['no head', 'flow,depth,20 um\n', 'row 1, column 1', /"flow" is no column/, /Known: part, what, value/],
  [
    'a column misspelt',
    'part,what,valeu\na,depth,3\n',
    'row 1, column 3',
    /"valeu" is no column/,
    /Did you mean "value"/,
  ],
  ['no value column', 'part,what\na,depth\n', 'row 1', /No column is the value/, /part, what, value/],
  [
    'a column twice',
    'part,what,value,size\na,depth,3,4\n',
    'row 1, column 4',
    /Two columns are the value/,
    /Take one/,
  ],
  [
    'an unknown unit in the head',
    'part,what,value (furlong)\na,width,3\n',
    'row 1, column value (furlong)',
    /no unit of length/,
    /value \(um\)/,
  ],
  [
    'an unknown part',
    `${HEAD}a,width,1000\nfeed,width,100\n`,
    'row 3, column part',
    /no channel and no layer "feed"/,
    /./,
  ],
  [
    'a part misspelt',
    'part,what,value\nflwo,depth,20\n',
    'row 2, column part',
    /"flwo"/,
    /Did you mean "flow"/,
  ],
  ['no part', 'part,what,value\n,depth,20\n', 'row 2, column part', /not said which part/, /Name a channel/],
  [
    'another quantity',
    'part,what,value\na,length,20\n',
    'row 2, column what',
    /"length" is nothing measured here/,
    /depth, width, or bias/,
  ],
  ['no quantity', 'part,what,value\na,,20\n', 'row 2, column what', /not said what/, /depth, width, or bias/],
  ['no value', 'part,what,value\n\na,width,\n', 'row 3, column value', /value is missing/, /such as/],
  [
    'another dimension',
    'part,what,value\na,width,20 kPa\n',
    'row 2, column value',
    /takes a length; 20 kPa is a pressure/,
    /with its unit/,
  ],
  [
    'a word',
    'part,what,value\na,width,about twenty\n',
    'row 2, column value',
    /takes a length/,
    /with its unit/,
  ],
  [
    'a decimal comma',
    'part;what;value\na;width;20,5\n',
    'row 2, column value',
    /has a comma/,
    /point as the decimal mark/,
  ],
  [
    'a negative depth',
    'part,what,value\na,depth,-20\n',
    'row 2, column value',
    /none that a channel has/,
    /Check the number/,
  ],
  [
    'a depth of none',
    'part,what,value\nflow,depth,0\n',
    'row 2, column value',
    /none that a channel has/,
    /Check the number/,
  ],
  [
    'metres for micrometres',
    'part,what,value\na,width,200 m\n',
    'row 2, column value',
    /none that a channel has/,
    /unit/,
  ],
  [
    'the width of a layer',
    'part,what,value\nflow,width,1000\n',
    'row 2, column what',
    /has no width of its own/,
    /bias/,
  ],
  [
    'the bias of a channel',
    'part,what,value\na,bias,2\n',
    'row 2, column what',
    /given a bias/,
    /name the layer/,
  ],
  [
    'an uncertainty as large as the value',
    `${HEAD}a,width,1000,1000\n`,
    'row 2, column uncertainty',
    /as large as/,
    /±/,
  ],
  ['a negative uncertainty', `${HEAD}a,width,1000,-2\n`, 'row 2, column uncertainty', /negative/, /±/],
  [
    'an uncertainty in kilograms',
    `${HEAD}a,width,1000,2 kPa\n`,
    'row 2, column uncertainty',
    /takes a length/,
    /2 %/,
  ],
  [
    'beyond the channel',
    `${HEAD}a,width,1000,1,40 mm\n`,
    'row 2, column along',
    /beyond channel "a", which is 23.09 mm long/,
    /first point/,
  ],
  [
    'before the channel',
    `${HEAD}a,width,1000,1,-4 mm\n`,
    'row 2, column along',
    /beyond channel "a"/,
    /first point/,
  ],
  ['along a layer', `${HEAD}flow,depth,20,1,4 mm\n`, 'row 2, column along', /nothing to go along/, /x and y/],
  [
    'half a place',
    `${HEAD}flow,depth,20,1,,4 mm\n`,
    'row 2, column y',
    /needs x and y; y is missing/,
    /both/,
  ],
  [
    'off the chip',
    `${HEAD}flow,depth,20,1,,400 mm,3 mm\n`,
    'row 2, column x',
    /outside the chip, which is 75.00 mm by 27.00 mm/,
    /lower left/,
  ],
  [
    'off the channel',
    `${HEAD}a,width,1000,1,,40 mm,13 mm\n`,
    'row 2, column x',
    /off channel "a"/,
    /on the channel/,
  ],
  [
    'two places',
    `${HEAD}a,width,1000,1,4 mm,12 mm,18 mm\n`,
    'row 2, column along',
    /given twice/,
    /one of the two/,
  ],
  [
    'more cells than heads',
    'part,what,value\na,width,1000,2\n',
    'row 2',
    /4 cells under 3 heads/,
    /Quote|name the column/,
  ],
  [
    'an open quotation mark',
    'part,what,value\na,width,"1000\nb,width,900\n',
    'row 2',
    /opened and never closed/,
    /Close it/,
  ],
  [
    'a quotation mark within',
    'part,what,value\na,wi"dth,1000\n',
    'row 2, column 2',
    /within a text/,
    /Quote the whole cell/,
  ],
  ['bytes that are no text', 'part,what,value\na,width,1\u0000000\n', 'row 2', /no text in UTF-8/, /UTF-8/],
  [
    'a cell without end',
    `part,what,value,note\na,width,1000,${'x'.repeat(2000)}\n`,
    'row 2, column 4',
    /2000 characters/,
    /Shorten/,
  ],
  [
    'a taper without a place',
    'part,what,value\na,width,900\n',
    'row 2, column along',
    /"a" is a taper/,
    /distance along/,
    tapered,
  ],
  [
    'a width of a measured outline',
    'part,what,value\na,width,900\n',
    'row 2, column what',
    /measured outline/,
    /Measure the outline anew/,
    measured,
  ],
  [
    'a line that runs into nothing',
    `${HEAD}a,width,1000,1,0 mm\na,width,400,1,13 mm\n`,
    'row 2, column value',
    /would have no width/,
    /Check numbers/,
  ],
];

test.each(BAD.map((one) => [one[0], one] as const))('%s is refused by row and column', (_, one) => {
  const [, text, where, what, remedy, chip] = one;
  let caught: unknown;
  try {
    made(text, chip);
  } catch (error) {
    caught = error;
  }
  expect(caught).toBeInstanceOf(Problem);
  const problem = caught as Problem;
  expect(problem.what).toMatch(what);
  expect(problem.where).toBe(where);
  expect(problem.remedy).toMatch(remedy);
});

test('commas, semicolons and tabs, CRLF, a byte order mark, quotes and breaks in cells: one table', () => {
  const chip = cross();
  const rows = [
    ['Part', 'WHAT', 'value (um)', '±', 'note'],
    ['flow', 'depth', '19.5', '0.2', 'profilometer'],
    ['a', 'width', '1010', '1 %', 'said "wide"; ok,\nyes'],
  ];
  const quoted = (separator: string, end: string): string =>
    rows.map((row) => row.map((cell) => `"${cell.replaceAll('"', '""')}"`).join(separator)).join(end);
  const wanted = readMeasured(readTable(quoted(',', '\n')), chip);
  expect(wanted).toMatchObject([
    { what: 'depth', of: 'layer', id: 'flow', row: 2 },
    { what: 'width', of: 'channel', id: 'a', row: 3 },
  ]);
  expect(wanted[0]!.value).toBeCloseTo(19.5e-6, 15);
  expect(wanted[0]!.uncertainty).toBeCloseTo(0.2e-6, 15);
  expect(wanted[1]!.uncertainty).toBeCloseTo(10.1e-6, 15);
  for (const [separator, end] of [
    [';', '\n'],
    ['\t', '\r\n'],
    [',', '\r\n'],
  ] as const) {
    expect(readMeasured(readTable(`\ufeff${quoted(separator, end)}${end}`), chip)).toEqual(wanted);
  }
});

test('rows are counted as the file has them, blank and broken ones too', () => {
  const text = 'part,what,value,note\n\na,width,1000,"one\ntwo"\n\nb,widht,1000,\n';
  expect(() => made(text)).toThrow(/row 6, column what/);
});

test('the table of the note, filled in, is what was measured; rows left empty are as drawn', async () => {
  const chip = awkwardChip();
  const note = noteFor(chip, await solve(chip, { junctions: 'ideal' }));
  const tables = note.sections.flatMap(({ blocks }) =>
    blocks.flatMap((block) => (block.kind === 'table' ? [block.table] : [])),
  );
  const csv = tableCsv(tables.find(({ id }) => id === 'measured')!);
  const lines = csv.split('\r\n');
  expect(() => readMeasured(readTable(csv), chip)).toThrow(/no measurement/);
  // one with a name that a spreadsheet would run, one in signs of another script
  const fill = (id: string, reading: string): void => {
    const k = lines.findIndex((line) => line.includes(id));
    const rest = /^(.*),,,,$/.exec(lines[k]!)![1]!;
    lines[k] = `${rest},${reading},0.5,,by microscope`;
  };
  fill('=feed', '604');
  fill('τ layer', '49');
  const measured = readMeasured(readTable(lines.join('\r\n')), chip);
  expect(measured).toMatchObject([
    { of: 'layer', id: 'τ layer', what: 'depth' },
    { of: 'channel', id: '=feed', what: 'width' },
  ]);
  expect(measured[1]!.value).toBeCloseTo(604e-6, 15);
  expect(measured[1]!.uncertainty).toBeCloseTo(0.5e-6, 15);
});
