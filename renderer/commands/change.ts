import type { Chip } from '../../solver/chip/chip.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { clipText } from '../edits/clip.ts';
import { findParts, listOf } from '../edits/parts.ts';
import { type Reading, reading } from '../edits/reading.ts';
import { align, type Edge, join, mirror, remove, type Shaping, split, turn } from '../edits/shape.ts';
import { nearestOnPath } from '../geometry/path.ts';
import type { Xy } from '../geometry/vector.ts';
import type { Desk } from '../state/desk.ts';
import { PARTS, type Ref } from '../state/ref.ts';
import type { Workbench } from '../state/workbench.ts';
import type { Command } from './command.ts';

/** The same text in the page, for windows without a clipboard of their own. */
let kept = '';

export function changeCommands(desk: Desk, bench: Workbench): Command[] {
  const free = (): readonly Ref[] => {
    const { selection, locked } = desk.view.get();
    return selection.filter((ref) => !locked.has(ref));
  };
  const shaping = (make: (chip: Chip, refs: readonly Ref[]) => Shaping) => (): void => {
    const chip = desk.chip();
    if (!chip) return;
    const made = make(chip, free());
    if (typeof made === 'string') desk.say(made);
    else desk.alter(made);
  };
  const chosen = (): string | null => (free().length > 0 ? null : 'Choose a part first.');
  /** The pointer's place, where it lies on the first channel that is chosen. */
  const underPointer = (chip: Chip, refs: readonly Ref[]): Xy | undefined => {
    const at = bench.pointer();
    const scope = bench.scope();
    const part = findParts(chip, refs).find((found) => found.kind === 'channel');
    if (!at || !scope || part?.kind !== 'channel') return undefined;
    const reach = scope.reach + Math.max(...part.value.width) / 2;
    return nearestOnPath(at, part.value.path).away <= reach ? at : undefined;
  };
  const open = (): string | null => (desk.chip() ? null : 'Open or begin a chip first.');
  const change = (
    id: string,
    title: string,
    keys: readonly string[],
    help: string,
    make: (chip: Chip, refs: readonly Ref[]) => Shaping,
  ): Command => ({ id, title, keys, help, group: 'Change', why: chosen, run: shaping(make) });

  const copy = async (): Promise<boolean> => {
    const text = clipText(desk.chip()!, desk.view.get().selection);
    if (!text) {
      desk.say('Choose a part first.');
      return false;
    }
    kept = text;
    await navigator.clipboard?.writeText(text).catch(() => undefined);
    return true;
  };
  const put = (text: string, { paste }: Reading): void => {
    const chip = desk.chip();
    const scope = bench.scope();
    if (!chip || !scope) return;
    try {
      const by = 4 * scope.grid;
      const made = paste(chip, text, [by, -by]);
      if (typeof made === 'string') desk.say(made);
      else if (desk.alter(made.alteration)) desk.view.patch({ selection: made.select });
    } catch (error) {
      desk.say(
        error instanceof Problem
          ? `The clipboard holds no part of a chip: ${error.what}`
          : 'The clipboard cannot be read.',
      );
    }
  };

  const EDGES: readonly (readonly [Edge, string])[] = [
    ['left', 'Align left edges'],
    ['right', 'Align right edges'],
    ['top', 'Align top edges'],
    ['bottom', 'Align bottom edges'],
    ['middle across', 'Align middles on a level line'],
    ['middle up', 'Align middles on an upright line'],
  ];

  return [
    {
      id: 'undo',
      title: 'Undo',
      keys: ['Ctrl+z'],
      help: 'Take back the last change; without limit.',
      group: 'Change',
      repeats: true,
      of: () => desk.undoLabel(),
      why: () => (desk.undoLabel() ? null : 'Nothing was done yet.'),
      run: () => desk.undo(),
    },
    {
      id: 'redo',
      title: 'Redo',
      keys: ['Ctrl+Shift+z', 'Ctrl+y'],
      help: 'Do again what was taken back.',
      group: 'Change',
      repeats: true,
      of: () => desk.redoLabel(),
      why: () => (desk.redoLabel() ? null : 'Nothing was taken back.'),
      run: () => desk.redo(),
    },
    change('delete', 'Delete', ['Delete', 'Backspace'], 'Take the chosen parts away.', remove),
    {
      id: 'copy',
      title: 'Copy',
      keys: ['Ctrl+c'],
      help: 'Copy the chosen parts, as a chip description that any text can hold.',
      group: 'Change',
      why: () => (desk.view.get().selection.length > 0 ? null : 'Choose a part first.'),
      run: async () => {
        await copy();
      },
    },
    {
      id: 'cut',
      title: 'Cut',
      keys: ['Ctrl+x'],
      help: 'Copy the chosen parts and take them away.',
      group: 'Change',
      why: chosen,
      run: async () => {
        if (await copy()) shaping(remove)();
      },
    },
    {
      id: 'paste',
      title: 'Paste',
      keys: ['Ctrl+v'],
      help: 'Put parts from the clipboard, a little beside where they were.',
      group: 'Change',
      why: open,
      run: async () => {
        const text = await navigator.clipboard?.readText().catch(() => '');
        await reading(desk, (there) => put(text || kept, there));
      },
    },
    {
      id: 'select all',
      title: 'Choose everything',
      keys: ['Ctrl+a'],
      help: 'Choose every part of the chip.',
      group: 'Change',
      why: open,
      run: () => {
        const chip = desk.chip()!;
        desk.view.patch({
          selection: PARTS.flatMap((kind) => listOf(chip, kind).map((part) => `${kind}:${part.id}`)),
        });
      },
    },
    {
      id: 'lock',
      title: 'Lock or unlock',
      keys: ['l'],
      help: 'Hold the chosen parts where they are, also when the project is opened again, or let them go.',
      group: 'Change',
      why: () => (desk.view.get().selection.length > 0 ? null : 'Choose a part first.'),
      run: () => {
        const { selection, locked } = desk.view.get();
        const next = new Set(locked);
        const lock = selection.some((ref) => !locked.has(ref));
        for (const ref of selection) {
          if (lock) next.add(ref);
          else next.delete(ref);
        }
        desk.lock(next);
        desk.say(lock ? 'Locked: neither moved nor deleted until unlocked.' : 'Unlocked.');
      },
    },
    change(
      'split',
      'Split',
      ['k'],
      'Cut the chosen channel in two where the pointer is on it, else in its middle.',
      (chip, refs) => split(chip, refs, underPointer(chip, refs)),
    ),
    change('join', 'Join', ['j'], 'Make one channel of those chosen that meet end to end.', join),
    change('turn', 'Turn', ['q'], 'Turn the chosen parts by 90° about their middle.', (chip, refs) =>
      turn(chip, refs, 90),
    ),
    change('mirror upright', 'Mirror left to right', ['x'], 'Mirror about an upright line.', (chip, refs) =>
      mirror(chip, refs, 'upright'),
    ),
    change('mirror level', 'Mirror top to bottom', ['y'], 'Mirror about a level line.', (chip, refs) =>
      mirror(chip, refs, 'level'),
    ),
    ...EDGES.map(([edge, title]) =>
      change(`align ${edge}`, title, [], 'Move the chosen parts onto one line.', (chip, refs) =>
        align(chip, refs, edge),
      ),
    ),
    {
      id: 'repeat',
      title: 'Turn by an angle, array and offset …',
      keys: ['a'],
      help: 'Turn the chosen parts by any angle, repeat them along a pitch, or lay a channel beside another.',
      group: 'Change',
      why: chosen,
      run: () => desk.view.patch({ panel: 'repeat' }),
    },
  ];
}
