import { saveDescription, saveText } from '../commands/files.ts';
import { csvOf, tableOf } from '../ledger/tables.ts';
import { usePage } from '../page/context.tsx';
import { TABS } from '../state/view.ts';
import { MaskPart } from './mask-part.tsx';
import { NotePart, SplitPart } from './note-part.tsx';

/** All that leaves the program for someone else's bench, in one place. */
export function HandOverPanel() {
  return (
    <>
      <NotePart />
      <SplitPart />
      <MaskPart />
      <TablesPart />
      <p className="soft small handed">
        Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection.
        Resists, etchants and solvents: follow local safety rules and trained supervision. Not for diagnosis
        or treatment. A computed pass is not evidence that cells live.
      </p>
    </>
  );
}

/** Tables as they stand, and the description. */
function TablesPart() {
  const { desk } = usePage();
  const save = (tab: (typeof TABS)[number]): void => {
    const { result, graph } = desk.solver.solved.get();
    const chip = desk.chip()!;
    void saveText(desk, csvOf(tableOf(tab, chip, result, graph)), `${chip.name} ${tab}.csv`, 'Table');
  };
  return (
    <section aria-labelledby="handover-tables">
      <h3 id="handover-tables">Tables and description</h3>
      <ul className="nexts">
        {TABS.map((tab) => (
          <li key={tab}>
            <button type="button" onClick={() => save(tab)}>
              <span>Table of {tab}</span>
              <span className="soft">CSV, with its units in the head</span>
            </button>
          </li>
        ))}
        <li>
          <button type="button" onClick={() => void saveDescription(desk)}>
            <span>Chip description</span>
            <span className="soft">JSON, version 1</span>
          </button>
        </li>
      </ul>
    </section>
  );
}
