import type { Xy } from '../geometry/vector.ts';
import type { Page } from '../page/context.tsx';
import { keyText } from './command.ts';

const ARROWS: Readonly<Record<string, Xy>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, 1],
  ArrowDown: [0, -1],
};

const types = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement &&
  (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName));

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
    if (event.key === 'Enter' && plain) return tell({ kind: 'accept' });
    if (event.key === 'Escape') return tell({ kind: 'leave' });
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

  const listen = (event: KeyboardEvent): void => {
    if (event.defaultPrevented || event.isComposing) return;
    if (desk.view.get().palette || desk.view.get().files) return;
    const inField = types(event.target);
    if (inField && !(event.ctrlKey || event.metaKey)) return;
    if (inField && ['c', 'v', 'x', 'a', 'z', 'y'].includes(event.key.toLowerCase())) return;
    if (desk.chip() && !inField && toTool(event)) {
      event.preventDefault();
      return;
    }
    const key = keyText(event);
    if (key === 'Escape' && desk.chip()) {
      if (desk.view.get().panel !== 'card') desk.view.patch({ panel: 'card' });
      else if (desk.view.get().says) desk.say('');
      return;
    }
    // Enter and Space press what has the focus
    if (key === 'Enter' || key === 'Space' || key === 'Tab') return;
    const command = commands.forKey(key);
    if (!command) return;
    event.preventDefault();
    commands.run(command.id);
  };
  window.addEventListener('keydown', listen);
  return () => window.removeEventListener('keydown', listen);
}
