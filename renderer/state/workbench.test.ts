import { expect, test } from 'vitest';
import { Spatial } from '../sheet/spatial.ts';
import { emptyChip } from '../testing/chips.ts';
import type { ToolEvent } from '../tools/tool.ts';
import type { Desk } from './desk.ts';
import { createStore } from './store.ts';
import { FIRST_VIEW } from './view.ts';
import { createWorkbench } from './workbench.ts';

const mm = 1_000_000;
const clicked = (x: number, y: number): ToolEvent[] => [
  { kind: 'move', at: [x, y] },
  { kind: 'down', at: [x, y] },
  { kind: 'up', at: [x, y] },
];

/** A desk that refuses what it is told to refuse. */
function sitDown(refuses: () => boolean) {
  const chip = emptyChip();
  const view = createStore(FIRST_VIEW);
  const spatial = new Spatial(chip);
  const labels: string[] = [];
  const desk = {
    view,
    chip: () => chip,
    spatial: () => spatial,
    alter: ({ label }: { label: string }) => {
      if (refuses()) return false;
      labels.push(label);
      return true;
    },
  } as unknown as Desk;
  return { view, labels, bench: createWorkbench(desk) };
}

test('a tool that the view lays down is in no hand any more: another project begins with none', () => {
  const { view, bench } = sitDown(() => false);
  bench.take('channel');
  for (const event of clicked(10 * mm, 13 * mm)) bench.event(event);
  expect(bench.preview().readout?.length).toBeGreaterThan(1);
  view.patch({ tool: 'select' });
  expect(bench.preview()).toEqual({});
});

test('what was drawn and is refused stays in the hand, to be put when it can be', () => {
  let refused = true;
  const { labels, bench } = sitDown(() => refused);
  bench.take('channel');
  for (const event of [...clicked(10 * mm, 13 * mm), ...clicked(20 * mm, 13 * mm)]) bench.event(event);
  bench.event({ kind: 'accept' });
  expect(labels).toEqual([]);
  expect(bench.preview().parts).toHaveLength(1);
  refused = false;
  bench.event({ kind: 'accept' });
  expect(labels).toEqual(['draw a channel']);
});
