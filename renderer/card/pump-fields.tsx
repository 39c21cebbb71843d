import type { Pump, Reservoir } from '../../solver/chip/running.ts';
import type { Kind } from '../../solver/chip/units.ts';
import { QuantityField } from './quantity-field.tsx';

const PUMP: readonly (readonly [keyof Pump, string, Kind, string])[] = [
  ['pressure', 'Pressure at most', 'pressure', 'kPa'],
  ['flow', 'Flow at most', 'flow', 'uL/min'],
  ['bore', 'Bore of its syringe', 'length', 'mm'],
  ['volume', 'It holds', 'volume', 'mL'],
];

/** What the pump at a port can do; what is left empty is not judged. */
export function PumpFields({
  pump,
  onPump,
}: {
  readonly pump: Pump | undefined;
  readonly onPump: (pump: Pump | null) => string | null;
}) {
  const put = (next: Pump): string | null => onPump(Object.keys(next).length > 0 ? next : null);
  return (
    <details className="more" open={pump !== undefined}>
      <summary>Pump</summary>
      <section aria-label="Pump" className="fields">
        {PUMP.map(([key, label, kind, unit]) => (
          <QuantityField
            key={key}
            label={label}
            value={pump?.[key] ?? null}
            kind={kind}
            unit={unit}
            onAccept={(value) => put({ ...pump, [key]: value })}
            onEmpty={() => {
              const { [key]: _, ...rest } = pump ?? {};
              return put(rest);
            }}
          />
        ))}
        <p className="soft small">
          Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection.
        </p>
      </section>
    </details>
  );
}

/** m: what a vessel is given first. */
const FIRST_BORE = 0.02;

/** The vessel that a port draws from or fills: its level moves with what flows. */
export function ReservoirFields({
  reservoir,
  onReservoir,
}: {
  readonly reservoir: Reservoir | undefined;
  readonly onReservoir: (reservoir: Reservoir | null) => string | null;
}) {
  if (!reservoir)
    return (
      <p>
        <button type="button" className="quiet" onClick={() => onReservoir({ bore: FIRST_BORE })}>
          Give it a vessel
        </button>
      </p>
    );
  const held = reservoir.volume === undefined ? {} : { volume: reservoir.volume };
  return (
    <section aria-label="Vessel" className="fields">
      <h3>Vessel</h3>
      <QuantityField
        label="Bore"
        value={reservoir.bore ?? null}
        kind="length"
        unit="mm"
        onAccept={(bore) => onReservoir({ ...held, bore })}
        onEmpty={() => 'A vessel has a bore or the area of its surface: type the area instead.'}
      />
      <QuantityField
        label="Area of its surface"
        value={reservoir.area ?? null}
        kind="area"
        unit="mm^2"
        onAccept={(area) => onReservoir({ ...held, area })}
        onEmpty={() => 'A vessel has a bore or the area of its surface: type the bore instead.'}
      />
      <QuantityField
        label="It holds"
        value={reservoir.volume ?? null}
        kind="volume"
        unit="mL"
        onAccept={(volume) => onReservoir({ ...reservoir, volume })}
        onEmpty={() => {
          const { volume: _, ...rest } = reservoir;
          return onReservoir(rest);
        }}
      />
      <button type="button" className="quiet" onClick={() => onReservoir(null)}>
        Take the vessel away
      </button>
    </section>
  );
}
