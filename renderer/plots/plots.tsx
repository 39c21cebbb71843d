import { useEffect, useReducer, useState } from 'react';
import { inUnit } from '../../solver/chip/units.ts';
import { unitInPrint } from '../../solver/chip/units-format.ts';
import { ChoiceField } from '../card/text-field.tsx';
import { onTheme, palette } from '../look/theme.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { figure, unitFor } from '../words/figure.ts';
import { Plot } from './plot.tsx';
import { legsOf, profileOf, routeEnds } from './route.ts';
import { SweepPlots } from './sweep.tsx';

/** Pressure and shear along a route, shares against targets, and a sweep. */
export default function Plots() {
  const { desk } = usePage();
  const { result } = useStore(desk.solver.solved);
  // Lines are in the colours of the scheme: drawn anew when it changes.
  const [, again] = useReducer((n: number) => n + 1, 0);
  useEffect(() => onTheme(again), []);
  if (!result) return <p className="soft">Plots come with the first answer.</p>;
  return (
    <>
      <RoutePlots />
      <TargetPlot />
      <SweepPlots />
    </>
  );
}

function RoutePlots() {
  const { desk } = usePage();
  const result = useStore(desk.solver.solved).result!;
  const chip = useStore(desk.project)!.document.chip;
  const chosen = useStore(desk.view, (view) => view.route);
  const ends = routeEnds(result);
  const names = ends.map(({ from, to }) => `route:${from}>${to}`);
  const route = names.includes(chosen) ? chosen : names[0];
  if (!route) return <p className="soft">Nothing flows from one port to another.</p>;
  const { from, to } = ends[names.indexOf(route)]!;
  const legs = legsOf(result, from, to);
  const profile = profileOf(result, legs);
  const look = palette();
  const longest = profile.along.at(-1) ?? 0;
  const length = unitFor(longest, 'length');
  const pressure = unitFor(Math.max(0, ...profile.pressure.map((value) => Math.abs(value ?? 0))), 'pressure');
  const stress = unitFor(Math.max(0, ...profile.shear.map((value) => value ?? 0)), 'stress');
  const along = profile.along.map((value) => inUnit(value, length));
  const across = `from ${from}, ${unitInPrint(length)}`;
  const limit = chip.limits.find((entry) => 'shear' in entry && entry.where === undefined);
  const peak = Math.max(...profile.shear.map((value) => value ?? 0));
  return (
    <section aria-label="Along a route">
      <div className="fields">
        <ChoiceField
          label="Route"
          value={route}
          choices={names.map((name, i) => [name, `${ends[i]!.from} to ${ends[i]!.to}`] as const)}
          onAccept={(next) => desk.view.patch({ route: next })}
        />
      </div>
      <Plot
        title="Pressure along the route"
        across={across}
        up={unitInPrint(pressure)}
        says={`Pressure from ${figure(profile.pressure[0], 'pressure')} at ${from} to ${figure(profile.pressure.at(-1), 'pressure')} at ${to}, over ${figure(longest, 'length')}.`}
        data={[
          {
            type: 'scatter',
            mode: 'lines',
            x: along,
            y: profile.pressure.map((value) => (value === null ? null : inUnit(value, pressure))),
            text: profile.names,
            line: { color: look.ink, width: 1.5 },
            hovertemplate: '%{text}: %{y:.4g}<extra></extra>',
          },
        ]}
      />
      <Plot
        title="Wall shear along the route"
        across={across}
        up={unitInPrint(stress)}
        says={`Wall shear at most ${figure(peak, 'stress', { digits: 3 })}${limit && 'shear' in limit ? `, the limit is ${figure(limit.shear, 'stress', { digits: 3 })}` : ''}.`}
        limits={
          limit && 'shear' in limit
            ? [
                {
                  at: inUnit(limit.shear, stress),
                  says: `limit ${figure(limit.shear, 'stress', { digits: 3 })}`,
                },
              ]
            : []
        }
        more={{
          yaxis: {
            rangemode: 'tozero',
            automargin: true,
            gridcolor: look.line,
            title: { text: unitInPrint(stress) },
          },
        }}
        data={[
          {
            type: 'scatter',
            mode: 'lines',
            x: along,
            y: profile.shear.map((value) => (value === null ? null : inUnit(value, stress))),
            text: profile.names,
            line: { color: look.ink, width: 1.5 },
            hovertemplate: '%{text}: %{y:.4g}<extra></extra>',
          },
        ]}
      />
    </section>
  );
}

function TargetPlot() {
  const { desk } = usePage();
  const { targets } = useStore(desk.solver.solved).result!;
  const chip = useStore(desk.project)!.document.chip;
  const [all, setAll] = useState(false);
  if (targets.length === 0) return <p className="soft">No target is given, so no shares are compared.</p>;
  const look = palette();
  const shownTargets = all ? targets : targets.slice(0, 40);
  const names = shownTargets.map((target) => target.port ?? target.channel ?? '');
  const off = shownTargets.map((target) =>
    target.got === null ? null : 100 * (target.got / target.wanted - 1),
  );
  const within = 100 * Math.max(...chip.targets.map((target) => target.within));
  return (
    <section aria-label="Targets">
      <Plot
        title="Off target"
        across=""
        up="%"
        says={names.map((name, i) => `${name} ${off[i]?.toFixed(2) ?? 'not known'} %`).join(', ')}
        limits={[
          { at: within, says: 'allowed' },
          { at: -within, says: '' },
        ]}
        data={[
          {
            type: 'bar',
            x: names,
            y: off,
            marker: { color: shownTargets.map((target) => (target.met ? look.ink : look.alarm)) },
            hovertemplate: '%{x}: %{y:.3g} %<extra></extra>',
          },
        ]}
      />
      {targets.length > 40 && (
        <button type="button" className="quiet" onClick={() => setAll(!all)}>
          {all ? 'Only the first 40' : `All ${targets.length}`}
        </button>
      )}
    </section>
  );
}
