import { useEffect, useId, useRef, useState } from 'react';
import { type Kind, parseQuantity } from '../../solver/chip/units.ts';
import { ratioToNumber } from '../../solver/chip/units-exact.ts';
import { typed } from '../words/figure.ts';

export interface RowsColumn {
  readonly name: string;
  readonly kind: Kind;
  /** Of a number typed without one. */
  readonly unit: string;
}

/** What a text of lines says, or why it says nothing; numbers are SI. */
export function readRows(
  text: string,
  columns: readonly RowsColumn[],
): { readonly rows: readonly (readonly number[])[] } | { readonly fault: string } {
  const rows: number[][] = [];
  for (const [i, line] of text.split(/\n/).entries()) {
    if (line.trim() === '') continue;
    const cells = line.split(/[,;\t]/);
    if (cells.length !== columns.length)
      return {
        fault: `Line ${i + 1} takes ${columns.map(({ name }) => name).join(', ')}, parted by commas.`,
      };
    const row: number[] = [];
    for (const [k, { name, kind, unit }] of columns.entries()) {
      const parsed = parseQuantity(cells[k]!, kind, unit);
      if (!parsed.ok) return { fault: `Line ${i + 1}, ${name}, ${parsed.what} ${parsed.remedy}` };
      row.push(ratioToNumber(parsed.exact));
    }
    rows.push(row);
  }
  return { rows };
}

export const writeRows = (rows: readonly (readonly number[])[], columns: readonly RowsColumn[]): string =>
  rows
    .map((row) => row.map((value, k) => typed(value, columns[k]!.kind, columns[k]!.unit)).join(', '))
    .join('\n');

/** Rows of numbers to edit as text, one row a line. Nonsense stays, is explained, and is never applied. */
export function RowsField({
  label,
  columns,
  rows,
  onAccept,
}: {
  readonly label: string;
  readonly columns: readonly RowsColumn[];
  readonly rows: readonly (readonly number[])[];
  readonly onAccept: (rows: readonly (readonly number[])[]) => string | null;
}) {
  const id = useId();
  const own = writeRows(rows, columns);
  const [text, setText] = useState(own);
  const [fault, setFault] = useState('');
  const last = useRef(own);
  useEffect(() => {
    if (last.current === own) return;
    last.current = own;
    setText(own);
    setFault('');
  }, [own]);
  const accept = (): void => {
    if (text.trim() === own) {
      setFault('');
      return;
    }
    const read = readRows(text, columns);
    setFault('fault' in read ? read.fault : (onAccept(read.rows) ?? ''));
  };
  return (
    <div className="field rows">
      <label htmlFor={id}>{label}</label>
      <textarea
        id={id}
        value={text}
        rows={Math.min(12, Math.max(2, rows.length + 1))}
        spellCheck={false}
        aria-invalid={fault !== ''}
        aria-describedby={fault ? `${id}-fault` : undefined}
        onChange={(event) => setText(event.target.value)}
        onBlur={accept}
        onKeyDown={(event) => {
          if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) accept();
          if (event.key === 'Escape' && (text !== own || fault)) {
            setText(own);
            setFault('');
            event.preventDefault();
          }
        }}
      />
      {fault && (
        <p className="fault" id={`${id}-fault`} role="alert">
          {fault}
        </p>
      )}
    </div>
  );
}
