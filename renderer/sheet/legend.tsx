import { useEffect, useMemo, useReducer } from 'react';
import { unitInPrint } from '../../solver/chip/units-format.ts';
import { shades } from '../look/ramp.ts';
import { onTheme, palette, scheme } from '../look/theme.ts';
import { usePage } from '../page/context.tsx';
import { useResult } from '../state/live.ts';
import { useStore } from '../state/store.ts';
import { figureIn, unitFor } from '../words/figure.ts';
import { placeOn, shown } from './overlay.ts';

const WIDTH = 188;

/** The ramp with its figures and what they mean. */
export function Legend() {
  const { desk } = usePage();
  const overlay = useStore(desk.view, (view) => view.overlay);
  const { chip: solvedChip, result, graph, problem } = useResult(desk);
  const drawn = useStore(desk.drawn.sheet)!;
  const chip = solvedChip ?? drawn;
  const [, again] = useReducer((n: number) => n + 1, 0);
  useEffect(() => onTheme(again), []);
  const now = useMemo(() => shown(overlay, chip, result, graph), [overlay, chip, result, graph]);
  const bare = now.values.size === 0 && now.chambers.size === 0;
  if (now.overlay === 'findings' || bare)
    return (
      <p className="legend soft">
        {now.overlay === 'findings'
          ? bare
            ? 'No finding names a channel or a chamber.'
            : 'Channels and chambers that a finding names are filled.'
          : now.overlay === 'off target'
            ? 'No target is given.'
            : problem
              ? 'Without an answer there is nothing to colour.'
              : 'Colour comes with the first answer.'}
      </p>
    );
  const unit = now.kind === 'share' ? '%' : unitFor(Math.max(Math.abs(now.from), Math.abs(now.to)), now.kind);
  const colours = shades(scheme(), now.ramp);
  const mark = (value: number): string => figureIn(value, unit, { digits: 3 });
  const middle = (now.from + now.to) / 2;
  const limitAt = now.mark === null ? null : placeOn(now, now.mark.at) * WIDTH;
  const look = palette();
  return (
    <figure className="legend">
      <svg
        viewBox={`-6 -16 ${WIDTH + 40} 42`}
        width={WIDTH + 40}
        height={42}
        role="img"
        aria-label={`${now.says}, from ${mark(now.from)} to ${mark(now.to)} ${unitInPrint(unit)}`}
      >
        {colours.map((colour, i) => (
          <rect
            key={colour + String(i)}
            x={(i * WIDTH) / colours.length}
            y={0}
            width={WIDTH / colours.length + 0.5}
            height={8}
            fill={colour}
          />
        ))}
        <text x={0} y={20}>
          {mark(now.from)}
        </text>
        {(limitAt === null || Math.abs(limitAt - WIDTH / 2) > 48) && (
          <text x={WIDTH / 2} y={20} textAnchor="middle">
            {mark(middle)}
          </text>
        )}
        <text x={WIDTH} y={20} textAnchor="middle">
          {mark(now.to)} {unitInPrint(unit)}
        </text>
        {limitAt !== null && (
          <>
            <path d={`M${limitAt} -3V11`} stroke={look.ink} strokeWidth={1.5} />
            <text x={limitAt} y={-6} textAnchor="middle">
              {now.mark!.says}
            </text>
            {WIDTH - limitAt > 48 && (
              <text x={limitAt} y={20} textAnchor="middle">
                {mark(now.mark!.at)}
              </text>
            )}
          </>
        )}
      </svg>
      <figcaption>{now.says}</figcaption>
    </figure>
  );
}
