import { useEffect, useId, useLayoutEffect, useRef, useState } from 'react';
import { flushSync } from 'react-dom';
import { usePage } from '../page/context.tsx';

/** A name to edit; refused ones stay in the field with the reason beside it. */
export function TextField({
  label,
  value,
  onAccept,
}: {
  readonly label: string;
  readonly value: string;
  readonly onAccept: (value: string) => string | null;
}) {
  const id = useId();
  const [text, setText] = useState(value);
  const [fault, setFault] = useState('');
  useEffect(() => {
    setText(value);
    setFault('');
  }, [value]);
  const accept = (): void => setFault(text === value ? '' : (onAccept(text.trim()) ?? ''));
  return (
    <div className="field">
      <label htmlFor={id}>{label}</label>
      <input
        id={id}
        value={text}
        spellCheck={false}
        autoComplete="off"
        aria-invalid={fault !== ''}
        aria-describedby={fault ? `${id}-fault` : undefined}
        onChange={(event) => setText(event.target.value)}
        onBlur={accept}
        onKeyDown={(event) => {
          if (event.key === 'Enter') accept();
          // what was typed is given up first; with nothing typed the field is left
          if (event.key === 'Escape' && (text !== value || fault)) {
            setText(value);
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

/** One of a few, in words; a refused one is explained beside it and the old one stays. */
export function ChoiceField<T extends string>({
  label,
  value,
  choices,
  onAccept,
}: {
  readonly label: string;
  /** '' where what is chosen differs. */
  readonly value: T | '';
  readonly choices: readonly (readonly [T, string])[];
  /** A sentence refuses it. */
  readonly onAccept: (value: T) => unknown;
}) {
  const { desk } = usePage();
  const id = useId();
  const [fault, setFault] = useState('');
  const newest = useRef(onAccept);
  useLayoutEffect(() => {
    newest.current = onAccept;
  });
  return (
    <div className="field">
      <label htmlFor={id}>{label}</label>
      <select
        id={id}
        value={value}
        aria-invalid={fault !== ''}
        aria-describedby={fault ? `${id}-fault` : undefined}
        onChange={(event) => {
          const choice = event.target.value as T;
          // An edit that is held is shown first, so that this one is made of what it left. It sets the field back.
          flushSync(desk.project.tell);
          const why = newest.current(choice);
          setFault(typeof why === 'string' ? why : '');
        }}
        onBlur={() => setFault('')}
      >
        {value === '' && <option value="">they differ</option>}
        {choices.map(([choice, words]) => (
          <option key={choice} value={choice}>
            {words}
          </option>
        ))}
      </select>
      {fault && (
        <p className="fault" id={`${id}-fault`} role="alert">
          {fault}
        </p>
      )}
    </div>
  );
}

/** A result: a name and its figure, nothing to edit. */
export function Figure({
  label,
  figure,
  missed,
}: {
  readonly label: string;
  readonly figure: string;
  readonly missed?: boolean;
}) {
  return (
    <div className="field">
      <dt>{label}</dt>
      <dd className={missed ? 'alarm' : undefined}>{figure}</dd>
    </div>
  );
}
