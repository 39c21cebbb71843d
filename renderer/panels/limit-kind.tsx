import type { Limit, LimitPlace } from '../../solver/chip/chip.ts';
import { mixedLaw, REFERENCE_LAWS, referenceOf } from '../../solver/exposure/reference-limits.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { RowsField } from '../card/rows-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';

const KINDS = [
  ['shear', 'a stress never passed'],
  ['curve', 'a stress for a time'],
  ['law', 'a published law of damage'],
  ['floor', 'a stress the floor must feel'],
] as const;
type LimitKind = (typeof KINDS)[number][0];

const kindOf = (limit: Limit): LimitKind =>
  'shear' in limit ? 'shear' : 'floor' in limit ? 'floor' : 'curve' in limit ? 'curve' : 'law';

/** Numbers of a kind to begin with, to be typed over. */
function firstOf(kind: LimitKind, { name, where, cellDiameter }: LimitPlace): Limit {
  const place: LimitPlace = {
    name,
    ...(where !== undefined && { where }),
    ...(cellDiameter !== undefined && { cellDiameter }),
  };
  switch (kind) {
    case 'shear':
      return { ...place, shear: 1.5 };
    case 'floor':
      return { ...place, floor: [0.05, 0.5], area: 0.9 };
    case 'curve':
      return { ...place, curve: [[60, 1.5]] };
    default:
      return { ...place, law: REFERENCE_LAWS[0]!.law, damage: 0.01, passes: 1 };
  }
}

const OWN = 'own';

/** What a limit says: which kind it is, and its numbers. */
export function LimitKindFields({
  limit,
  onLimit,
}: {
  readonly limit: Limit;
  readonly onLimit: (limit: Limit) => string | null;
}) {
  return (
    <>
      <ChoiceField
        label="Given as"
        value={kindOf(limit)}
        choices={KINDS}
        onAccept={(kind) => onLimit(firstOf(kind, limit))}
      />
      {'shear' in limit && (
        <QuantityField
          label="Wall shear at most"
          value={limit.shear}
          kind="stress"
          unit="Pa"
          onAccept={(shear) => onLimit({ ...limit, shear })}
        />
      )}
      {'floor' in limit && (
        <>
          <QuantityField
            label="Floor at least"
            value={limit.floor[0]}
            kind="stress"
            unit="Pa"
            onAccept={(low) => onLimit({ ...limit, floor: [low, limit.floor[1]] })}
          />
          <QuantityField
            label="Floor at most"
            value={limit.floor[1]}
            kind="stress"
            unit="Pa"
            onAccept={(high) => onLimit({ ...limit, floor: [limit.floor[0], high] })}
          />
          <QuantityField
            label="On this much of it"
            value={limit.area}
            kind="share"
            unit="%"
            onAccept={(area) => onLimit({ ...limit, area })}
          />
        </>
      )}
      {'curve' in limit && (
        <RowsField
          label="Time and stress borne, one pair a line"
          columns={[
            { name: 'time', kind: 'time', unit: 's' },
            { name: 'stress', kind: 'stress', unit: 'Pa' },
          ]}
          rows={limit.curve}
          onAccept={(rows) =>
            onLimit({ ...limit, curve: rows.map(([time, stress]) => [time!, stress!] as const) })
          }
        />
      )}
      {'law' in limit && <LawFields limit={limit} onLimit={onLimit} />}
    </>
  );
}

function LawFields({
  limit,
  onLimit,
}: {
  readonly limit: Extract<Limit, { law: unknown }>;
  readonly onLimit: (limit: Limit) => string | null;
}) {
  const { law } = limit;
  const known = referenceOf(law);
  const mixed = mixedLaw(law);
  return (
    <>
      <ChoiceField
        label="Law"
        value={known?.name ?? OWN}
        choices={[
          ...REFERENCE_LAWS.map(({ name }): [string, string] => [name, name]),
          [OWN, 'constants of my own'],
        ]}
        onAccept={(name) => {
          const next = REFERENCE_LAWS.find((reference) => reference.name === name);
          return next ? onLimit({ ...limit, law: next.law }) : 'Type the constants below.';
        }}
      />
      <QuantityField
        label="Constant A, per cent"
        value={law.constant}
        kind="number"
        onAccept={(constant) => onLimit({ ...limit, law: { ...law, constant } })}
      />
      <QuantityField
        label="Power of the stress"
        value={law.stress}
        kind="number"
        onAccept={(stress) => onLimit({ ...limit, law: { ...law, stress } })}
      />
      <QuantityField
        label="Power of the time"
        value={law.time}
        kind="number"
        onAccept={(time) => onLimit({ ...limit, law: { ...law, time } })}
      />
      <QuantityField
        label="Damage at most"
        value={limit.damage}
        kind="share"
        unit="%"
        onAccept={(damage) => onLimit({ ...limit, damage })}
      />
      <QuantityField
        label="Passes"
        value={limit.passes}
        kind="number"
        onAccept={(passes) => onLimit({ ...limit, passes })}
      />
      <p className="soft small">
        {known
          ? `${known.source}; its data: ${known.data.says}.`
          : mixed
            ? `The constant is that of ${mixed.constant}, the powers are of ${mixed.exponents}: no published law.`
            : 'No published law has these constants.'}{' '}
        Laws differ by more than a hundredfold on one exposure.
      </p>
    </>
  );
}
