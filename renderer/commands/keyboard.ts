import type { Xy } from '../geometry/vector.ts';
import type { Page } from '../page/context.tsx';
import { type Command, keyText, latinKeyText } from './command.ts';

const ARROWS: Readonly<Record<string, Xy>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, 1],
  ArrowDown: [0, -1],
};

const types = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement &&
  (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName));

/** With Ctrl these are a field's own: they mean what is typed in it. */
const OF_FIELDS = ['c', 'v', 'x', 'a', 'z', 'y'];

/** Escape closed the dialog already, and the page has not heard of it yet: the next key is for the page. */
const shut = (): boolean => {
  const dialogs = [...document.querySelectorAll('dialog')];
  return dialogs.length > 0 && dialogs.every((dialog) => !dialog.open);
};

/**
 * Keys for the whole page. In a field they are the field's; in a table arrows and Enter are the table's;
 * on the sheet figures and arrows go to the tool at hand; all else are commands.
 */
export function startKeyboard({ desk, bench, commands }: Page): () => void {
  const typing = (): boolean => bench.preview().readout?.some((line) => line.typing) ?? false;
  const tell = (event: Parameters<typeof bench.event>[0]): true => {
    bench.event(event);
    return true;
  };

  const toTool = (event: KeyboardEvent): boolean => {
    if (!(event.target instanceof HTMLElement) || !event.target.closest('.sheet')) return false;
    const { tool } = desk.view.get();
    const drawing = tool !== 'select' && tool !== 'measure';
    const plain = !event.ctrlKey && !event.metaKey && !event.altKey;
    const arrow = ARROWS[event.key];
    if (arrow && plain)
      return tell({ kind: 'arrow', direction: arrow, ...(event.shiftKey && { far: true }) });
    if (event.key === 'Enter' && plain) return event.repeat || tell({ kind: 'accept' });
    if (event.key === 'Escape') {
      const { selection, panel } = desk.view.get();
      // nothing is under way and nothing chosen: then what stands open at the side is left
      if (tool === 'select' && selection.length === 0 && panel !== 'card' && !bench.preview().box)
        return false;
      return event.repeat || tell({ kind: 'leave' });
    }
    if (!drawing || !plain) return false;
    if (event.key === 'Backspace') return tell({ kind: 'rub' });
    if (event.key === 'Tab' && bench.preview().readout && typing() && !event.shiftKey)
      return tell({ kind: 'next' });
    if (event.key === 'Tab' && !event.shiftKey && (bench.preview().readout?.length ?? 0) > 2)
      return tell({ kind: 'next' });
    if (event.key.length !== 1) return false;
    // a figure begins with a digit, a point or a sign; once begun it takes letters too
    if (/[\d.,]/.test(event.key) || (event.key === '-' && !typing()) || typing())
      return tell({ kind: 'type', text: event.key });
    return false;
  };

  const commandOf = (event: KeyboardEvent): Command | null => {
    const latin = latinKeyText(event);
    return commands.forKey(keyText(event)) ?? (latin === null ? null : commands.forKey(latin));
  };
  /** Out of panels and notices, and at last back to the sheet. */
  const leave = (): void => {
    const { panel, says } = desk.view.get();
    if (panel !== 'card') desk.view.patch({ panel: 'card' });
    else if (says) desk.say('');
    else document.querySelector<HTMLElement>('.sheet-surface')?.focus();
  };

  const listen = (event: KeyboardEvent): void => {
    if (event.defaultPrevented || event.isComposing) return;
    const { palette, files } = desk.view.get();
    const inField = types(event.target);
    const held = event.ctrlKey || event.metaKey;
    if ((palette || files) && !shut()) {
      // the browser must not take for its own what is a command outside of the dialog
      if (held && !OF_FIELDS.includes(event.key.toLowerCase()) && commandOf(event)) event.preventDefault();
      return;
    }
    const key = keyText(event);
    if (inField && key !== 'Escape') {
      // with Ctrl a letter may be a command; arrows and the like go through the text
      if (!held || event.key.length !== 1 || OF_FIELDS.includes(event.key.toLowerCase())) return;
    }
    if (desk.chip() && !inField && toTool(event)) {
      event.preventDefault();
      return;
    }
    if (key === 'Escape') {
      if (desk.chip() && !event.repeat) leave();
      return;
    }
    // Enter and Space press what has the focus
    if (key === 'Enter' || key === 'Space' || key === 'Tab') return;
    const command = commandOf(event);
    if (!command) return;
    event.preventDefault();
    if (!event.repeat || command.repeats) commands.run(command.id);
  };
  window.addEventListener('keydown', listen);
  return () => window.removeEventListener('keydown', listen);
}
