import { useEffect, useRef } from 'react';

/** A cell while it is typed into; what was wrong with it stands below. */
export function CellInput({
  label,
  text,
  fault,
  onText,
  onAccept,
  onLeave,
}: {
  readonly label: string;
  readonly text: string;
  readonly fault: string;
  readonly onText: (text: string) => void;
  readonly onAccept: () => void;
  readonly onLeave: () => void;
}) {
  const input = useRef<HTMLInputElement>(null);
  useEffect(() => {
    input.current?.focus();
    // a single letter was typed to begin with: what follows goes behind it
    const { length } = input.current!.value;
    input.current!.setSelectionRange(length === 1 ? 1 : 0, length);
  }, []);
  return (
    <>
      <input
        ref={input}
        aria-label={label}
        aria-invalid={fault !== ''}
        value={text}
        spellCheck={false}
        onChange={(event) => onText(event.target.value)}
        onClick={(event) => event.stopPropagation()}
        onBlur={() => !fault && onAccept()}
        onKeyDown={(event) => {
          event.stopPropagation();
          if (event.key === 'Enter') onAccept();
          else if (event.key === 'Escape') onLeave();
        }}
      />
      {fault && (
        <span className="cell-fault" role="alert">
          {fault}
        </span>
      )}
    </>
  );
}
