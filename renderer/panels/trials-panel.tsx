import { useCallback, useEffect, useState } from 'react';
import type { Output } from '../../main/contract/contract.ts';
import type { PortResult, Result } from '../../solver/chip/result.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { plainText } from '../verdict/answer.ts';
import { verdicts } from '../verdict/verdicts.ts';
import { bandOf, plusMinus } from '../words/band.ts';
import { figure } from '../words/figure.ts';

type Trial = Output<'trials.list'>['trials'][number];
type Held = Output<'trials.get'>;

const day = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium', timeStyle: 'short' });

/** Frozen copies of the chip under a name, and one of them beside the chip as it stands. */
export function TrialsPanel() {
  const { desk } = usePage();
  const project = useStore(desk.project)!;
  const solved = useStore(desk.solver.solved);
  const [trials, setTrials] = useState<readonly Trial[]>([]);
  const [name, setName] = useState('');
  const [held, setHeld] = useState<Held | null>(null);
  const [says, setSays] = useState('');
  const tell = (error: unknown): void =>
    setSays(
      error instanceof Problem ? `${error.what} ${error.remedy}` : 'That did not work. Try it once more.',
    );
  const list = useCallback(async (): Promise<void> => {
    setTrials((await desk.client.call('trials.list', {})).trials);
  }, [desk]);
  useEffect(() => {
    list().catch(() => undefined);
  }, [list]);
  const freeze = async (): Promise<void> => {
    try {
      await desk.settled();
      await desk.client.call('trials.freeze', {
        name: name.trim() || `trial ${trials.length + 1}`,
        seq: desk.position(),
        result: solved.chip === project.document.chip ? solved.result : null,
      });
      setName('');
      await list();
    } catch (error) {
      tell(error);
    }
  };
  return (
    <>
      <div className="row">
        <input
          aria-label="Name of the trial"
          placeholder={`trial ${trials.length + 1}`}
          value={name}
          maxLength={200}
          onChange={(event) => setName(event.target.value)}
        />
        <button type="button" className="strong-button" onClick={freeze}>
          Keep as it stands
        </button>
      </div>
      {says && (
        <p className="fault" role="alert">
          {says}
        </p>
      )}
      {trials.length === 0 ? (
        <p className="soft">
          No trial is kept yet. One keeps the chip with its answers, to compare with what comes after.
        </p>
      ) : (
        <ul className="trials">
          {trials.map((trial) => (
            <li key={trial.id}>
              <button
                type="button"
                aria-pressed={held?.trial.id === trial.id}
                onClick={() => desk.client.call('trials.get', { id: trial.id }).then(setHeld).catch(tell)}
              >
                <strong>{trial.name}</strong> <span className="soft">{day.format(trial.made)}</span>
              </button>
              <button
                type="button"
                className="quiet"
                aria-label={`Delete trial ${trial.name}`}
                onClick={() =>
                  desk.client
                    .call('trials.delete', { id: trial.id })
                    .then(() => {
                      if (held?.trial.id === trial.id) setHeld(null);
                      return list();
                    })
                    .catch(tell)
                }
              >
                Delete
              </button>
            </li>
          ))}
        </ul>
      )}
      {held && <Compared held={held} />}
    </>
  );
}

function Compared({ held }: { readonly held: Held }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const { result } = useStore(desk.solver.solved);
  const now = verdicts({ chip, result, trouble: '' });
  const then = verdicts({
    chip: held.chip,
    result: held.result,
    trouble: held.result ? '' : 'It was kept without answers.',
  });
  const told = (of: Result | null, port: PortResult | undefined): string =>
    port ? figure(port.flow, 'flow') + plusMinus(port.flow === null ? null : bandOf(of, 'flow', port)) : '–';
  const ports = (result?.ports ?? []).map((port) => ({
    id: port.id,
    now: told(result, port),
    before: told(
      held.result,
      held.result?.ports.find((other) => other.id === port.id),
    ),
  }));
  return (
    <section aria-label={`Compared with ${held.trial.name}`}>
      <h3>Compared with {held.trial.name}</h3>
      {now.map((answer, i) => (
        <div key={answer.question} className="compared">
          <p className="soft small">{answer.question}</p>
          <p>{plainText(answer.says)}</p>
          {plainText(answer.says) !== plainText(then[i]!.says) && (
            <p className="soft">then: {plainText(then[i]!.says)}</p>
          )}
        </div>
      ))}
      <table className="plain-table figures">
        <thead>
          <tr>
            <th scope="col">port</th>
            <th scope="col">then</th>
            <th scope="col">now</th>
          </tr>
        </thead>
        <tbody>
          {ports.map((port) => (
            <tr key={port.id}>
              <th scope="row">{port.id}</th>
              <td>{port.before}</td>
              <td>{port.now}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
}
