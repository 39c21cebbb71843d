import { expect, test } from 'vitest';
import type { Desk } from '../state/desk.ts';
import { createStore } from '../state/store.ts';
import { FIRST_VIEW } from '../state/view.ts';
import type { Workbench } from '../state/workbench.ts';
import { teeChip } from '../testing/chips.ts';
import { keyShown, keyText } from './command.ts';
import { createCommands } from './commands.ts';
import { findCommands } from './find.ts';

const press = (key: string, more: Partial<Parameters<typeof keyText>[0]> = {}): string =>
  keyText({ key, ctrlKey: false, metaKey: false, altKey: false, shiftKey: false, ...more });

/** A desk with nothing open: commands say so and do nothing. */
const said: string[] = [];
const desk = {
  view: createStore(FIRST_VIEW),
  chip: () => null,
  undoLabel: () => null,
  redoLabel: () => null,
  say: (text: string) => said.push(text),
} as unknown as Desk;
const commands = (own: Record<string, string> = {}) => createCommands(desk, {} as Workbench, () => own);

test('keys are written one way, however they are pressed', () => {
  expect(press('c')).toBe('c');
  expect(press('C', { shiftKey: true })).toBe('Shift+c');
  expect(press('?', { shiftKey: true })).toBe('?');
  expect(press('z', { metaKey: true, shiftKey: true })).toBe('Ctrl+Shift+z');
  expect(press(' ')).toBe('Space');
  expect(press('ArrowLeft', { ctrlKey: true })).toBe('Ctrl+ArrowLeft');
  expect(keyShown('Ctrl+Shift+z')).toBe('Ctrl+Shift+Z');
});

test('no two commands have the same key, every one has a help, and ids are their own', () => {
  const { all } = commands();
  const keys = all.flatMap((command) => command.keys);
  expect(keys.filter((key, i) => keys.indexOf(key) !== i)).toEqual([]);
  const ids = all.map((command) => command.id);
  expect(new Set(ids).size).toBe(ids.length);
  expect(all.filter((command) => command.help.length < 10)).toEqual([]);
});

test('a key that a person gives goes before one that a command had at first, and can be taken away', () => {
  const own = commands({ 'tool measure': 'c', undo: '' });
  expect(own.forKey('c')!.id).toBe('tool measure');
  expect(own.keyOf('tool measure')).toBe('c');
  expect(own.keyOf('tool channel')).toBe('');
  expect(own.keyOf('undo')).toBe('');
  expect(own.forKey('Ctrl+z')).toBeNull();
});

test('a command that cannot be done says why', () => {
  said.length = 0;
  commands().run('undo');
  commands().run('delete');
  commands().run('tool channel');
  expect(said).toEqual(['Nothing was done yet.', 'Choose a part first.', 'Open or begin a chip first.']);
});

test('commands are found by any of their words, the nearest first', () => {
  const { all } = commands();
  expect(findCommands(all, 'align left')[0]!.id).toBe('align left');
  expect(findCommands(all, 'undo')[0]!.id).toBe('undo');
  expect(findCommands(all, 'serp')[0]!.id).toBe('tool serpentine');
  expect(findCommands(all, 'zzz nothing')).toEqual([]);
  expect(findCommands(all, '')).toHaveLength(all.length);
});

test('by keys alone every part of the chip is come by, forth and back', () => {
  const chip = teeChip();
  const view = createStore(FIRST_VIEW);
  const drawn = {
    ...desk,
    view,
    chip: () => chip,
    solver: { solved: createStore({ graph: null, result: null }) },
  } as unknown as Desk;
  const { run } = createCommands(drawn, {} as Workbench, () => ({}));
  const seen: string[] = [];
  for (let i = 0; i < 6; i += 1) {
    run('next part');
    seen.push(...view.get().selection);
  }
  expect(seen).toEqual([
    'channel:feed',
    'channel:up',
    'channel:down',
    'port:in',
    'port:well 1',
    'port:well 2',
  ]);
  run('next part');
  expect(view.get().selection).toEqual(['channel:feed']);
  run('previous part');
  expect(view.get().selection).toEqual(['port:well 2']);
});
