import { expect, test } from 'vitest';
import { type Accuracy, DEFAULT_ACCURACY, PREVIEW_ACCURACY } from '../../solver/cell/cell.ts';
import { cutCells } from '../../solver/cell/cut/cut.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { teeChip } from '../testing/chips.ts';
import { cellHand } from './cell-hand.ts';
import type { CellNews, CellOrder } from './messages.ts';

const { cells } = cutCells(teeChip(), readGraph(teeChip()));
const [a, b, c] = cells as unknown as readonly [(typeof cells)[0], (typeof cells)[0], (typeof cells)[0]];

/** One thread that does nothing by itself. */
function bench() {
  const orders: CellOrder[] = [];
  let hear: (event: { data: CellNews }) => void = () => undefined;
  const worker = {
    postMessage: (order: CellOrder) => orders.push(order),
    addEventListener: (_: string, listener: typeof hear) => {
      hear = listener;
    },
  };
  const hand = cellHand(() => worker as unknown as Worker, 1);
  const found: [string, Accuracy, number][] = [];
  hand.listen((cell, accuracy, _, left) => found.push([cell.name, accuracy, left]));
  return {
    hand,
    found,
    begun: () => orders.flatMap((order) => (order.kind === 'solve' ? [order.name] : [])),
    held: () => orders.flatMap((order) => (order.kind === 'hold' ? [order.ms] : [])),
    dropped: () => orders.flatMap((order) => (order.kind === 'drop' ? [order.id] : [])),
    done: (id: number) =>
      hear({ data: { id, problem: { kind: 'memory', what: 'Not now.', where: '', remedy: 'Wait.' } } }),
  };
}

test('one after the other; a new list takes the place of what was not begun', () => {
  const { hand, found, begun, done } = bench();
  hand.solve([a, b], DEFAULT_ACCURACY);
  expect(begun()).toEqual([a.name]);
  hand.solve([a, c], DEFAULT_ACCURACY);
  done(1);
  expect(begun()).toEqual([a.name, c.name]);
  expect(found).toEqual([[a.name, DEFAULT_ACCURACY, 1]]);
  done(2);
  expect(found.at(-1)).toEqual([c.name, DEFAULT_ACCURACY, 0]);
});

test('what is solved ahead keeps nobody waiting, and is dropped when it is no longer asked for', () => {
  const { hand, found, begun, dropped, done } = bench();
  hand.solve([a], DEFAULT_ACCURACY, true);
  hand.solve([b], PREVIEW_ACCURACY);
  expect(begun()).toEqual([a.name, b.name]);
  expect(dropped()).toEqual([1]);
  // it was ready already when it was dropped
  done(1);
  expect(found).toEqual([]);
  done(2);
  expect(found).toEqual([[b.name, PREVIEW_ACCURACY, 0]]);
});

test('what is solved ahead and then waited for is not begun again, and goes before other things ahead', () => {
  const { hand, found, begun, dropped, done } = bench();
  hand.solve([a], DEFAULT_ACCURACY, true);
  hand.solve([a], DEFAULT_ACCURACY);
  hand.solve([b], DEFAULT_ACCURACY);
  expect(begun()).toEqual([a.name]);
  expect(dropped()).toEqual([]);
  done(1);
  expect(begun()).toEqual([a.name, b.name]);
  expect(found).toEqual([[a.name, DEFAULT_ACCURACY, 1]]);
});

test('work that was begun is held, and only where there is some', () => {
  const { hand, held, done } = bench();
  hand.hold(100);
  expect(held()).toEqual([]);
  hand.solve([a], DEFAULT_ACCURACY);
  hand.hold(100);
  hand.hold(0);
  expect(held()).toEqual([100, 0]);
  done(1);
  hand.hold(100);
  expect(held()).toEqual([100, 0]);
});
