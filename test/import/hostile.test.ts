import { expect, test } from 'vitest';
import { startImport } from '../../main/import/thread.ts';
import { BOMBS, readBomb, readMutated, SEEDS } from './hostile.ts';
import { bytesOf, USUAL } from './read.ts';

/** Files that are broken, or made to break the program: a named refusal, within bounds, and the process lives. */

const NEARLY =
  '<svg xmlns="http://www.w3.org/2000/svg"><style>.a{fill:none;stroke:#00</style><g id="flow" transform="translate(10 20)">' +
  '<path d="M100 100h800v40h-800z m0 100c50 20 80 20 100 0v40z"/>' +
  '<polyline class="a" stroke-width="20" points="0,0 500,0 500,300"/></g><circle cx="100" cy="120" r="30"/></svg>';

test.each(Object.keys(SEEDS))(
  '1,667 mutated %s files: a chip, or a problem that says what is wrong',
  (kind) => {
    const { refused, longest } = readMutated(kind, 1667, kind.charCodeAt(0));
    expect(refused).toBeGreaterThan(100);
    expect(refused).toBeLessThan(1667);
    expect(longest).toBeLessThan(5);
  },
  120_000,
);

test.each(Object.keys(BOMBS))(
  '%s: refused by name, in a thread that takes neither the time nor the memory',
  async (name) => {
    const { ended, seconds, megabytes } = await readBomb(name);
    expect(ended.kind).toBe('failed');
    if (ended.kind !== 'failed') return;
    expect(ended.problem.what.length).toBeGreaterThan(20);
    expect(ended.problem.remedy.length).toBeGreaterThan(10);
    // A refusal of the reader's own, not a thread that broke.
    expect(ended.problem.what).not.toMatch(/stopped\.$/);
    expect(seconds).toBeLessThan(5);
    expect(megabytes).toBeLessThan(500);
  },
  60_000,
);

test('a filled line whose points are nearly on its edges: the triangulation ends, and it is a chip', async () => {
  // left to itself the triangulation flips the same two diagonals for ever
  const thread = startImport(
    { bytes: bytesOf(NEARLY), file: 'nearly', settings: { ...USUAL, unit: 1e-6 } },
    () => undefined,
  );
  expect((await thread.ended).kind).toBe('made');
}, 60_000);

test('an import that runs can be ended, and the next one works', async () => {
  const line = '0\nLINE\n8\nA\n10\n0\n20\n0\n11\n5\n21\n5\n';
  const slow = bytesOf(`0\nSECTION\n2\nENTITIES\n${line.repeat(150_000)}0\nENDSEC\n0\nEOF\n`);
  const thread = startImport(
    { bytes: slow, file: 'slow', settings: { ...USUAL, unit: 1e-6 } },
    () => void thread.cancel(),
  );
  expect((await thread.ended).kind).toBe('cancelled');
  const fine = await startImport({ bytes: SEEDS.dxf!, file: 'fine', settings: USUAL }, () => undefined).ended;
  expect(fine.kind).toBe('made');
}, 60_000);
