import { useEffect, useState } from 'react';
import type { Output } from '../../main/contract/contract.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';

const day = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium', timeStyle: 'short' });
const hour = new Intl.DateTimeFormat('en-GB', { timeStyle: 'medium' });
/** Of today the time alone. */
const whenOf = (made: number): string =>
  new Date(made).toDateString() === new Date().toDateString() ? hour.format(made) : day.format(made);

/** Everything done, newest first. */
export function HistoryPanel() {
  const { desk } = usePage();
  const project = useStore(desk.project)!;
  const [steps, setSteps] = useState<Output<'project.history'>['steps'] | null>(null);
  const { keptAt } = project;
  // biome-ignore lint/correctness/useExhaustiveDependencies: read anew whenever something more is kept
  useEffect(() => {
    desk.client
      .call('project.history', { limit: 500 })
      .then(({ steps: found }) => setSteps(found))
      .catch(() => setSteps([]));
  }, [desk, keptAt]);
  if (!steps) return <p className="soft">Reading …</p>;
  if (steps.length === 0) return <p className="soft">Nothing was done yet.</p>;
  return (
    <ol className="history">
      {steps.map((step) => (
        <li key={step.seq} className={step.undone ? 'soft' : undefined}>
          <span>
            {step.label}
            {step.undone && ', taken back'}
          </span>
          <time className="soft small" dateTime={new Date(step.made).toISOString()}>
            {whenOf(step.made)}
          </time>
        </li>
      ))}
    </ol>
  );
}

/** Version, what the program stands on, cautions, and the checks behind its numbers. */
export function AboutPanel() {
  const { desk } = usePage();
  const [about, setAbout] = useState<Output<'about'> | null>(null);
  const [rows, setRows] = useState<Output<'about.verification'>['rows']>(null);
  useEffect(() => {
    desk.client
      .call('about', {})
      .then(setAbout)
      .catch(() => undefined);
    desk.client
      .call('about.verification', {})
      .then((found) => setRows(found.rows))
      .catch(() => undefined);
  }, [desk]);
  return (
    <>
      {about && (
        <p>
          {about.name} {about.version}, in {about.host === 'desktop' ? 'its own window' : 'a browser'}.
        </p>
      )}
      <h3>Cautions</h3>
      <ul className="cautions">
        <li>
          Wall-shear limits vary with cell type, medium, passage, exposure and temperature. A computed pass is
          not evidence that cells live: confirm it with your own cells.
        </li>
        <li>
          Not for diagnosis or treatment. Devices that touch patients fall under local medical-device rules
          and licensed review.
        </li>
        <li>
          Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection.
        </li>
        <li>
          Resists, etchants (hydrofluoric acid in particular) and solvents: follow local safety rules and
          trained supervision.
        </li>
      </ul>
      <h3>Checked against</h3>
      {rows && rows.length > 0 ? (
        <table className="plain-table">
          <thead>
            <tr>
              <th scope="col">quantity</th>
              <th scope="col">source</th>
              <th scope="col">error</th>
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={JSON.stringify(row)}>
                <td>
                  {String(row.quantity)}, {String(row.at)}
                </td>
                <td>{String(row.source)}</td>
                <td>{typeof row.error === 'number' ? row.error.toExponential(1) : ''}</td>
              </tr>
            ))}
          </tbody>
        </table>
      ) : (
        <p className="soft">No record of checks came with this copy of the program.</p>
      )}
      {about && (
        <>
          <h3>Stands on</h3>
          <p className="soft small">
            {Object.entries(about.parts)
              .map(([name, version]) => `${name} ${version}`)
              .join(', ')}
          </p>
        </>
      )}
    </>
  );
}
