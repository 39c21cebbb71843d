import { missedWords } from '../ledger/tables.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { spoken } from '../words/spoken.ts';
import { AcceptFinding } from './accept-finding.tsx';
import { RemedyButton } from './remedy-button.tsx';

/** What the checks and limits have to say about some places, each with what to do. */
export function PlaceFindings({ ids }: { readonly ids: readonly string[] }) {
  const { desk } = usePage();
  const { result } = useStore(desk.solver.solved);
  const chip = useStore(desk.project)!.document.chip;
  if (!result) return null;
  const mine = (where: string): boolean =>
    ids.some((id) => where === id || where.replace(/#\d+$/, '') === id || where.endsWith(`:${id}`));
  const missed = result.limits.filter((limit) => limit.met === false && mine(limit.where));
  const findings = result.findings.filter((finding) => mine(finding.where));
  if (missed.length + findings.length === 0) return null;
  return (
    <section aria-label="Findings">
      {missed.map((limit) => (
        <p key={limit.name} className="finding missed">
          {missedWords(limit, chip)}
        </p>
      ))}
      {findings.map((finding, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: two findings may be alike to the letter
        <div key={`${finding.kind} ${i}`} className="finding">
          <p>{spoken(finding.says)}</p>
          <p className="soft">
            {finding.accepted === undefined ? spoken(finding.do) : `Accepted: ${finding.accepted}`}
          </p>
          {finding.remedy && finding.accepted === undefined && <RemedyButton remedy={finding.remedy} />}
          <AcceptFinding finding={finding} />
        </div>
      ))}
    </section>
  );
}
