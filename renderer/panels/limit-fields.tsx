import type { Limit } from '../../solver/chip/chip.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { TextField } from '../card/text-field.tsx';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { LimitKindFields } from './limit-kind.tsx';
import { LimitPlaceField } from './limit-place.tsx';
import { ReferenceLimits } from './reference-limits.tsx';

/** What cells bear. A computed pass is no evidence that they live: that is said here, where it is decided. */
export function LimitFields() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const set = (label: string, limits: readonly Limit[]): string | null =>
    desk.attempt({ label, set: { limits } });
  const free = (stem: string): string => {
    for (let n = 1; ; n += 1) {
      const name = n === 1 ? stem : `${stem} ${n}`;
      if (!chip.limits.some((limit) => limit.name === name)) return name;
    }
  };
  const add = (limit: Limit): string | null => {
    const why = set('add a limit', [...chip.limits, { ...limit, name: free(limit.name) }]);
    if (why) desk.say(why);
    return why;
  };
  return (
    <section aria-label="Limits">
      <h3>What the cells bear</h3>
      {chip.limits.map((limit, i) => {
        const put = (next: Limit): string | null =>
          set(
            `change the limit ${limit.name}`,
            chip.limits.map((old, k) => (k === i ? next : old)),
          );
        return (
          // biome-ignore lint/suspicious/noArrayIndexKey: names change while they are typed, places do not
          <fieldset key={i} className="fields">
            <legend>{limit.name}</legend>
            <TextField
              label="Name"
              value={limit.name}
              onAccept={(name) => (name ? put({ ...limit, name }) : 'A limit needs a name.')}
            />
            <LimitKindFields limit={limit} onLimit={put} />
            <LimitPlaceField limit={limit} chip={chip} onLimit={put} />
            <QuantityField
              label="Diameter of the cells"
              value={limit.cellDiameter ?? null}
              kind="length"
              unit="um"
              onAccept={(cellDiameter) => put({ ...limit, cellDiameter })}
              onEmpty={() => {
                const { cellDiameter: _, ...rest } = limit;
                return put(rest as Limit);
              }}
            />
            <button
              type="button"
              className="quiet"
              onClick={() =>
                set(
                  `take the limit ${limit.name} away`,
                  chip.limits.filter((_, k) => k !== i),
                )
              }
            >
              Take it away
            </button>
          </fieldset>
        );
      })}
      <button type="button" className="quiet" onClick={() => add({ name: 'cells', shear: 1.5 })}>
        Add a limit
      </button>
      <ReferenceLimits onAdd={add} />
      <p className="soft small">
        Limits differ by cell, medium, passage, exposure and temperature. A computed pass is not evidence that
        cells live: confirm it with your own. Not for diagnosis or treatment.
      </p>
    </section>
  );
}
