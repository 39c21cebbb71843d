import { useCallback, useDeferredValue, useMemo, useState } from 'react';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { TABS, type Tab } from '../state/view.ts';
import { capital, counted } from '../words/figure.ts';
import { Grid } from './grid.tsx';
import { columnsShown } from './layout.ts';
import { filtered, type Order, ordered, tsvOf } from './table.ts';
import { countOf, tableOf } from './tables.ts';

/** The tables under the sheet: everything on the sheet, operable without seeing it. */
export function Ledger() {
  const { desk } = usePage();
  // an edit is answered before its row is set anew
  const open = useStore(desk.drawn.tables)!;
  const told = useStore(desk.solver.solved, (solved) => solved.result);
  const read = useStore(desk.solver.solved, (solved) => solved.graph);
  const { chip, result, graph } = useDeferredValue(
    useMemo(() => ({ chip: open, result: told, graph: read }), [open, told, read]),
  );
  const tab = useStore(desk.view, (view) => view.tab);
  const [words, setWords] = useState('');
  const [orders, setOrders] = useState<Partial<Record<Tab, Order | null>>>({});
  const table = useMemo(() => tableOf(tab, chip, result, graph), [tab, chip, result, graph]);
  const known = result !== null;
  // before there is an answer all columns stand, so that none comes as the first one does
  const shown = useMemo(() => (known ? columnsShown(table) : table.columns.map((_, i) => i)), [table, known]);
  const order = orders[tab] ?? null;
  const onOrder = useCallback(
    (next: Order | null) => setOrders((before) => ({ ...before, [tab]: next })),
    [tab],
  );
  const rows = useMemo(() => ordered(filtered(table, words), table, order), [table, words, order]);
  const copy = async (): Promise<void> => {
    try {
      await navigator.clipboard.writeText(tsvOf(table, rows, shown));
      desk.say(`Copied ${counted(rows.length, 'row')}; paste into a spreadsheet.`);
    } catch {
      desk.say('The clipboard refuses; take the table out under Hand over instead.');
    }
  };
  return (
    <section className="ledger" aria-label="Ledger">
      <div className="ledger-head">
        <div role="tablist" aria-label="Tables">
          {TABS.map((name) => (
            <button
              key={name}
              type="button"
              role="tab"
              id={`tab-${name}`}
              className="verb"
              aria-selected={tab === name}
              aria-controls="ledger-table"
              tabIndex={tab === name ? 0 : -1}
              onClick={() => desk.view.patch({ tab: name })}
              onKeyDown={(event) => {
                const by = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
                if (by === 0) return;
                event.preventDefault();
                const next = TABS[(TABS.indexOf(name) + by + TABS.length) % TABS.length]!;
                desk.view.patch({ tab: next });
                document.getElementById(`tab-${next}`)?.focus();
              }}
            >
              {capital(name)} {countOf(name, chip, result, graph)}
            </button>
          ))}
        </div>
        <div className="ledger-verbs">
          <input
            type="search"
            aria-label="Filter the table"
            placeholder="Filter"
            title="Words, or a column with a figure: shear > 1.5, width <= 120"
            value={words}
            onChange={(event) => setWords(event.target.value)}
            onKeyDown={(event) => {
              if (event.key !== 'Escape' || words === '') return;
              setWords('');
              event.preventDefault();
            }}
          />
          <button type="button" onClick={copy}>
            Copy table
          </button>
        </div>
      </div>
      <div id="ledger-table" className="ledger-body" role="tabpanel" aria-labelledby={`tab-${tab}`}>
        {rows.length === 0 ? (
          <p className="soft empty">{emptyText(tab, words, Boolean(result))}</p>
        ) : (
          <Grid
            key={tab}
            label={`Table of ${tab}`}
            table={table}
            shown={shown}
            rows={rows}
            order={order}
            onOrder={onOrder}
          />
        )}
      </div>
    </section>
  );
}

function emptyText(tab: Tab, words: string, solved: boolean): string {
  if (words) return `Nothing here holds “${words}”.`;
  if (tab === 'ports') return 'No port is set yet. A flow needs at least two.';
  if (tab === 'channels') return 'No channel is drawn yet.';
  if (tab === 'findings')
    return solved ? 'The checks found nothing to say.' : 'Findings come with the first answer.';
  if (tab === 'routes')
    return solved
      ? 'No route from an inlet to an outlet was followed.'
      : 'Routes come with the first answer.';
  return 'No channels meet anywhere yet.';
}
