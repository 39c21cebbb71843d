import { useEffect, useRef } from 'react';
import { AsBuiltPanel } from '../as-built/as-built-panel.tsx';
import { BringInPanel } from '../bring-in/bring-in-panel.tsx';
import { findPart } from '../edits/parts.ts';
import { HandOverPanel } from '../handover/hand-over-panel.tsx';
import { Apart } from '../page/apart.tsx';
import { usePage } from '../page/context.tsx';
import { ChipPanel } from '../panels/chip-panel.tsx';
import { KeysPanel } from '../panels/keys-panel.tsx';
import { PlotsPanel } from '../panels/plots-panel.tsx';
import { AboutPanel, HistoryPanel } from '../panels/program-panels.tsx';
import { RepeatPanel } from '../panels/repeat-panel.tsx';
import { TrialsPanel } from '../panels/trials-panel.tsx';
import { useStore } from '../state/store.ts';
import type { Panel } from '../state/view.ts';
import { ChannelCard } from './channel-card.tsx';
import { KeepOutCard } from './keep-out-card.tsx';
import { NothingCard } from './nothing-card.tsx';
import { ChamberCard, SeveralCard, ViaCard } from './other-cards.tsx';
import { PortCard } from './port-card.tsx';
import { SiteCard } from './site-card.tsx';

const TITLES: Readonly<Record<Exclude<Panel, 'card'>, string>> = {
  repeat: 'Turn, array and offset',
  chip: 'Chip and fluid',
  plots: 'Plots',
  trials: 'Trials',
  'as built': 'As built',
  'hand over': 'Hand over',
  'bring in': 'Bring in a drawing',
  history: 'What was done',
  keys: 'Keys and units',
  about: 'About',
};

/** The panel at the right: what is chosen, or what was asked for. */
export function Card() {
  const { desk, bench } = usePage();
  const panel = useStore(desk.view, (view) => view.panel);
  const aside = useRef<HTMLElement>(null);
  useEffect(
    () =>
      bench.onCard(() => {
        requestAnimationFrame(() =>
          aside.current?.querySelector<HTMLElement>('input, select, button')?.focus(),
        );
      }),
    [bench],
  );
  const before = useRef<{ readonly panel: Panel; readonly from: Element | null }>({ panel, from: null });
  useEffect(() => {
    const { panel: last, from } = before.current;
    if (last === panel) return;
    aside.current?.scrollTo(0, 0);
    const now = document.activeElement;
    // from one panel to the next the way back stays the same
    before.current = { panel, from: last === 'card' ? now : from };
    if (panel !== 'card') aside.current?.querySelector<HTMLElement>('h2')?.focus();
    else if (now === document.body || now === null) {
      const back = from instanceof HTMLElement && from !== document.body && from.isConnected ? from : null;
      (back ?? document.querySelector<HTMLElement>('.sheet-surface'))?.focus();
    }
  }, [panel]);
  return (
    <aside ref={aside} className="card" aria-label={panel === 'card' ? 'What is chosen' : TITLES[panel]}>
      {panel === 'card' ? (
        <Apart name="The card" className="">
          <Chosen />
        </Apart>
      ) : (
        <>
          <div className="panel-head">
            <h2 tabIndex={-1}>{TITLES[panel]}</h2>
            <button
              type="button"
              className="quiet"
              title="Back to what is chosen (Escape)"
              onClick={() => desk.view.patch({ panel: 'card' })}
            >
              Close
            </button>
          </div>
          <Apart name={TITLES[panel]} className="">
            <PanelBody panel={panel} />
          </Apart>
        </>
      )}
    </aside>
  );
}

function PanelBody({ panel }: { readonly panel: Exclude<Panel, 'card'> }) {
  switch (panel) {
    case 'repeat':
      return <RepeatPanel />;
    case 'chip':
      return <ChipPanel />;
    case 'plots':
      return <PlotsPanel />;
    case 'trials':
      return <TrialsPanel />;
    case 'as built':
      return <AsBuiltPanel />;
    case 'hand over':
      return <HandOverPanel />;
    case 'bring in':
      return <BringInPanel />;
    case 'history':
      return <HistoryPanel />;
    case 'keys':
      return <KeysPanel />;
    default:
      return <AboutPanel />;
  }
}

function Chosen() {
  const { desk } = usePage();
  const selection = useStore(desk.view, (view) => view.selection);
  const held = useStore(desk.view, (view) => selection.filter((ref) => view.locked.has(ref)).length);
  const unlock = (): void => {
    const chosen = new Set(selection);
    desk.lock(new Set([...desk.view.get().locked].filter((ref) => !chosen.has(ref))));
  };
  return (
    <>
      {held > 0 && (
        <p className="held">
          {held === selection.length ? 'Locked' : `${held} of ${selection.length} locked`}: neither moved nor
          deleted.{' '}
          <button type="button" className="quiet" onClick={unlock}>
            Unlock
          </button>
        </p>
      )}
      <ChosenBody />
    </>
  );
}

function ChosenBody() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const selection = useStore(desk.view, (view) => view.selection);
  const [only] = selection;
  if (only === undefined) return <NothingCard />;
  if (selection.length > 1) return <SeveralCard refs={selection} />;
  const part = findPart(chip, only);
  if (!part) return only.includes(':') ? <SiteCard key={only} name={only} /> : <NothingCard />;
  switch (part.kind) {
    case 'channel':
      return <ChannelCard key={only} channel={part.value} />;
    case 'chamber':
      return <ChamberCard key={only} chamber={part.value} />;
    case 'keep-out':
      return <KeepOutCard key={only} keepOut={part.value} />;
    case 'via':
      return <ViaCard key={only} via={part.value} />;
    default:
      return <PortCard key={only} port={part.value} />;
  }
}
