import fc from 'fast-check';
import { expect, test } from 'vitest';
import { Problem } from '../problem/problem.ts';
import { parseJson } from './description-json.ts';
import { findSlip } from './description-slip.ts';

const CASES: [text: string, where: string, what: string][] = [
  ['', 'line 1, column 1', 'The text is empty.'],
  ['{\n  "a": 1,\n  "b": 2,\n}', 'line 4, column 1', 'A comma stands before "}".'],
  ['{"a": [1, 2,]}', 'line 1, column 13', 'A comma stands before "]".'],
  ['{"a": 1\n "b": 2}', 'line 2, column 2', 'A comma or "}" is expected here.'],
  ['{"a" 1}', 'line 1, column 6', 'A colon is expected here.'],
  ['{a: 1}', 'line 1, column 2', 'A key is expected here.'],
  ["{'a': 1}", 'line 1, column 2', 'JSON takes no single quotes.'],
  ['{"a": 1 // one\n}', 'line 1, column 9', 'JSON takes no comments.'],
  ['// a chip\n{}', 'line 1, column 1', 'JSON takes no comments.'],
  ['{"width": NaN}', 'line 1, column 11', 'NaN is no number in JSON.'],
  ['{"width": -Infinity}', 'line 1, column 11', '-Infinity is no number in JSON.'],
  ['{"width": 120um}', 'line 1, column 11', '120um is no number in JSON.'],
  ['{"width": .5}', 'line 1, column 11', '.5 is no number in JSON.'],
  ['{"width": 007}', 'line 1, column 11', '007 is no number in JSON.'],
  ['{"closed": True}', 'line 1, column 12', 'True is no JSON value.'],
  ['{"a": }', 'line 1, column 7', 'A value is expected here, not "}".'],
  ['{"a": "b', 'line 1, column 7', 'A string that opens here is never closed.'],
  ['{"a": "b\n"}', 'line 1, column 9', 'A string holds a line break or control character.'],
  ['{"a": "C:\\x"}', 'line 1, column 10', 'A string holds a backslash that begins no escape.'],
  ['{"a": [1, 2', 'line 1, column 12', 'The text ends too early.'],
  ['{} {}', 'line 1, column 4', 'More text follows after the end.'],
];

test.each(CASES)('%j', (text, where, what) => {
  let caught: unknown;
  try {
    parseJson(text);
  } catch (error) {
    caught = error;
  }
  expect(caught).toBeInstanceOf(Problem);
  expect(caught).toMatchObject({ kind: 'syntax', where, what });
  expect((caught as Problem).remedy).toMatch(/\S\.$|"\.$/);
});

test('a key that stands twice in one group is named, because one of the two would be lost', () => {
  const text = '{"a": {"b": ":\\\\\\":", "c": [1]},\n "d": [{"b": 1}, {"b": 2, "w": 3,\n  "b": 4}]}';
  expect(() => parseJson(text)).toThrow(
    new Problem(
      'syntax',
      'The key "b" stands twice in one group.',
      'line 3, column 3',
      'Take one of the two away.',
    ),
  );
  expect(() => parseJson('{"a": 1, "\\u0061": 2}')).toThrow(/The key "a" stands twice/);
  expect(parseJson(text.replace('"b": 4', '"e": 4'))).toMatchObject({ d: [{}, { e: 4 }] });
  fc.assert(
    fc.property(fc.json({ maxDepth: 4 }), (json) => {
      expect(JSON.stringify(parseJson(json))).toBe(JSON.stringify(JSON.parse(json)));
    }),
    { numRuns: 500 },
  );
});

test('a long string that never ends is found as well', () => {
  expect(findSlip(`{"a": "${'x'.repeat(30_000_000)}`)).toMatchObject({ offset: 6 });
});

test('a byte-order mark is let pass', () => {
  expect(parseJson('\ufeff{"a": 1}')).toEqual({ a: 1 });
});

test('whatever JSON.parse refuses has a place, and nothing else has one', () => {
  const mutated = fc
    .tuple(
      fc.json({ maxDepth: 4 }),
      fc.array(
        fc.tuple(
          fc.nat(),
          fc.nat(2),
          fc.constantFrom(',', '"', '}', ']', '{', '[', ':', '1', ' ', '\\', '-', 'e', '.', 'x'),
        ),
        { maxLength: 3 },
      ),
    )
    .map(([json, slips]) =>
      slips.reduce((text, [at, drop, put]) => {
        const place = at % (text.length + 1);
        return text.slice(0, place) + put + text.slice(place + drop);
      }, json),
    );
  fc.assert(
    fc.property(mutated, (text) => {
      let good = true;
      try {
        JSON.parse(text);
      } catch {
        good = false;
      }
      expect(findSlip(text) === null).toBe(good);
    }),
    { numRuns: 5000 },
  );
});

test('deep nesting neither overflows nor takes long', () => {
  expect(() => parseJson('['.repeat(1_000_000))).toThrow(Problem);
});
