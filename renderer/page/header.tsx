import { useEffect, useState } from 'react';
import { keyShown } from '../commands/command.ts';
import type { Project } from '../state/desk.ts';
import { useStore } from '../state/store.ts';
import { usePage } from './context.tsx';

const clock = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit', second: '2-digit' });

/** Where the project is kept and whether everything is. */
export function keptText(project: Pick<Project, 'mode' | 'keeping' | 'keptAt' | 'path'>): string {
  if (project.mode === 'read-only') return 'only to be read, nothing is written';
  const where = project.path === null ? ', in a draft' : '';
  if (project.keeping) return `keeping …${where}`;
  return project.keptAt === null
    ? `every edit kept${where}`
    : `every edit kept${where}, last ${clock.format(project.keptAt)}`;
}

/** Title, what is kept, and what is done with the whole. */
export function Header() {
  const { desk, commands } = usePage();
  const project = useStore(desk.project)!;
  return (
    <header className="header">
      <h1>
        <TitleField />
      </h1>
      <p className="soft" title={project.modeSays || undefined}>
        {project.path !== null && `${project.name} · `}
        {keptText(project)}
      </p>
      <nav className="header-verbs" aria-label="The whole chip">
        {['undo', 'trials', 'chip', 'hand over', 'file', 'find'].map((id) => {
          const command = commands.byId(id);
          const key = id === 'find' ? commands.keyOf(id) : '';
          const of = command.of?.();
          return (
            <button
              key={id}
              type="button"
              title={`${of ? `${command.title}: ${of}` : command.help} ${keyShown(commands.keyOf(id))}`.trim()}
              aria-disabled={command.why?.() ? true : undefined}
              onClick={() => commands.run(id)}
            >
              {command.title}
              {key && <kbd>{keyShown(key)}</kbd>}
            </button>
          );
        })}
      </nav>
    </header>
  );
}

function TitleField() {
  const { desk } = usePage();
  const name = useStore(desk.project)!.document.chip.name;
  const [text, setText] = useState(name);
  useEffect(() => setText(name), [name]);
  const accept = (): void => {
    const wanted = text.trim();
    if (wanted === name) return;
    if (wanted === '') {
      desk.say('A chip needs a name; the old one stays.');
      setText(name);
    } else if (!desk.alter({ label: 'rename the chip', set: { name: wanted } })) setText(text);
  };
  return (
    <input
      aria-label="Name of the chip"
      value={text}
      maxLength={200}
      spellCheck={false}
      onChange={(event) => setText(event.target.value)}
      onBlur={accept}
      onKeyDown={(event) => {
        if (event.key === 'Enter') event.currentTarget.blur();
        if (event.key === 'Escape' && text !== name) {
          setText(name);
          event.preventDefault();
        }
      }}
    />
  );
}
