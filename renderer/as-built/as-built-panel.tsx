import { useEffect, useId, useRef, useState } from 'react';
import type { AsBuilt } from '../../solver/asbuilt/as-built.ts';
import type { Measured } from '../../solver/asbuilt/measured.ts';
import { readMeasured } from '../../solver/asbuilt/read-measured.ts';
import { driveEdit, type Restored, settable } from '../../solver/asbuilt/restore.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { usePage } from '../page/context.tsx';
import type { Desk } from '../state/desk.ts';
import { useStore } from '../state/store.ts';
import './as-built.css';
import { ComparedChips } from './compared.tsx';
import { type BuiltHand, builtHand } from './hand.ts';
import { templateOf } from './template.ts';

/** What was typed stays while the panel is away. */
const typed = new WeakMap<Desk, string>();

/** Larger files are none of measurements. */
const MOST_FILE = 4_000_000;

const wordsOf = ({ what, where, remedy }: Pick<Problem, 'what' | 'where' | 'remedy'>): string =>
  `${where ? `${where.charAt(0).toUpperCase()}${where.slice(1)}: ` : ''}${what} ${remedy}`;

interface Found {
  /** The drawn chip that was compared: another one makes the comparison old. */
  readonly chip: Chip;
  readonly built: AsBuilt;
}

/** Measurements of the made chip as a table; what it does beside the drawn one, and its drives. */
export function AsBuiltPanel() {
  const { desk } = usePage();
  const id = useId();
  const chip = useStore(desk.project)!.document.chip;
  const [text, setText] = useState(() => typed.get(desk) ?? '');
  const [set, setSet] = useState<readonly string[] | null>(null);
  const [says, setSays] = useState('');
  const [told, setTold] = useState('');
  const [busy, setBusy] = useState(false);
  const [found, setFound] = useState<Found | null>(null);
  const hand = useRef<BuiltHand | null>(null);
  useEffect(() => () => hand.current?.stop(), []);

  const write = (next: string): void => {
    typed.set(desk, next);
    setText(next);
    setSays('');
  };
  const driven = chip.ports.filter(({ drive }) => drive.kind !== 'closed');
  const chosen = set ?? settable(chip);

  const work = async (which: readonly string[]): Promise<void> => {
    setSays('');
    setTold('');
    let measured: readonly Measured[];
    try {
      const table = await desk.client.call('measurements.read', { text });
      measured = readMeasured(table, chip);
    } catch (error) {
      setFound(null);
      setSays(error instanceof Problem ? wordsOf(error) : 'That did not work. Try it once more.');
      return;
    }
    const { result, chip: answered, waiting } = desk.solver.solved.get();
    const drawn = answered === chip && waiting === 0 ? result : null;
    hand.current ??= builtHand();
    setBusy(true);
    const there = new Set(driven.map((port) => port.id));
    const news = await hand.current.ask({
      chip,
      measured,
      set: which.filter((port) => there.has(port)),
      drawn,
    });
    setBusy(false);
    if (!news) return;
    if ('built' in news) setFound({ chip, built: news.built });
    else {
      setFound(null);
      setSays(wordsOf(news.problem));
    }
  };

  const choose = (port: string, may: boolean): void => {
    const next = may ? [...chosen, port] : chosen.filter((other) => other !== port);
    setSet(next);
    if (found) void work(next);
  };

  const setDrives = (restored: Restored): void => {
    const { label, changes } = driveEdit(chip, restored.settings);
    const why = desk.attempt({
      label,
      put: changes.flatMap((change) =>
        change.kind === 'put' && change.list === 'ports'
          ? [{ kind: 'port' as const, value: change.part }]
          : [],
      ),
    });
    setTold(why ?? 'The drives are set; undo takes them back.');
  };

  const keep = async (built: AsBuilt): Promise<void> => {
    try {
      await desk.settled();
      const trial = await desk.client.call('trials.freeze', {
        name: built.chip.name,
        seq: desk.position(),
        result: built.result,
        chip: built.chip,
      });
      setTold(`Kept as the trial ${trial.name}.`);
    } catch (error) {
      setTold(
        error instanceof Problem ? `${error.what} ${error.remedy}` : 'That did not work. Try it once more.',
      );
    }
  };

  return (
    <>
      <p className="soft">
        One measurement to a row: a layer’s depth, a channel’s width or depth, or a layer’s bias (by how much
        all its widths came out larger); where known with its uncertainty, and along (the distance along the
        channel) or x and y on the chip.
      </p>
      <label htmlFor={`${id}-table`}>Table, typed or pasted</label>
      <textarea
        id={`${id}-table`}
        className="measured"
        rows={7}
        spellCheck={false}
        placeholder={'part,what,value (um),uncertainty\nflow,depth,48.6,0.3\nfeed,width,203,1'}
        value={text}
        aria-invalid={says !== ''}
        aria-describedby={says ? `${id}-says` : undefined}
        onChange={(event) => write(event.target.value)}
      />
      {says && (
        <p className="fault" role="alert" id={`${id}-says`}>
          {says}
        </p>
      )}
      <div className="row measured-verbs">
        <button type="button" className="strong-button" disabled={busy} onClick={() => void work(chosen)}>
          Compare with the drawing
        </button>
        <button type="button" className="quiet" onClick={() => write(templateOf(chip))}>
          Begin from the drawn sizes
        </button>
        <label className="file-button">
          From a file
          <input
            type="file"
            accept=".csv,.tsv,.txt,text/csv,text/tab-separated-values,text/plain"
            onChange={async (event) => {
              const file = event.target.files?.[0];
              event.target.value = '';
              if (!file) return;
              if (file.size > MOST_FILE)
                setSays('The file is larger than any table of measurements. Choose another.');
              else write(await file.text());
            }}
          />
        </label>
      </div>
      <fieldset className="fields">
        <legend>Drives that may be set</legend>
        {driven.map((port) => (
          <label key={port.id} className="check">
            <input
              type="checkbox"
              checked={chosen.includes(port.id)}
              onChange={(event) => choose(port.id, event.target.checked)}
            />{' '}
            {port.id}
          </label>
        ))}
      </fieldset>
      {busy && (
        <p role="status">
          The made chip is being solved, its junctions too …{' '}
          <button type="button" className="quiet" onClick={() => hand.current?.stop()}>
            Stop
          </button>
        </p>
      )}
      {told && <p role="status">{told}</p>}
      {found && !busy && found.chip !== chip && (
        <p className="soft">The drawn chip has changed since. Compare again for its own figures.</p>
      )}
      {found && !busy && (
        <ComparedChips
          chip={found.chip}
          built={found.built}
          onSet={setDrives}
          onKeep={() => void keep(found.built)}
        />
      )}
    </>
  );
}
