import type { Chip } from '../../solver/chip/chip.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import type { Whole } from '../tools/tool.ts';

/** How the chip is run: how long, and what it bears. */
export function RunningFields({
  chip,
  onSet,
}: {
  readonly chip: Chip;
  readonly onSet: (label: string, whole: Whole) => string | null;
}) {
  return (
    <section aria-label="Running" className="fields">
      <h3>Running</h3>
      <QuantityField
        label="The assay takes"
        value={chip.assay?.time ?? null}
        kind="time"
        unit="min"
        onAccept={(time) => onSet('set the time of the assay', { assay: { time } })}
        onEmpty={() => onSet('leave the time of the assay open', { assay: null })}
      />
      <QuantityField
        label="Chip and fittings bear"
        value={chip.rating?.pressure ?? null}
        kind="pressure"
        unit="kPa"
        onAccept={(pressure) => onSet('set what the chip bears', { rating: { pressure } })}
        onEmpty={() => onSet('leave open what the chip bears', { rating: null })}
      />
      <p className="soft small">
        Pressurised glass, tubing and fittings can burst: respect their ratings and wear eye protection.
      </p>
    </section>
  );
}
