import type { Drive, Port } from '../../solver/chip/chip.ts';
import type { Pump, Reservoir } from '../../solver/chip/running.ts';
import { usePage } from '../page/context.tsx';
import { useResult } from '../state/live.ts';
import { useStore } from '../state/store.ts';
import { plusMinus } from '../words/band.ts';
import { figure, lengthFigure } from '../words/figure.ts';
import { DriveFields } from './drive-fields.tsx';
import { PartName } from './part-name.tsx';
import { PlaceFields } from './place-fields.tsx';
import { PlaceFindings } from './place-findings.tsx';
import { PumpFields, ReservoirFields } from './pump-fields.tsx';
import { QuantityField } from './quantity-field.tsx';
import { TargetFields } from './target-fields.tsx';
import { ChoiceField, Figure } from './text-field.tsx';

/** One port: its drive, its hole, its tubing, what it carries. */
export function PortCard({ port }: { readonly port: Port }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const { result } = useResult(desk);
  const solved = result?.ports.find((found) => found.id === port.id);
  const put = (change: Partial<Port>, label: string): string | null =>
    desk.attempt({ label, put: [{ kind: 'port', value: { ...port, ...change } }] });
  /** A part with some of its fields left out, where they are null. */
  const replace = (
    change: { readonly pump?: Pump | null; readonly reservoir?: Reservoir | null },
    label: string,
  ) => {
    const value: { -readonly [K in keyof Port]: Port[K] } = { ...port };
    for (const key of ['pump', 'reservoir'] as const) {
      if (change[key] === undefined) continue;
      if (change[key] === null) delete value[key];
      else Object.assign(value, { [key]: change[key] });
    }
    return desk.attempt({ label, put: [{ kind: 'port', value }] });
  };
  const drive = (next: Drive): string | null => put({ drive: next }, `set the drive of ${port.id}`);
  return (
    <>
      <h2>{port.id}</h2>
      <p className="soft">
        port at {lengthFigure(port.at[0])}, {lengthFigure(port.at[1])} · layer {port.layer}
      </p>
      <div className="fields">
        <DriveFields drives={[port.drive]} onDrive={drive} />
        <PlaceFields part={{ kind: 'port', value: port }} />
        <QuantityField
          label="Hole"
          value={port.diameter / 1e9}
          kind="length"
          unit="um"
          onAccept={(value) => put({ diameter: Math.round(value * 1e9) }, `set the hole of ${port.id}`)}
        />
        {port.tubing.map((tube, i) => (
          <fieldset key={`${tube.bore} ${tube.length} ${port.tubing.indexOf(tube)}`} className="fields">
            <legend>Tubing{port.tubing.length > 1 ? ` ${i + 1}` : ''}</legend>
            <QuantityField
              label="Bore"
              value={tube.bore}
              kind="length"
              unit="mm"
              onAccept={(bore) =>
                put(
                  { tubing: port.tubing.map((t, k) => (k === i ? { ...t, bore } : t)) },
                  `set the tubing of ${port.id}`,
                )
              }
            />
            <QuantityField
              label="Its length"
              value={tube.length}
              kind="length"
              unit="mm"
              onAccept={(length) =>
                put(
                  { tubing: port.tubing.map((t, k) => (k === i ? { ...t, length } : t)) },
                  `set the tubing of ${port.id}`,
                )
              }
            />
            <button
              type="button"
              className="quiet"
              onClick={() =>
                put({ tubing: port.tubing.filter((_, k) => k !== i) }, `take tubing off ${port.id}`)
              }
            >
              Take this tubing off
            </button>
          </fieldset>
        ))}
        <button
          type="button"
          className="quiet"
          onClick={() =>
            put({ tubing: [...port.tubing, { bore: 0.5e-3, length: 0.3 }] }, `put tubing on ${port.id}`)
          }
        >
          {port.tubing.length > 0 ? 'Put more tubing on' : 'Put tubing on'}
        </button>
        {chip.layers.length > 1 && (
          <ChoiceField
            label="Layer"
            value={port.layer}
            choices={chip.layers.map((found) => [found.id, found.id])}
            onAccept={(layer) => put({ layer }, `move ${port.id} to layer ${layer}`)}
          />
        )}
        <PartName kind="port" id={port.id} />
      </div>
      <PumpFields pump={port.pump} onPump={(pump) => replace({ pump }, `set the pump of ${port.id}`)} />
      <ReservoirFields
        reservoir={port.reservoir}
        onReservoir={(reservoir) => replace({ reservoir }, `set the reservoir of ${port.id}`)}
      />
      <dl className="fields">
        {solved ? (
          <>
            <Figure label="Pressure at the chip" figure={figure(solved.pressure, 'pressure')} />
            <Figure
              label="Flow into the chip"
              figure={`${figure(solved.flow, 'flow')}${plusMinus(solved.band?.flow)}`}
            />
            <Figure
              label="Share of all"
              figure={`${figure(solved.share, 'share', { unit: '%' })}${plusMinus(solved.band?.share)}`}
            />
          </>
        ) : (
          <p className="soft">Its flow comes with the first answer.</p>
        )}
      </dl>
      {port.drive.kind !== 'closed' && <TargetFields of={{ port: port.id }} />}
      <PlaceFindings ids={[port.id]} />
    </>
  );
}
