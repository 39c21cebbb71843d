import { useEffect } from 'react';
import { Card } from '../card/card.tsx';
import { Ledger } from '../ledger/ledger.tsx';
import { Sheet } from '../sheet/sheet.tsx';
import { openDropped, Start } from '../start/start.tsx';
import { useStore } from '../state/store.ts';
import { VerdictBar } from '../verdict/verdict-bar.tsx';
import { Apart } from './apart.tsx';
import { usePage } from './context.tsx';
import { FileFinder } from './file-finder.tsx';
import { Header } from './header.tsx';
import { CommandFinder } from './palette.tsx';
import { Verbs } from './verbs.tsx';

/** The page about one chip, or the ways in where none is open. */
export function App() {
  const { desk, preferences } = usePage();
  const open = useStore(desk.project, (project) => project !== null);
  const name = useStore(desk.project, (project) => project?.document.chip.name ?? '');
  // figures are written in other units, keys shown anew
  useStore(preferences.store);
  useEffect(() => {
    document.title = name ? `${name} · Channelwright` : 'Channelwright';
  }, [name]);
  useEffect(() => {
    const drop = (event: DragEvent): void => {
      event.preventDefault();
      const file = event.type === 'drop' ? event.dataTransfer?.files[0] : undefined;
      if (file) void openDropped(desk, file);
    };
    window.addEventListener('dragover', drop);
    window.addEventListener('drop', drop);
    return () => {
      window.removeEventListener('dragover', drop);
      window.removeEventListener('drop', drop);
    };
  }, [desk]);
  return (
    <>
      {open ? (
        <div className="frame">
          <Header />
          <Apart name="The five answers" className="verdicts">
            <VerdictBar />
          </Apart>
          <Verbs />
          <Apart name="The sheet" className="sheet">
            <Sheet />
          </Apart>
          <Apart name="The ledger" className="ledger">
            <Ledger />
          </Apart>
          <Card />
        </div>
      ) : (
        <Start />
      )}
      <CommandFinder />
      <FileFinder />
    </>
  );
}
