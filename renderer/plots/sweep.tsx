import { useEffect, useMemo, useRef, useState } from 'react';
import type { Chip } from '../../solver/chip/chip.ts';
import { inUnit, type Kind } from '../../solver/chip/units.ts';
import { unitInPrint } from '../../solver/chip/units-format.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';
import { toEdit } from '../edits/to-edit.ts';
import { plainPalette } from '../look/theme.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import type { Alteration } from '../tools/tool.ts';
import { figure, unitFor } from '../words/figure.ts';
import { Plot } from './plot.tsx';
import { allAnswers, answersOf, type Swept } from './sweep-answers.ts';
import { AnswersStrip } from './sweep-strip.tsx';

const STEPS = 25;

interface Handle {
  readonly id: string;
  readonly says: string;
  readonly kind: Kind;
  readonly now: number;
  readonly at: (value: number) => Alteration;
}

/** Everything one number of which can be swept: each drive, each layer's depth, the width of what is chosen. */
function handles(chip: Chip, selection: readonly string[]): readonly Handle[] {
  const out: Handle[] = [];
  for (const port of chip.ports) {
    const { drive } = port;
    if (drive.kind === 'closed' || (drive.kind === 'pressure' && drive.pressure === 0)) continue;
    const kind: Kind = drive.kind === 'flow' ? 'flow' : drive.kind === 'head' ? 'length' : 'pressure';
    const now = drive.kind === 'flow' ? drive.flow : drive.kind === 'head' ? drive.head : drive.pressure;
    out.push({
      id: `drive ${port.id}`,
      says: `${kind === 'length' ? 'height' : kind} at ${port.id}`,
      kind,
      now,
      at: (value) => ({
        label: 'sweep',
        put: [
          {
            kind: 'port',
            value: {
              ...port,
              drive:
                drive.kind === 'flow'
                  ? { kind: 'flow', flow: value }
                  : drive.kind === 'head'
                    ? { kind: 'head', head: value }
                    : { kind: 'pressure', pressure: value },
            },
          },
        ],
      }),
    });
  }
  for (const layer of chip.layers)
    out.push({
      id: `depth ${layer.id}`,
      says: `depth of layer ${layer.id}`,
      kind: 'length',
      now: layer.depth / 1e9,
      at: (value) => ({
        label: 'sweep',
        set: {
          layers: chip.layers.map((old) =>
            old === layer ? { ...old, depth: Math.round(value * 1e9) } : old,
          ),
        },
      }),
    });
  for (const channel of chip.channels.filter((part) => selection.includes(`channel:${part.id}`)).slice(0, 20))
    out.push({
      id: `width ${channel.id}`,
      says: `width of ${channel.id}`,
      kind: 'length',
      now: channel.width[0] / 1e9,
      at: (value) => {
        const nm = Math.round(value * 1e9);
        return { label: 'sweep', put: [{ kind: 'channel', value: { ...channel, width: [nm, nm] } }] };
      },
    });
  return out;
}

/** What if one number ran from here to there: every answer beside it. */
export function SweepPlots() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const selection = useStore(desk.view, (view) => view.selection);
  const all = useMemo(() => handles(chip, selection), [chip, selection]);
  const [id, setId] = useState('');
  const [range, setRange] = useState<readonly [number, number] | null>(null);
  const [points, setPoints] = useState<readonly Swept[]>([]);
  const stop = useRef<() => void>(() => undefined);
  useEffect(() => () => stop.current(), []);
  const handle = all.find((found) => found.id === id) ?? all[0];
  if (!handle) return <p className="soft">Nothing here can be swept: no port is driven.</p>;
  const [from, to] = range ?? [handle.now / 2, handle.now * 2];
  const run = (): void => {
    stop.current();
    setPoints([]);
    const xs = Array.from({ length: STEPS }, (_, i) => from + ((to - from) * i) / (STEPS - 1));
    const edits = xs.map((x) => toEdit(chip, handle.at(x)));
    stop.current = desk.solver.sweep(edits, (index, outcome) =>
      setPoints((before) => [
        ...before,
        { x: xs[index]!, outcome, answers: allAnswers(chip, edits[index]!, outcome) },
      ]),
    );
  };
  const unit = unitFor(Math.max(Math.abs(from), Math.abs(to)), handle.kind);
  const look = plainPalette();
  const across = `${handle.says}, ${unitInPrint(unit)}`;
  const answers = points.map((point) => ({ x: inUnit(point.x, unit), ...answersOf(point.outcome) }));
  const plots = [
    { title: 'Worst off target', up: '%', pick: 'off', kind: 'share', limit: null },
    { title: 'Peak wall shear', up: '', pick: 'shear', kind: 'stress', limit: lowestShear(chip) },
    { title: 'Pressure needed', up: '', pick: 'pressure', kind: 'pressure', limit: null },
  ] as const;
  return (
    <section aria-label="Sweep">
      <h3>What if</h3>
      <div className="fields">
        <ChoiceField
          label="Sweep the"
          value={handle.id}
          choices={all.map((found) => [found.id, found.says] as const)}
          onAccept={(next) => {
            setId(next);
            setRange(null);
            setPoints([]);
          }}
        />
        <QuantityField
          label="from"
          value={from}
          kind={handle.kind}
          unit={unit}
          onAccept={(value) => {
            setRange([value, to]);
            return null;
          }}
        />
        <QuantityField
          label="to"
          value={to}
          kind={handle.kind}
          unit={unit}
          onAccept={(value) => {
            setRange([from, value]);
            return null;
          }}
        />
        <button type="button" className="strong-button" onClick={run}>
          Sweep
        </button>
        {points.length > 0 && points.length < STEPS && (
          <p className="soft" role="status">
            {points.length} of {STEPS} solved
          </p>
        )}
      </div>
      {points.length > 1 && (
        <AnswersStrip
          points={points}
          from={from}
          to={to}
          says={(value) => figure(value, handle.kind, { unit, digits: 3 })}
        />
      )}
      {points.length > 1 &&
        plots.map(({ title, pick, kind, limit }) => {
          const values = answers.map((answer) => answer[pick]);
          const known = values.filter((value) => value !== null);
          if (known.length === 0) return null;
          const own = kind === 'share' ? '%' : unitFor(Math.max(...known), kind);
          return (
            <Plot
              key={pick}
              title={title}
              across={across}
              up={unitInPrint(own)}
              says={`${title} from ${inUnit(known[0]!, own).toPrecision(3)} to ${inUnit(known.at(-1)!, own).toPrecision(3)} ${unitInPrint(own)}`}
              limits={
                limit === null
                  ? []
                  : [{ at: inUnit(limit, own), says: 'limit', missed: known.some((value) => value > limit) }]
              }
              data={[
                {
                  type: 'scatter',
                  mode: 'lines+markers',
                  x: answers.map((answer) => answer.x),
                  y: values.map((value) => (value === null ? null : inUnit(value, own))),
                  line: { color: look.ink, width: 1.5 },
                  marker: { size: 4 },
                  error_y: {
                    type: 'data',
                    array: answers.map((answer) => inUnit(answer.bands?.[pick] ?? 0, own)),
                    color: look.soft,
                    thickness: 1,
                    width: 2,
                  },
                  hovertemplate: '%{x:.4g}: %{y:.4g}<extra></extra>',
                },
              ]}
            />
          );
        })}
    </section>
  );
}

function lowestShear(chip: Chip): number | null {
  const limits = chip.limits.flatMap((limit) =>
    'shear' in limit && limit.where === undefined ? [limit.shear] : [],
  );
  return limits.length > 0 ? Math.min(...limits) : null;
}
