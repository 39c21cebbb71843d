import type { BringInOutcome } from '../../main/contract/bring-in.ts';
import { metres } from '../../solver/chip/units.ts';
import { formatQuantity } from '../../solver/chip/units-format.ts';

/** What became of a drawing: how it lies on what was drawn, and what was not understood. */
export function Brought({ outcome: { chip, report, picture } }: { readonly outcome: BringInOutcome }) {
  const { width, height } = chip.outline;
  const length = (value: number | undefined): string =>
    value === undefined ? '–' : formatQuantity(value, 'length', { digits: 2 });
  return (
    <section aria-label="What became of it">
      <h3>What became of it</h3>
      {picture.length > 0 ? (
        <svg
          className="brought-picture"
          viewBox={`0 ${-height} ${width} ${height}`}
          role="img"
          aria-label="The drawing with what was made of it over it; where the two differ the drawing shows."
        >
          <g transform="scale(1 -1)" fillRule="evenodd">
            {picture.map(({ layer, drawn, made }) => (
              <g key={layer}>
                <path className="drawn" d={drawn} />
                <path className="made" d={made} />
                <path className="wall" d={drawn} />
              </g>
            ))}
          </g>
        </svg>
      ) : (
        <p className="soft small">There is too much of it for a small picture.</p>
      )}
      <table className="plain-table figures became-table">
        <thead>
          <tr>
            <th scope="col">channels</th>
            <th scope="col">chambers</th>
            <th scope="col">area off</th>
            <th scope="col">walls off, mean</th>
            <th scope="col">furthest</th>
          </tr>
        </thead>
        {report.chipLayers.map(({ id, channelsFromPaths, channelsFromRegions, chambers, deviation }) => (
          <tbody key={id}>
            <tr>
              <th scope="rowgroup" colSpan={5}>
                {id}
              </th>
            </tr>
            <tr>
              <td>{channelsFromPaths + channelsFromRegions}</td>
              <td>{chambers}</td>
              <td>{deviation ? formatQuantity(deviation.share, 'share', { digits: 2 }) : '–'}</td>
              <td>{length(deviation?.meanOffset)}</td>
              <td>{length(deviation?.furthest)}</td>
            </tr>
          </tbody>
        ))}
      </table>
      <p>
        {report.ports === 1 ? '1 port' : `${report.ports} ports`},{' '}
        {formatQuantity(metres(width), 'length', { unit: 'mm' })} by{' '}
        {formatQuantity(metres(height), 'length', { unit: 'mm' })}.
      </p>
      <h3>Not understood, and left out</h3>
      {report.notUnderstood.length === 0 ? (
        <p className="soft">Nothing: all of the drawing is in it.</p>
      ) : (
        <ul className="plain">
          {report.notUnderstood.map(({ what, count, where }) => (
            <li key={what}>
              {count} × {what}
              {where && <span className="soft small"> (first at {where})</span>}
            </li>
          ))}
        </ul>
      )}
      <h3>Taken for granted</h3>
      <ul className="plain soft small">
        {report.assumed.map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
    </section>
  );
}
