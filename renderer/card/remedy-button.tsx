import { useState } from 'react';
import type { Finding } from '../../solver/problem/finding.ts';
import { reading } from '../edits/reading.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { verdictChanges } from './verdict-changes.ts';

/** Does what a finding advises; shows first, on request, what else that changes. */
export function RemedyButton({ remedy }: { readonly remedy: NonNullable<Finding['remedy']> }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const { result } = useStore(desk.solver.solved);
  const [effect, setEffect] = useState('');
  const label = remedy.label.charAt(0).toUpperCase() + remedy.label.slice(1);
  const doIt = (): void => {
    void reading(desk, ({ remedyOf }) => {
      const layers = desk.chip()?.layers;
      if (layers) desk.alter(remedyOf(remedy, layers));
    });
  };
  const tryOut = (): void => {
    void reading(desk, async ({ readEdit }) => {
      const outcome = await desk.solver.attempt(readEdit(remedy));
      if (!outcome.ok) setEffect(`It can't be done: ${outcome.problem.what}`);
      else setEffect(verdictChanges(chip, result, outcome.result));
    });
  };
  return (
    <p>
      <button type="button" className="quiet" onClick={doIt}>
        {label}
      </button>{' '}
      <button type="button" className="quiet" onClick={tryOut}>
        What else would change?
      </button>
      {effect && (
        <span className="soft" role="status">
          {effect}
        </span>
      )}
    </p>
  );
}
