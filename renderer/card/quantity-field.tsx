import { useEffect, useId, useRef, useState } from 'react';
import { type Kind, parseQuantity, unitSize } from '../../solver/chip/units.ts';
import { ratioToNumber } from '../../solver/chip/units-exact.ts';
import { typed, unitFor } from '../words/figure.ts';

export interface QuantityFieldProps {
  readonly label: string;
  /** SI; null where what is chosen differs. */
  readonly value: number | null;
  readonly kind: Kind;
  /** Unit of a number typed without one, and of the steps. */
  readonly unit?: string;
  /** Null keeps it, a sentence refuses it. */
  readonly onAccept: (value: number) => string | null;
  /** It may be left empty: then this is done, and `value` is null. */
  readonly onEmpty?: () => string | null;
  /** It counts something: steps are of one. */
  readonly counts?: true;
  /** Why it cannot be typed into. */
  readonly fixed?: string;
}

/**
 * A number to edit. Nonsense stays in the field, is explained beside it, and is never applied. Up, Down
 * and the wheel go by one in the second digit, from what is typed; with Shift by ten.
 */
export function QuantityField({
  label,
  value,
  kind,
  unit,
  onAccept,
  onEmpty,
  counts,
  fixed,
}: QuantityFieldProps) {
  const id = useId();
  const shownUnit = unit ?? unitFor(value ?? 0, kind);
  const own = value === null ? '' : typed(value, kind, shownUnit);
  const [text, setText] = useState(own);
  const [fault, setFault] = useState('');
  const input = useRef<HTMLInputElement>(null);
  // what someone is typing is not overwritten; what changed elsewhere is shown, before the next key comes
  const [last, setLast] = useState(own);
  if (last !== own) {
    setLast(own);
    setText(own);
    setFault('');
  }

  /** Applies what was typed; '' or why it cannot be. */
  const applied = (): string => {
    if (text.trim() === own) {
      setText(own);
      return '';
    }
    if (text.trim() === '' && value === null) return '';
    if (text.trim() === '' && onEmpty) return onEmpty() ?? '';
    const parsed = parseQuantity(text, kind, shownUnit);
    if (!parsed.ok) return `${label} ${parsed.what} ${parsed.remedy}`;
    return onAccept(ratioToNumber(parsed.exact)) ?? '';
  };
  const accept = (): void => setFault(applied());
  const stepBy = (direction: number, far: boolean): void => {
    const parsed = parseQuantity(text, kind, shownUnit);
    const from = parsed.ok && text.trim() !== own ? ratioToNumber(parsed.exact) : value;
    if (from === null || fixed) return;
    const size = unitSize(shownUnit);
    const inside = Math.abs(from / size);
    const power = counts ? 1 : inside > 0 ? 10 ** (Math.floor(Math.log10(inside) + 1e-9) - 1) : 0.1;
    const next = Number((from / size + direction * power * (far ? 10 : 1)).toPrecision(12)) * size;
    setFault(onAccept(next) ?? '');
  };
  useEffect(() => {
    const element = input.current!;
    const wheel = (event: WheelEvent): void => {
      if (document.activeElement !== element) return;
      event.preventDefault();
      stepBy(event.deltaY < 0 ? 1 : -1, event.shiftKey);
    };
    element.addEventListener('wheel', wheel, { passive: false });
    return () => element.removeEventListener('wheel', wheel);
  });

  return (
    <div className="field">
      <label htmlFor={id}>{label}</label>
      <input
        ref={input}
        id={id}
        value={text}
        placeholder={value === null ? (onEmpty ? 'not said' : 'they differ') : undefined}
        readOnly={Boolean(fixed)}
        title={fixed}
        spellCheck={false}
        autoComplete="off"
        aria-invalid={fault !== ''}
        aria-describedby={fault ? `${id}-fault` : undefined}
        onChange={(event) => setText(event.target.value)}
        onBlur={accept}
        onKeyDown={(event) => {
          if (event.key === 'Enter') accept();
          else if (event.key === 'Escape') {
            // what was typed is given up first; with nothing typed the field is left
            if (text === own && !fault) return;
            setText(own);
            setFault('');
            event.preventDefault();
          } else if (event.key === 'ArrowUp') stepBy(1, event.shiftKey);
          else if (event.key === 'ArrowDown') stepBy(-1, event.shiftKey);
          else return;
          if (event.key.startsWith('Arrow')) event.preventDefault();
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
