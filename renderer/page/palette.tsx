import { useEffect, useId, useLayoutEffect, useMemo, useRef, useState } from 'react';
import { keyShown } from '../commands/command.ts';
import { findCommands } from '../commands/find.ts';
import { useStore } from '../state/store.ts';
import { usePage } from './context.tsx';

/** Every command, found by words, with its key and a short help. */
export function CommandFinder() {
  const { desk } = usePage();
  const open = useStore(desk.view, (view) => view.palette);
  return open ? <Finder /> : null;
}

function Finder() {
  const { desk, commands } = usePage();
  const id = useId();
  const [words, setWords] = useState('');
  const [at, setAt] = useState(0);
  const list = useRef<HTMLDivElement>(null);
  const dialog = useRef<HTMLDialogElement>(null);
  const found = useMemo(() => findCommands(commands.all, words), [commands, words]);
  const now = Math.min(at, found.length - 1);
  const before = useRef<Element | null>(null);
  // open as soon as it is there: keys go by that
  useLayoutEffect(() => {
    before.current = document.activeElement;
    dialog.current?.showModal();
  }, []);
  // what lies behind an open dialog takes no focus: given back once it is gone
  useEffect(
    () => () => {
      if (before.current instanceof HTMLElement) before.current.focus();
    },
    [],
  );
  useEffect(() => {
    list.current?.children[now]?.scrollIntoView({ block: 'nearest' });
  }, [now]);
  const close = (): void => desk.view.patch({ palette: false });
  const run = (index: number): void => {
    const command = found[index];
    if (!command) return;
    close();
    // after the focus went back to where it was
    setTimeout(() => commands.run(command.id));
  };
  return (
    <dialog ref={dialog} className="finder" aria-label="Find a command" onClose={close}>
      <input
        role="combobox"
        aria-label="Find a command"
        aria-expanded="true"
        aria-controls={`${id}-list`}
        aria-activedescendant={found.length > 0 ? `${id}-${now}` : undefined}
        placeholder="What do you want to do?"
        value={words}
        spellCheck={false}
        onChange={(event) => {
          setWords(event.target.value);
          setAt(0);
        }}
        onKeyDown={(event) => {
          if (event.key === 'ArrowDown') setAt(Math.min(found.length - 1, now + 1));
          else if (event.key === 'ArrowUp') setAt(Math.max(0, now - 1));
          else if (event.key === 'Enter') run(now);
          else if (event.key === 'Escape') close();
          else return;
          event.preventDefault();
        }}
      />
      <div ref={list} id={`${id}-list`} role="listbox" aria-label="Commands">
        {found.map((command, i) => {
          const why = command.why?.() ?? null;
          return (
            // biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useKeyWithClickEvents: the field above has the focus and the keys
            <div
              className="command"
              key={command.id}
              id={`${id}-${i}`}
              role="option"
              aria-selected={i === now}
              onClick={() => run(i)}
            >
              <span>
                <strong>
                  {command.title}
                  {command.of?.() && `: ${command.of()}`}
                </strong>
                <span className="soft small">
                  {command.help}
                  {why && <em> {why}</em>}
                </span>
              </span>
              {commands.keyOf(command.id) && <kbd>{keyShown(commands.keyOf(command.id))}</kbd>}
            </div>
          );
        })}
        {found.length === 0 && <p className="soft">No command speaks of that.</p>}
      </div>
    </dialog>
  );
}
