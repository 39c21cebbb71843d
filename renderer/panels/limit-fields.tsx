import type { Limit } from '../../solver/chip/chip.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField, TextField } from '../card/text-field.tsx';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { figure } from '../words/figure.ts';

/** What cells bear. A computed pass is no evidence that they live: that is said here, where it is decided. */
export function LimitFields() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const set = (label: string, limits: readonly Limit[]): string | null =>
    desk.attempt({ label, set: { limits } });
  const add = (): void => {
    let n = 1;
    const nameOf = (): string => (n === 1 ? 'cells' : `cells ${n}`);
    while (chip.limits.some((limit) => limit.name === nameOf())) n += 1;
    set('add a limit', [...chip.limits, { name: nameOf(), shear: 1.5 }]);
  };
  const places: readonly (readonly [string, string])[] = [
    ['', 'the whole chip'],
    ...chip.chambers.map((part) => [part.id, part.id] as const),
    ...chip.channels.slice(0, 500).map((part) => [part.id, part.id] as const),
  ];
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
          <fieldset key={limit.name} className="fields">
            <legend>{limit.name}</legend>
            <TextField
              label="Name"
              value={limit.name}
              onAccept={(name) => (name ? put({ ...limit, name }) : 'A limit needs a name.')}
            />
            {'shear' in limit ? (
              <QuantityField
                label="Wall shear at most"
                value={limit.shear}
                kind="stress"
                unit="Pa"
                onAccept={(shear) => put({ ...limit, shear })}
              />
            ) : 'floor' in limit ? (
              <>
                <QuantityField
                  label="Floor at least"
                  value={limit.floor[0]}
                  kind="stress"
                  unit="Pa"
                  onAccept={(low) => put({ ...limit, floor: [low, limit.floor[1]] })}
                />
                <QuantityField
                  label="Floor at most"
                  value={limit.floor[1]}
                  kind="stress"
                  unit="Pa"
                  onAccept={(high) => put({ ...limit, floor: [limit.floor[0], high] })}
                />
                <QuantityField
                  label="On this much of it"
                  value={limit.area}
                  kind="share"
                  unit="%"
                  onAccept={(area) => put({ ...limit, area })}
                />
              </>
            ) : (
              <p className="soft">{'curve' in limit ? curveWords(limit.curve) : lawWords(limit)}</p>
            )}
            {typeof limit.where !== 'object' && (
              <ChoiceField
                label="Holds in"
                value={limit.where ?? ''}
                choices={places}
                onAccept={(where) => {
                  const { where: _, ...rest } = limit;
                  put(where === '' ? (rest as Limit) : ({ ...rest, where } as Limit));
                }}
              />
            )}
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
      <button type="button" className="quiet" onClick={add}>
        Add a limit
      </button>
      <p className="soft small">
        Limits differ by cell, medium, passage, exposure and temperature. A computed pass is not evidence that
        cells live: confirm it with your own.
      </p>
    </section>
  );
}

const curveWords = (curve: readonly (readonly [number, number])[]): string =>
  `A stress for a time: ${curve.map(([time, stress]) => `${figure(stress, 'stress', { digits: 3 })} for ${figure(time, 'time', { digits: 2 })}`).join(', ')}.`;

const lawWords = (limit: Extract<Limit, { law: unknown }>): string =>
  `A damage law: ${limit.law.constant} τ^${limit.law.stress} t^${limit.law.time}, at most ${figure(limit.damage, 'share', { unit: '%', digits: 2 })} in ${limit.passes} ${limit.passes === 1 ? 'pass' : 'passes'}.`;
