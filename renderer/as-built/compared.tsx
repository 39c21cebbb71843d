import type { AsBuilt } from '../../solver/asbuilt/as-built.ts';
import type { Restored } from '../../solver/asbuilt/restore.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import type { Run } from '../verdict/answer.ts';
import { plusMinus } from '../words/band.ts';
import { figure } from '../words/figure.ts';
import { drivesWords, driveWords, heldWords, madeWords, nearWords, shareWith } from './words.ts';

/** More ports than a card shows; the rest is in the ledger of the trial. */
const MOST_PORTS = 40;

const off = (now: number | null, before: number | null | undefined): string =>
  now === null || before == null || before === 0
    ? '–'
    : Math.abs(now / before - 1) < 5e-5
      ? '0'
      : figure(now / before - 1, 'share', { unit: '%', digits: 2, signed: true });

/** The highest peak wall shear of a chip, with where it is. */
function highest(result: Result): { readonly value: number; readonly likely: number } | null {
  let best: { value: number; likely: number } | null = null;
  const see = (value: number | null, likely: number): void => {
    if (value !== null && value > (best?.value ?? 0)) best = { value, likely };
  };
  for (const { pieces } of result.channels)
    for (const { peakWallShear, making } of pieces) see(peakWallShear, making?.shear.likely ?? 0);
  for (const { peakWallShear, making } of result.cells) see(peakWallShear, making?.likely ?? 0);
  return best;
}

export function Says({ runs }: { readonly runs: readonly Run[] }) {
  return runs.map((run, i) =>
    typeof run === 'string' ? (
      run
    ) : (
      // biome-ignore lint/suspicious/noArrayIndexKey: runs of one sentence have no name and no state
      <strong key={i}>{run.strong}</strong>
    ),
  );
}

/** Drawn and made side by side, and the drives. */
export function ComparedChips({
  chip,
  built,
  onSet,
  onKeep,
}: {
  readonly chip: Chip;
  readonly built: AsBuilt;
  readonly onSet: (restored: Restored) => void;
  readonly onKeep: () => void;
}) {
  const { drawn, result, restored, wider, says, measured, assumed } = built;
  const before = new Map(drawn.ports.map((port) => [port.id, port]));
  const missed = new Set(result.targets.filter(({ met }) => !met).map(({ port }) => port));
  const [was, is] = [highest(drawn), highest(result)];
  return (
    <>
      <section aria-label="Drawn and made">
        <h3>Drawn and made</h3>
        <p>
          <Says runs={madeWords(chip, built)} />
        </p>
        <table className="plain-table made-table">
          <thead>
            <tr>
              <th scope="col">port</th>
              <th scope="col">share drawn</th>
              <th scope="col">made</th>
              <th scope="col">by</th>
            </tr>
          </thead>
          <tbody>
            {result.ports.slice(0, MOST_PORTS).map(({ id, share, making }) => (
              <tr key={id}>
                <th scope="row">{id}</th>
                <td>{shareWith(before.get(id)?.share ?? null, before.get(id)?.making?.share)}</td>
                <td className={missed.has(id) ? 'missed' : undefined}>
                  {shareWith(share, making?.share)}
                  {missed.has(id) && <span className="unseen"> misses its target</span>}
                </td>
                <td>{off(share, before.get(id)?.share)}</td>
              </tr>
            ))}
          </tbody>
        </table>
        <table className="plain-table made-table">
          <thead>
            <tr>
              <th scope="col">at its highest</th>
              <th scope="col">drawn</th>
              <th scope="col">made</th>
              <th scope="col">by</th>
            </tr>
          </thead>
          <tbody>
            <tr>
              <th scope="row">wall shear</th>
              <td>{figure(was?.value, 'stress', { digits: 3 })}</td>
              <td>
                {figure(is?.value, 'stress', { digits: 3 })}
                {is && is.likely > 0 && ` ± ${figure(is.likely, 'share', { unit: '%', digits: 2 })}`}
              </td>
              <td>{off(is?.value ?? null, was?.value)}</td>
            </tr>
            <tr>
              <th scope="row">pressure</th>
              <td>{figure(most(drawn), 'pressure', { digits: 3 })}</td>
              <td>{figure(most(result), 'pressure', { digits: 3 })}</td>
              <td>{off(most(result), most(drawn))}</td>
            </tr>
          </tbody>
        </table>
        {result.limits.some(({ met }) => met === false) && (
          <p>
            Over its limit:{' '}
            {result.limits
              .filter(({ met }) => met === false)
              .map(({ name }) => name)
              .join(', ')}
            .
          </p>
        )}
        <p className="soft small">
          ± is what measurements and tolerances leave open, as likely as they are. Widths measured: {measured}
          {assumed > 0 && `, as drawn: ${assumed}`}. {says.join(' ')}
          {result.bands &&
            ` What the solver knows of its own errors comes beside that: shares${plusMinus(result.bands.share) || ' as imposed'}, wall shear${plusMinus(result.bands.shear)}.`}
        </p>
        <div className="row">
          <button type="button" className="quiet" onClick={onKeep}>
            Keep the made chip as a trial
          </button>
        </div>
      </section>
      <section aria-label="Drives">
        <h3>Drives</h3>
        <p>{drivesWords(chip, built)}</p>
        {restored && restored.settings.length > 0 && (
          <Settings restored={restored} button="Set these drives" onSet={() => onSet(restored)} />
        )}
        {wider && (
          <>
            <p>
              {wider.met
                ? 'With open ports held at a pressure too, the targets would be met:'
                : `With open ports held at a pressure too it comes nearer: ${nearWords(chip, wider)}.`}
            </p>
            <Settings restored={wider} button="Set these, open ports too" onSet={() => onSet(wider)} />
          </>
        )}
      </section>
    </>
  );
}

const most = (result: Result): number => Math.max(...result.ports.map(({ pressure }) => pressure));

function Settings({
  restored,
  button,
  onSet,
}: {
  readonly restored: Restored;
  readonly button: string;
  readonly onSet: () => void;
}) {
  const over = restored.result.limits.filter(({ met }) => met === false).map(({ name }) => name);
  return (
    <>
      <table className="plain-table made-table">
        <thead>
          <tr>
            <th scope="col">port</th>
            <th scope="col">now</th>
            <th scope="col">to be set</th>
          </tr>
        </thead>
        <tbody>
          {restored.settings.map((setting) => (
            <tr key={setting.port}>
              <th scope="row">{setting.port}</th>
              <td>{driveWords(setting.from)}</td>
              <td>
                {driveWords(setting.to)}
                {setting.held && <span className="soft">, {heldWords(setting)}</span>}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      {over.length > 0 && <p>With them it is over its limit: {over.join(', ')}.</p>}
      <p className="soft small">
        Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection.
      </p>
      <div className="row">
        <button type="button" className="strong-button" onClick={onSet}>
          {button}
        </button>
      </div>
    </>
  );
}
