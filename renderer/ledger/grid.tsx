import { useEffect, useId, useLayoutEffect, useMemo, useRef, useState } from 'react';
import { inUnit } from '../../solver/chip/units.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { CellInput } from './cell-input.tsx';
import { editCell } from './edit-cell.ts';
import { cellText, headText, type Order, type Row, type Table, writingOf } from './table.ts';

export const ROW = 24;
const MORE = 6;

export interface GridProps {
  readonly label: string;
  readonly table: Table;
  /** Filtered and in order. */
  readonly rows: readonly Row[];
  readonly order: Order | null;
  readonly onOrder: (order: Order | null) => void;
}

/**
 * A table as an ARIA grid with one tab stop: arrows move the cell at hand, Enter edits or chooses, Space
 * chooses. Only rows in view are in the page, however many there are.
 */
export function Grid({ label, table, rows, order, onOrder }: GridProps) {
  const { desk, commands } = usePage();
  const id = useId();
  const selection = useStore(desk.view, (view) => view.selection);
  const [at, setAt] = useState({ row: 0, column: 0 });
  const [editing, setEditing] = useState<{ text: string; fault: string } | null>(null);
  const [top, setTop] = useState(0);
  const [high, setHigh] = useState(240);
  const grid = useRef<HTMLDivElement>(null);
  const { columns } = table;
  const writings = useMemo(
    () => columns.map((column, i) => writingOf(column, table.rows, i)),
    [columns, table.rows],
  );
  const template = columns
    .map((column) => `minmax(${Math.round(column.wide * 0.72)}px, ${column.wide}fr)`)
    .join(' ');
  const chosen = useMemo(() => new Set(selection), [selection]);

  useEffect(() => {
    const element = grid.current!;
    const watch = new ResizeObserver(() => setHigh(element.clientHeight));
    watch.observe(element);
    return () => watch.disconnect();
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
    const y = index * ROW;
    if (y < element.scrollTop || y + 2 * ROW > element.scrollTop + element.clientHeight)
      element.scrollTo({ top: Math.max(0, y - element.clientHeight / 2) });
  }, [selection, rows]);

  const row = Math.min(at.row, rows.length - 1);
  const first = Math.max(0, Math.floor(top / ROW) - MORE);
  const last = Math.min(rows.length, Math.ceil((top + high) / ROW) + MORE);
  const column = columns[at.column];
  const cellId = (r: number, c: number): string => `${id}-${r}-${c}`;

  const go = (r: number, c: number): void => {
    const next = {
      row: Math.max(-1, Math.min(rows.length - 1, r)),
      column: Math.max(0, Math.min(columns.length - 1, c)),
    };
    setAt(next);
    const element = grid.current!;
    const y = Math.max(0, next.row) * ROW;
    if (y < element.scrollTop) element.scrollTo({ top: y });
    else if (y + 2 * ROW > element.scrollTop + element.clientHeight)
      element.scrollTo({ top: y + 2 * ROW - element.clientHeight });
  };
  const choose = (index: number, add: boolean): void => {
    const ref = rows[index]?.ref;
    if (!ref || ref === 'chip') return;
    if (add)
      desk.view.patch({
        selection: chosen.has(ref) ? selection.filter((other) => other !== ref) : [...selection, ref],
        panel: 'card',
      });
    else if (ref.startsWith('route:')) desk.view.patch({ selection: [], panel: 'plots', route: ref });
    else commands.show(ref);
  };
  const turn = (c: number): void => {
    const own = columns[c]!.id;
    if (order?.column !== own) onOrder({ column: own, down: typeof table.rows[0]?.cells[c] === 'number' });
    else if (order.down === (typeof table.rows[0]?.cells[c] === 'number'))
      onOrder({ column: own, down: !order.down });
    else onOrder(null);
  };
  const edit = (text?: string): void => {
    const cell = rows[row]?.cells[at.column];
    const own =
      typeof cell === 'number'
        ? String(Number(inUnit(cell, writings[at.column]!.unit).toPrecision(12)))
        : (cell ?? '');
    setEditing({ text: text ?? own, fault: '' });
  };
  const finish = (): void => {
    if (!editing || !column || !rows[row]) return;
    const fault = editCell(desk, rows[row].ref, column, editing.text, writings[at.column]!.unit);
    setEditing(fault ? { ...editing, fault } : null);
    if (!fault) grid.current?.focus();
  };

  const keys = (event: React.KeyboardEvent): void => {
    if (editing || event.altKey) return;
    const far = Math.max(1, Math.floor(high / ROW) - 2);
    const moves: Readonly<Record<string, readonly [number, number]>> = {
      ArrowUp: [at.row - 1, at.column],
      ArrowDown: [at.row + 1, at.column],
      ArrowLeft: [at.row, at.column - 1],
      ArrowRight: [at.row, at.column + 1],
      PageUp: [Math.max(0, at.row - far), at.column],
      PageDown: [at.row + far, at.column],
      Home: [event.ctrlKey ? 0 : at.row, 0],
      End: [event.ctrlKey ? rows.length - 1 : at.row, columns.length - 1],
    };
    const move = moves[event.key];
    const mod = event.ctrlKey || event.metaKey;
    if (move && (!mod || event.key === 'Home' || event.key === 'End')) go(...move);
    else if (event.key === 'Enter' || event.key === 'F2') {
      if (at.row < 0) turn(at.column);
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
      aria-activedescendant={
        rows.length > 0 || at.row < 0 ? cellId(at.row < 0 ? -1 : row, at.column) : undefined
      }
      onScroll={(event) => setTop(event.currentTarget.scrollTop)}
      onKeyDown={keys}
    >
      {/* biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements: the grid has the focus */}
      <div className="grid-head" role="row" aria-rowindex={1} style={{ gridTemplateColumns: template }}>
        {columns.map((head, c) => (
          // biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements lint/a11y/useKeyWithClickEvents: the grid has the focus and the keys
          <div
            key={head.id}
            id={cellId(-1, c)}
            role="columnheader"
            aria-colindex={c + 1}
            aria-sort={order?.column === head.id ? (order.down ? 'descending' : 'ascending') : 'none'}
            className={`${head.kind ? 'number' : ''}${at.row < 0 && at.column === c ? ' at' : ''}`}
            onClick={() => turn(c)}
          >
            {headText(head, writings[c]!)}
            {order?.column === head.id && <span aria-hidden="true">{order.down ? ' ↓' : ' ↑'}</span>}
          </div>
        ))}
      </div>
      {/* biome-ignore lint/a11y/useSemanticElements: a table element cannot be windowed */}
      <div className="grid-body" role="rowgroup" style={{ height: `${rows.length * ROW}px` }}>
        {rows.slice(first, last).map((entry, i) => {
          const r = first + i;
          return (
            // biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements lint/a11y/useKeyWithClickEvents: the grid has the focus and the keys
            <div
              key={`${entry.ref} ${r.toString()}`}
              role="row"
              aria-rowindex={r + 2}
              aria-selected={chosen.has(entry.ref)}
              className="grid-row"
              style={{ gridTemplateColumns: template, transform: `translateY(${r * ROW}px)` }}
              onClick={(event) => choose(r, event.shiftKey || event.ctrlKey || event.metaKey)}
            >
              {columns.map((own, c) => {
                const here = r === row && c === at.column && at.row >= 0;
                const text = cellText(entry.cells[c], own, writings[c]!);
                return (
                  // biome-ignore lint/a11y/useFocusableInteractive lint/a11y/useSemanticElements lint/a11y/useKeyWithClickEvents: the grid has the focus and the keys
                  <div
                    key={own.id}
                    id={cellId(r, c)}
                    role="gridcell"
                    aria-colindex={c + 1}
                    aria-readonly={!own.edits}
                    title={!own.kind && text.length > 18 ? text : undefined}
                    className={`${own.kind ? 'number' : ''}${here ? ' at' : ''}${entry.missed?.includes(c) ? ' alarm' : ''}${own.edits ? ' edits' : ''}`}
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
}
