import { saveDescription, saveText } from '../commands/files.ts';
import { csvOf, tableOf } from '../ledger/tables.ts';
import { usePage } from '../page/context.tsx';
import { TABS } from '../state/view.ts';

/** Tables and the description out of the program. */
export function HandOverPanel() {
  const { desk } = usePage();
  const save = (tab: (typeof TABS)[number]): void => {
    const { result, graph } = desk.solver.solved.get();
    const chip = desk.chip()!;
    void saveText(desk, csvOf(tableOf(tab, chip, result, graph)), `${chip.name} ${tab}.csv`, 'Table');
  };
  return (
    <>
      <p className="soft">
        Each table as it stands, for a spreadsheet; the description for scripts and other windows.
      </p>
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
      <p className="soft small">
        Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection. Not
        for diagnosis or treatment. A computed pass is not evidence that cells live.
      </p>
    </>
  );
}
