import { memo, useEffect, useId, useLayoutEffect, useMemo, useRef, useState } from 'react';
import { inUnit } from '../../solver/chip/units.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { CellInput } from './cell-input.tsx';
import { editCell } from './edit-cell.ts';
import { fittedWidths, layoutOf, rowHeight } from './layout.ts';
import { canvasMeasure } from './measure.ts';
import { cellText, headText, type Order, type Row, type Table, writingOf } from './table.ts';

/** px: a row of one line. */
const ROW = 24;
const MORE = 6;
/** px: to the left and right of the table. */
const EDGE = 24;

export interface GridProps {
  readonly label: string;
  readonly table: Table;
  /** Indices of the columns to show, in their order. */
  readonly shown: readonly number[];
  /** Filtered and in order. */
  readonly rows: readonly Row[];
  readonly order: Order | null;
  readonly onOrder: (order: Order | null) => void;
}

/**
 * A table as an ARIA grid with one tab stop: arrows move the cell at hand, with Shift they choose on the way,
 * Enter edits or chooses, Space chooses. Only rows in view are in the page, however many there are.
 */
export const Grid = memo(function Grid({ label, table, shown, rows, order, onOrder }: GridProps) {
  const { desk, commands } = usePage();
  const id = useId();
  const selection = useStore(desk.view, (view) => view.selection);
  const [at, setAt] = useState({ row: 0, column: 0 });
  const [editing, setEditing] = useState<{ text: string; fault: string } | null>(null);
  const [top, setTop] = useState(0);
  const [size, setSize] = useState({ wide: 0, high: 240 });
  const [measure, setMeasure] = useState(canvasMeasure);
  const grid = useRef<HTMLDivElement>(null);
  const { high } = size;
  const columns = useMemo(() => shown.map((i) => table.columns[i]!), [table, shown]);
  const writings = useMemo(() => table.columns.map((column, i) => writingOf(column, table.rows, i)), [table]);
  const layout = useMemo(
    () => layoutOf(table, shown, writings, measure, order?.column),
    [table, shown, writings, measure, order?.column],
  );
  const widths = useMemo(() => fittedWidths(table, layout, size.wide - 2 * EDGE), [table, layout, size.wide]);
  const tall = useMemo(
    () => rowHeight(table, layout, widths, measure, ROW),
    [table, layout, widths, measure],
  );
  const template = widths.map((width) => `${width.toFixed(2)}px`).join(' ');
  const wide = `${widths.reduce((sum, width) => sum + width, 0).toFixed(2)}px`;
  const chosen = useMemo(() => new Set(selection), [selection]);

  useEffect(() => {
    const element = grid.current!;
    const watch = new ResizeObserver(() =>
      setSize({ wide: element.clientWidth, high: element.clientHeight }),
    );
    watch.observe(element);
    return () => watch.disconnect();
  }, []);
  useEffect(() => {
    // a face that came later has other widths
    if (document.fonts.status !== 'loaded')
      void document.fonts.ready.then(() => setMeasure(() => canvasMeasure()));
  }, []);

  // what is chosen on the sheet comes into view here
  const followed = useRef<readonly string[]>([]);
  useLayoutEffect(() => {
    const first = selection[0];
    // only when something else is chosen: new figures must not move the cell at hand
    if (first === undefined || followed.current === selection) return;
    followed.current = selection;
    const index = rows.findIndex((row) => row.ref === first);
    const element = grid.current;
    if (index < 0 || !element) return;
    setAt((now) => ({ ...now, row: index }));
    const y = index * tall;
    if (y < element.scrollTop || y + tall + ROW > element.scrollTop + element.clientHeight)
      element.scrollTo({ top: Math.max(0, y - element.clientHeight / 2) });
  }, [selection, rows, tall]);

  const row = Math.min(at.row, rows.length - 1);
  const first = Math.max(0, Math.floor(top / tall) - MORE);
  const last = Math.min(rows.length, Math.ceil((top + high) / tall) + MORE);
  const place = Math.min(at.column, columns.length - 1);
  const column = columns[place];
  /** Of the table's own columns. */
  const index = shown[place] ?? 0;
  const cellId = (r: number, c: number): string => `${id}-${r}-${c}`;

  const go = (r: number, c: number): void => {
    const next = {
      row: Math.max(-1, Math.min(rows.length - 1, r)),
      column: Math.max(0, Math.min(columns.length - 1, c)),
    };
    setAt(next);
    const element = grid.current!;
    const y = Math.max(0, next.row) * tall;
    const below = y + tall + ROW - element.clientHeight;
    const top = y < element.scrollTop ? y : Math.max(below, element.scrollTop);
    const before = EDGE + widths.slice(0, next.column).reduce((sum, width) => sum + width, 0);
    const after = before + widths[next.column]! - element.clientWidth;
    const left = before < element.scrollLeft + EDGE ? before - EDGE : Math.max(after, element.scrollLeft);
    element.scrollTo({ top, left });
  };
  /** The row from which Shift goes on to others. */
  const anchor = useRef(0);
  const chooseTo = (r: number): void => {
    const [from, to] = [Math.min(anchor.current, r), Math.max(anchor.current, r)];
    const refs = rows.slice(Math.max(0, from), to + 1).map((entry) => entry.ref);
    const parts = refs.filter((ref) => ref !== 'chip' && !ref.startsWith('route:'));
    // it is where the hand is already
    const next = [...new Set(parts)];
    followed.current = next;
    desk.view.patch({ selection: next, panel: 'card' });
  };
  const choose = (r: number, add: boolean): void => {
    const ref = rows[r]?.ref;
    if (!ref || ref === 'chip') return;
    anchor.current = r;
    if (add)
      desk.view.patch({
        selection: chosen.has(ref) ? selection.filter((other) => other !== ref) : [...selection, ref],
        panel: 'card',
      });
    else if (ref.startsWith('route:')) desk.view.patch({ selection: [], panel: 'plots', route: ref });
    else commands.show(ref);
  };
  const turn = (c: number): void => {
    const { id: own, kind } = columns[c]!;
    // numbers the largest first
    const down = kind !== undefined;
    if (order?.column !== own) onOrder({ column: own, down });
    else if (order.down === down) onOrder({ column: own, down: !down });
    else onOrder(null);
    // a new order is read from its beginning
    setAt({ row: -1, column: c });
    grid.current?.scrollTo({ top: 0 });
  };
  const edit = (text?: string): void => {
    const cell = rows[row]?.cells[index];
    const own =
      typeof cell === 'number'
        ? String(Number(inUnit(cell, writings[index]!.unit).toPrecision(12)))
        : (cell ?? '');
    setEditing({ text: text ?? own, fault: '' });
  };
  const finish = (): void => {
    if (!editing || !column || !rows[row]) return;
    const fault = editCell(desk, rows[row].ref, column, editing.text, writings[index]!.unit);
    setEditing(fault ? { ...editing, fault } : null);
    if (!fault) grid.current?.focus();
  };

  const keys = (event: React.KeyboardEvent): void => {
    if (editing || event.altKey) return;
    const far = Math.max(1, Math.floor(high / tall) - 2);
    const moves: Readonly<Record<string, readonly [number, number]>> = {
      ArrowUp: [at.row - 1, place],
      ArrowDown: [at.row + 1, place],
      ArrowLeft: [at.row, place - 1],
      ArrowRight: [at.row, place + 1],
      PageUp: [Math.max(0, at.row - far), place],
      PageDown: [at.row + far, place],
      Home: [event.ctrlKey ? 0 : at.row, 0],
      End: [event.ctrlKey ? rows.length - 1 : at.row, columns.length - 1],
    };
    const move = moves[event.key];
    const mod = event.ctrlKey || event.metaKey;
    if (move && (!mod || event.key === 'Home' || event.key === 'End')) {
      go(...move);
      if (event.shiftKey && move[0] !== at.row) {
        // what is at hand when Shift begins is the first of them
        if (!chosen.has(rows[anchor.current]?.ref ?? '')) anchor.current = Math.max(0, at.row);
        chooseTo(Math.max(0, Math.min(rows.length - 1, move[0])));
      }
    } else if (event.key === 'Enter' || event.key === 'F2') {
      if (at.row < 0) turn(place);
      else if (column?.edits) edit();
      else choose(row, false);
    } else if (event.key === ' ') choose(row, event.shiftKey || mod);
    else if (column?.edits && at.row >= 0 && /^[\w.]$/.test(event.key) && !mod) edit(event.key);
    else return;
    event.preventDefault();
    event.stopPropagation();
  };

  return (
    // biome-ignore lint/a11y/useSemanticElements: a table element cannot be windowed
    <div
      ref={grid}
      className="grid"
      role="grid"
      aria-label={label}
      aria-rowcount={rows.length + 1}
      aria-colcount={columns.length}
      aria-multiselectable="true"
      tabIndex={0}
      aria-activedescendant={rows.length > 0 || at.row < 0 ? cellId(at.row < 0 ? -1 : row, place) : undefined}
      onScroll={(event) => setTop(event.currentTarget.scrollTop)}
      onKeyDown={keys}
    >
      {/* biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements: the grid has the focus */}
      <div
        className="grid-head"
        role="row"
        aria-rowindex={1}
        style={{ gridTemplateColumns: template, width: wide }}
      >
        {columns.map((head, c) => (
          // biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements lint/a11y/useKeyWithClickEvents: the grid has the focus and the keys
          <div
            key={head.id}
            id={cellId(-1, c)}
            role="columnheader"
            aria-colindex={c + 1}
            aria-sort={order?.column === head.id ? (order.down ? 'descending' : 'ascending') : 'none'}
            className={`${head.kind ? 'number' : ''}${at.row < 0 && place === c ? ' at' : ''}`}
            onClick={() => turn(c)}
          >
            {headText(head, writings[shown[c]!]!)}
            {order?.column === head.id && <span aria-hidden="true">{order.down ? ' ↓' : ' ↑'}</span>}
          </div>
        ))}
      </div>
      {/* biome-ignore lint/a11y/useSemanticElements: a table element cannot be windowed */}
      <div className="grid-body" role="rowgroup" style={{ height: `${rows.length * tall}px`, width: wide }}>
        {rows.slice(first, last).map((entry, nth) => {
          const r = first + nth;
          return (
            // biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements lint/a11y/useKeyWithClickEvents: the grid has the focus and the keys
            <div
              key={`${entry.ref} ${r.toString()}`}
              role="row"
              aria-rowindex={r + 2}
              aria-selected={chosen.has(entry.ref)}
              className="grid-row"
              style={{
                gridTemplateColumns: template,
                height: `${tall}px`,
                transform: `translateY(${r * tall}px)`,
              }}
              onClick={(event) => (event.shiftKey ? chooseTo(r) : choose(r, event.ctrlKey || event.metaKey))}
            >
              {columns.map((own, c) => {
                const i = shown[c]!;
                const here = r === row && c === place && at.row >= 0;
                const text = cellText(entry.cells[i], own, writings[i]!);
                return (
                  // biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements lint/a11y/useKeyWithClickEvents: the grid has the focus and the keys
                  <div
                    key={own.id}
                    id={cellId(r, c)}
                    role="gridcell"
                    aria-colindex={c + 1}
                    aria-readonly={!own.edits}
                    title={!own.kind && text.length > 18 ? text : undefined}
                    className={`${own.kind ? 'number' : own.sentence ? 'sentence' : ''}${here ? ' at' : ''}${entry.missed?.includes(i) ? ' alarm' : ''}${own.edits ? ' edits' : ''}`}
                    onClick={() => setAt({ row: r, column: c })}
                    onDoubleClick={() => own.edits && edit()}
                  >
                    {here && editing ? (
                      <CellInput
                        label={`${own.head} of ${String(entry.cells[0])}`}
                        text={editing.text}
                        fault={editing.fault}
                        onText={(next) => setEditing({ text: next, fault: '' })}
                        onAccept={finish}
                        onLeave={() => {
                          setEditing(null);
                          grid.current?.focus();
                        }}
                      />
                    ) : (
                      text
                    )}
                  </div>
                );
              })}
            </div>
          );
        })}
      </div>
    </div>
  );
});
