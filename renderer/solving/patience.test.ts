import { expect, test } from 'vitest';
import { teeChip } from '../testing/chips.ts';
import type { Order } from './messages.ts';
import { patient } from './patience.ts';

function listening() {
  const heard: Order['kind'][] = [];
  const thread = patient({ post: (order) => heard.push(order.kind), listen: () => {}, end: () => {} });
  return { heard, thread };
}
const load: Order = { kind: 'load', id: 1, chip: teeChip(), options: {} };
const edit: Order = { kind: 'edit', id: 2, edit: { label: 'nothing', changes: [] } };

test('a thread that is held begins when it is released, in the order asked for', () => {
  const { heard, thread } = listening();
  thread.hold();
  thread.post({ kind: 'speak', units: {} });
  thread.post(load);
  expect(heard).toEqual([]);
  thread.release();
  expect(heard).toEqual(['speak', 'load']);
  thread.post(edit);
  expect(heard).toEqual(['speak', 'load', 'edit']);
});

test('an edit does not wait, nor what must go before it', () => {
  const { heard, thread } = listening();
  thread.hold();
  thread.post(load);
  thread.post(edit);
  expect(heard).toEqual(['load', 'edit']);
  thread.release();
  expect(heard).toEqual(['load', 'edit']);
});
