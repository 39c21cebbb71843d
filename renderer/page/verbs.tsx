import { keyShown } from '../commands/command.ts';
import { OVERLAYS } from '../sheet/overlay.ts';
import { useStore } from '../state/store.ts';
import { usePage } from './context.tsx';

/** Tools in words, their key underlined; those that make more are found by searching. */
const SHOWN = ['select', 'channel', 'chamber', 'port', 'via', 'serpentine', 'split tree', 'measure'] as const;

export function Verbs() {
  const { desk, commands } = usePage();
  const tool = useStore(desk.view, (view) => view.tool);
  const overlay = useStore(desk.view, (view) => view.overlay);
  const more = SHOWN.some((name) => name === tool) ? [] : [tool];
  return (
    <nav className="verbs" aria-label="Tools and overlays">
      <div role="toolbar" aria-label="Tools">
        {[...SHOWN, ...more].map((name) => {
          const command = commands.byId(`tool ${name}`);
          return (
            <button
              key={name}
              type="button"
              className="verb"
              aria-pressed={tool === name}
              title={`${command.help} ${keyShown(commands.keyOf(command.id))}`}
              onClick={() => commands.run(command.id)}
            >
              <Underlined text={command.title} letter={commands.keyOf(command.id)} />
            </button>
          );
        })}
      </div>
      <div className="shows" role="toolbar" aria-label="What the colour shows">
        <span aria-hidden="true">Show</span>
        {OVERLAYS.map((name) => (
          <button
            key={name}
            type="button"
            className="verb"
            aria-pressed={overlay === name}
            onClick={() => commands.run(`show ${name}`)}
          >
            {commands.keyOf(`show ${name}`)} {name}
          </button>
        ))}
      </div>
    </nav>
  );
}

function Underlined({ text, letter }: { readonly text: string; readonly letter: string }) {
  const at = letter.length === 1 ? text.toLowerCase().indexOf(letter) : -1;
  if (at < 0) return text;
  return (
    <>
      {text.slice(0, at)}
      <u>{text[at]}</u>
      {text.slice(at + 1)}
    </>
  );
}
