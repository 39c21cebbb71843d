import { usePage } from '../page/context.tsx';
import { useResult } from '../state/live.ts';
import { placeName } from '../verdict/answer.ts';
import { bandOf, plusMinus } from '../words/band.ts';
import { capital, counted, figure, lengthFigure } from '../words/figure.ts';
import { PlaceFindings } from './place-findings.tsx';
import { Figure } from './text-field.tsx';

/** A junction or another place that is read from the drawing: what meets there, and what flows. */
export function SiteCard({ name }: { readonly name: string }) {
  const { desk } = usePage();
  const { graph, result } = useResult(desk);
  const site = graph?.sites.find((found) => found.name === name);
  const cell = result?.cells.find((found) => found.id === name);
  if (!site && !cell) return <p className="soft">{placeName(name)} is not on the chip any more.</p>;
  const at = site ? site.at : ([cell!.at[0] * 1e9, cell!.at[1] * 1e9] as const);
  const arms = (result?.channels ?? []).flatMap((channel) =>
    channel.pieces.flatMap((piece) => {
      const into = piece.to === name;
      if (!into && piece.from !== name) return [];
      const flow = piece.flow === null ? null : into ? piece.flow : -piece.flow;
      return [{ channel: channel.id, flow, band: bandOf(result, 'flow', piece) }];
    }),
  );
  return (
    <>
      <h2>{capital(placeName(name))}</h2>
      <p className="soft">
        at {lengthFigure(at[0])}, {lengthFigure(at[1])} ·{' '}
        {counted(site?.arms.length ?? cell!.faces.length, 'arm')}
      </p>
      <dl className="fields">
        {arms.map((arm, i) => (
          <Figure
            key={`${arm.channel} ${i.toString()}`}
            label={`${arm.channel}${arm.flow === null ? '' : arm.flow >= 0 ? ', in' : ', out'}`}
            figure={`${figure(arm.flow === null ? null : Math.abs(arm.flow), 'flow')}${arm.flow === null ? '' : plusMinus(arm.band)}`}
          />
        ))}
        {cell && (
          <>
            <Figure
              label="Peak wall shear"
              figure={`${figure(cell.peakWallShear, 'stress', { digits: 3 })}${cell.peakWallShear === null ? '' : plusMinus(bandOf(result, 'shear', cell))}`}
            />
            <Figure label="Accuracy" figure={figure(cell.accuracy, 'share', { digits: 2, unit: '%' })} />
          </>
        )}
      </dl>
      {cell ? (
        <PortMatrix faces={faceNames(cell.faces)} matrix={cell.portMatrix} />
      ) : (
        <p className="soft">Taken as ideal: one pressure, no loss, no peak.</p>
      )}
      <PlaceFindings ids={[name]} />
    </>
  );
}

/**
 * Faces by the channels that they cut: "feed" of "feed#1"; where one channel is cut twice, "feed, before" and
 * "feed, after", in the order of its pieces.
 */
function faceNames(faces: readonly string[]): readonly string[] {
  const names = faces.map(placeName);
  return faces.map((face, i) => {
    const name = names[i]!;
    const alike = faces.filter((_, j) => names[j] === name);
    if (alike.length < 2) return name;
    const nth = [...alike].sort((a, b) => pieceOf(a) - pieceOf(b)).indexOf(face);
    return alike.length === 2 ? `${name}, ${nth === 0 ? 'before' : 'after'}` : `${name}, ${nth + 1}`;
  });
}

const pieceOf = (face: string): number => Number(/#(\d+)$/.exec(face)?.[1] ?? 0);

/** Flow out of each face per pressure on each; rows and columns in the order of the faces. */
function PortMatrix({
  faces,
  matrix,
}: {
  readonly faces: readonly string[];
  readonly matrix: readonly (readonly number[])[];
}) {
  return (
    <table className="matrix">
      <caption>Flow out of each arm per pressure on each, µL/min per kPa</caption>
      <thead>
        <tr>
          <th scope="col">arm</th>
          {faces.map((face) => (
            <th key={face} scope="col">
              {face}
            </th>
          ))}
        </tr>
      </thead>
      <tbody>
        {matrix.map((row, i) => (
          <tr key={faces[i]}>
            <th scope="row">{faces[i]}</th>
            {row.map((value, j) => (
              <td key={faces[j]}>
                {figure(value * 1e3, 'flow', { unit: 'uL/min', digits: 3 }).replace(/\s.*$/, '')}
              </td>
            ))}
          </tr>
        ))}
      </tbody>
    </table>
  );
}
