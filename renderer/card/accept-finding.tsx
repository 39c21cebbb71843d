import { useState } from 'react';
import type { Acceptance } from '../../solver/chip/making.ts';
import type { Finding } from '../../solver/problem/finding.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';

/** Takes a finding as it is, for a reason that is kept with the chip, or takes that back. */
export function AcceptFinding({ finding }: { readonly finding: Finding }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const [reason, setReason] = useState('');
  const { kind, where, severity, accepted } = finding;
  if (severity === 'note') return null;
  const others = (chip.accepted ?? []).filter((entry) => entry.kind !== kind || entry.where !== where);
  const set = (label: string, entries: readonly Acceptance[]): boolean =>
    desk.alter({ label, set: { accepted: entries.length > 0 ? entries : null } });
  if (accepted !== undefined)
    return (
      <button type="button" className="quiet" onClick={() => set('take back an acceptance', others)}>
        Accept no longer
      </button>
    );
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        if (set('accept a finding', [...others, { kind, where, reason: reason.trim() }])) setReason('');
      }}
    >
      <input
        aria-label="Reason to accept it"
        placeholder="Reason to accept it"
        maxLength={1000}
        value={reason}
        onChange={(event) => setReason(event.target.value)}
      />{' '}
      <button type="submit" className="quiet" disabled={reason.trim() === ''}>
        Accept
      </button>
    </form>
  );
}
