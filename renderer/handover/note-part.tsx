import { useState } from 'react';
import type { NoteDocument, NoteFormat, NotePaper } from '../../main/contract/note.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { ChoiceField } from '../card/text-field.tsx';
import { usePage } from '../page/context.tsx';
import type { Desk } from '../state/desk.ts';
import { useStore } from '../state/store.ts';
import { answer, placeFor, waitingWords, whyNot } from './answer.ts';
import { follow } from './jobs.ts';

const PAPERS = [
  ['A4', 'A4'],
  ['letter', 'US letter'],
] as const;
const FORMATS = [
  ['pdf', 'PDF'],
  ['html', 'page of HTML'],
  ['csv', 'tables as CSV'],
] as const;

/** A person's last choice, for this sitting. */
let habit: { paper: NotePaper; format: NoteFormat } = { paper: 'A4', format: 'pdf' };

/** Why it did not work: where, what, what to do. */
export const troubleWords = (error: unknown): string =>
  error instanceof Problem
    ? `${error.where && `${error.where.charAt(0).toUpperCase()}${error.where.slice(1)}: `}${error.what} ${error.remedy}`
    : error instanceof Error
      ? error.message
      : 'That did not work. Try it once more.';

/** Writes a document where the person wants it; resolves with what came of it, '' where they thought better. */
async function write(
  desk: Desk,
  wish: { readonly document: NoteDocument; readonly format: NoteFormat; readonly paper: NotePaper },
): Promise<string> {
  const what = wish.document === 'note' ? 'Fabrication note' : 'Flow-split table';
  const name = `${desk.chip()!.name} ${wish.document === 'note' ? 'note' : 'flow split'}`;
  const path = await placeFor(desk, what, name, wish.format);
  if (!path) return '';
  const stand = await answer(desk);
  const state = await follow(desk.client, 'note', () =>
    desk.client.call('note.start', { ...wish, ...stand, path, replace: true }),
  );
  return state.says;
}

/** What the last thing came to, told to those who listen as well. */
function Says({ text }: { readonly text: string }) {
  return (
    <p className="small handed" role="status">
      {text}
    </p>
  );
}

/** The fabrication note: paper, format, and out with it. */
export function NotePart() {
  const { desk } = usePage();
  const solved = useStore(desk.solver.solved);
  const chip = useStore(desk.project, (project) => project?.document.chip);
  const [{ paper, format }, setWish] = useState(habit);
  const [writing, setWriting] = useState(false);
  const [says, setSays] = useState('');
  const why = whyNot(solved, chip);
  const choose = (patch: Partial<typeof habit>): void => {
    habit = { ...habit, ...patch };
    setWish(habit);
  };
  const go = async (): Promise<void> => {
    setWriting(true);
    setSays('');
    try {
      setSays(await write(desk, { document: 'note', format, paper }));
    } catch (error) {
      setSays(troubleWords(error));
    } finally {
      setWriting(false);
    }
  };
  return (
    <section className="fields" aria-labelledby="handover-note">
      <h3 id="handover-note">Fabrication note</h3>
      <p className="small">
        What the shop and the person at the pump need, in one document: drawings to scale, ports, layers, the
        flow split, drives, shear against limits, findings, how far to trust it, cautions.
      </p>
      <ChoiceField
        label="Format"
        value={format}
        choices={FORMATS}
        onAccept={(value) => choose({ format: value })}
      />
      {format === 'pdf' && (
        <ChoiceField
          label="Paper"
          value={paper}
          choices={PAPERS}
          onAccept={(value) => choose({ paper: value })}
        />
      )}
      <div className="row">
        <button type="button" className="strong-button" disabled={why !== '' || writing} onClick={go}>
          {writing ? 'Writing …' : 'Write the note'}
        </button>
      </div>
      <Says text={says || why || waitingWords(solved)} />
    </section>
  );
}

/** The flow-split table alone: to the clipboard, to a spreadsheet, on paper. */
export function SplitPart() {
  const { desk } = usePage();
  const solved = useStore(desk.solver.solved);
  const chip = useStore(desk.project, (project) => project?.document.chip);
  const [says, setSays] = useState('');
  const [busy, setBusy] = useState(false);
  const why = whyNot(solved, chip);
  const run = async (work: () => Promise<string>): Promise<void> => {
    setBusy(true);
    setSays('');
    try {
      setSays(await work());
    } catch (error) {
      setSays(troubleWords(error));
    } finally {
      setBusy(false);
    }
  };
  const copy = async (): Promise<string> => {
    const { tabbed, rows } = await desk.client.call('note.split', await answer(desk));
    try {
      await navigator.clipboard.writeText(tabbed);
    } catch {
      return 'The clipboard refuses; take the table out as CSV instead.';
    }
    return `Copied ${rows} ${rows === 1 ? 'row' : 'rows'}; paste into a spreadsheet.`;
  };
  const out = (format: NoteFormat) => (): Promise<string> =>
    write(desk, { document: 'split', format, paper: habit.paper });
  const verbs: readonly [string, () => Promise<string>][] = [
    ['Copy', copy],
    ['CSV', out('csv')],
    ['PDF', out('pdf')],
  ];
  return (
    <section className="fields" aria-labelledby="handover-split">
      <h3 id="handover-split">Flow split alone</h3>
      <p className="small">Each outlet: wanted, got, how far off, how sure, met or missed.</p>
      <div className="row">
        {verbs.map(([title, work]) => (
          <button
            key={title}
            type="button"
            className="plain-button"
            disabled={why !== '' || busy}
            onClick={() => run(work)}
          >
            {title}
          </button>
        ))}
      </div>
      <Says text={says} />
    </section>
  );
}
