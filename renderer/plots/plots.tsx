import { useEffect, useReducer, useState } from 'react';
import { inUnit } from '../../solver/chip/units.ts';
import { unitInPrint } from '../../solver/chip/units-format.ts';
import { ChoiceField } from '../card/text-field.tsx';
import { onTheme, plainPalette } from '../look/theme.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { placeName } from '../verdict/answer.ts';
import { plusMinus } from '../words/band.ts';
import { figure, unitFor } from '../words/figure.ts';
import { Plot } from './plot.tsx';
import { legsOf, limitAlong, peaksAlong, profileOf, routeEnds } from './route.ts';
import { splitBars } from './split-bars.ts';
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
      <SplitPlot />
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
  const look = plainPalette();
  const longest = profile.along.at(-1) ?? 0;
  const length = unitFor(longest, 'length');
  const pressure = unitFor(Math.max(0, ...profile.pressure.map((value) => Math.abs(value ?? 0))), 'pressure');
  const peaks = peaksAlong(result, legs);
  const peak = Math.max(0, ...profile.shear.map((value) => value ?? 0), ...peaks.map(({ shear }) => shear));
  const stress = unitFor(peak, 'stress');
  const peakBand = [...legs, ...peaks].find(({ shear }) => shear === peak)?.band;
  const along = profile.along.map((value) => inUnit(value, length));
  const across = `from ${from}, ${unitInPrint(length)}`;
  const limit = limitAlong(chip.limits, legs, from, to);
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
        title={
          peaks.length > 0
            ? 'Wall shear along the route, peaks in junctions as rings'
            : 'Wall shear along the route'
        }
        across={across}
        up={unitInPrint(stress)}
        says={`Wall shear at most ${figure(peak, 'stress', { digits: 3 })}${plusMinus(peakBand)}${limit ? `, the limit is ${figure(limit.shear, 'stress', { digits: 3 })}` : ''}.`}
        limits={
          limit
            ? [
                {
                  at: inUnit(limit.shear, stress),
                  says: `limit ${figure(limit.shear, 'stress', { digits: 3 })}`,
                  missed: peak > limit.shear,
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
            customdata: profile.bands.map(plusMinus),
            line: { color: look.ink, width: 1.5 },
            hovertemplate: '%{text}: %{y:.4g}%{customdata}<extra></extra>',
          },
          {
            type: 'scatter',
            mode: 'markers',
            x: peaks.map(({ at }) => inUnit(at, length)),
            y: peaks.map(({ shear }) => inUnit(shear, stress)),
            customdata: peaks.map(({ band }) => plusMinus(band)),
            error_y: {
              type: 'data',
              array: peaks.map(({ shear, band }) => inUnit(shear * (band ?? 0), stress)),
              color: look.soft,
              thickness: 1,
              width: 3,
            },
            text: peaks.map(({ name }) => placeName(name)),
            marker: {
              size: 7,
              color: look.card,
              line: {
                width: 1.5,
                color: peaks.map(({ shear }) => (limit && shear > limit.shear ? look.alarm : look.ink)),
              },
            },
            hovertemplate: 'peak in %{text}: %{y:.4g}%{customdata}<extra></extra>',
          },
        ]}
      />
    </section>
  );
}

/** px: the marks of what is wanted, across their bars, where one stands alone and together. */
const WANTED = 24;
const ALL_WANTED = 110;
const MOST_BARS = 40;

function SplitPlot() {
  const { desk } = usePage();
  const { chip, result } = useStore(desk.solver.solved);
  const [all, setAll] = useState(false);
  if (!chip || !result) return null;
  const { kind, bars } = splitBars(chip, result);
  if (bars.length === 0) return null;
  const look = plainPalette();
  const rows = all ? bars : bars.slice(0, MOST_BARS);
  const unit =
    kind === 'share'
      ? '%'
      : unitFor(Math.max(...rows.map(({ got, wanted }) => Math.max(got ?? 0, wanted ?? 0))), kind);
  const names = rows.map(({ name }) => name);
  const asked = rows.filter((row) => row.wanted !== null);
  const told = (value: number | null): string => figure(value, kind, { unit, digits: 3 });
  return (
    <section aria-label="How it splits">
      <Plot
        title={
          asked.length > 0
            ? 'How the flow splits, what is wanted, and how far off it may be'
            : 'How the flow splits'
        }
        across=""
        up={unitInPrint(unit)}
        says={rows
          .map(
            ({ name, got, band, wanted }) =>
              `${name} ${told(got)}${plusMinus(band)}${wanted === null ? '' : `, ${told(wanted)} wanted`}`,
          )
          .join('; ')}
        more={{
          yaxis: {
            rangemode: 'tozero',
            automargin: true,
            gridcolor: look.line,
            title: { text: unitInPrint(unit) },
          },
        }}
        data={[
          {
            type: 'bar',
            x: names,
            y: rows.map(({ got }) => (got === null ? null : inUnit(got, unit))),
            customdata: rows.map(({ band }) => plusMinus(band)),
            width: 0.5,
            marker: {
              color: rows.map(({ met }) => (met ? look.field : look.alarm)),
              line: { color: rows.map(({ met }) => (met ? look.ink : look.alarm)), width: 1 },
            },
            hovertemplate: '%{x}: %{y:.4g}%{customdata}<extra></extra>',
          },
          {
            type: 'scatter',
            mode: 'markers',
            x: asked.map(({ name }) => name),
            y: asked.map(({ wanted }) => inUnit(wanted!, unit)),
            error_y: {
              type: 'data',
              array: asked.map(({ wanted, within }) => inUnit(wanted! * within, unit)),
              color: look.ink,
              thickness: 1.5,
              width: 5,
            },
            marker: {
              symbol: 'line-ew',
              size: Math.max(5, Math.min(WANTED, ALL_WANTED / rows.length)),
              color: look.ink,
              line: { color: look.ink, width: 1.5 },
            },
            hovertemplate: '%{x}: %{y:.4g} wanted<extra></extra>',
          },
        ]}
      />
      {bars.length > MOST_BARS && (
        <button type="button" className="quiet" onClick={() => setAll(!all)}>
          {all ? `Only the first ${MOST_BARS}` : `All ${bars.length}`}
        </button>
      )}
    </section>
  );
}

function TargetPlot() {
  const { desk } = usePage();
  const { targets } = useStore(desk.solver.solved).result!;
  const chip = useStore(desk.project)!.document.chip;
  const [all, setAll] = useState(false);
  if (targets.length === 0) return <p className="soft">No target is given, so no shares are compared.</p>;
  const look = plainPalette();
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
        says={names
          .map(
            (name, i) => `${name} ${off[i]?.toFixed(2) ?? 'not known'} %${plusMinus(shownTargets[i]!.band)}`,
          )
          .join(', ')}
        limits={[
          { at: within, says: 'allowed', missed: targets.some((target) => !target.met) },
          { at: -within, says: '', missed: targets.some((target) => !target.met) },
        ]}
        data={[
          {
            type: 'bar',
            x: names,
            y: off,
            customdata: shownTargets.map(({ band }) => plusMinus(band)),
            error_y: {
              type: 'data',
              array: shownTargets.map(({ got, wanted, band }) => (100 * (got ?? 0) * (band ?? 0)) / wanted),
              color: look.soft,
              thickness: 1,
              width: 3,
            },
            width: 0.5,
            marker: { color: shownTargets.map((target) => (target.met ? look.ink : look.alarm)) },
            hovertemplate: '%{x}: %{y:.3g} %%{customdata}<extra></extra>',
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
