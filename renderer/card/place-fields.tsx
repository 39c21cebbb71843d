import type { Chamber, Channel, KeepOut, Port, Via } from '../../solver/chip/chip.ts';
import { moveJoined } from '../edits/parts.ts';
import { usePage } from '../page/context.tsx';
import type { PartValue } from '../tools/tool.ts';
import { QuantityField } from './quantity-field.tsx';
import { RowsField } from './rows-field.tsx';

const MM = [
  { name: 'across', kind: 'length', unit: 'mm' },
  { name: 'up', kind: 'length', unit: 'mm' },
] as const;

/** Where a port or via lies, from the lower left of the chip; what is joined there comes along. */
export function PlaceFields({
  part,
}: {
  readonly part:
    | { readonly kind: 'port'; readonly value: Port }
    | { readonly kind: 'via'; readonly value: Via };
}) {
  const { desk } = usePage();
  const { at, id } = part.value;
  const move = (to: readonly [number, number]): string | null =>
    desk.attempt({
      label: `move ${id}`,
      put: moveJoined(desk.chip()!, [part], [Math.round(to[0] - at[0]), Math.round(to[1] - at[1])]),
    });
  return (
    <>
      <QuantityField
        label="Across"
        value={at[0] / 1e9}
        kind="length"
        unit="mm"
        onAccept={(value) => move([value * 1e9, at[1]])}
      />
      <QuantityField
        label="Up"
        value={at[1] / 1e9}
        kind="length"
        unit="mm"
        onAccept={(value) => move([at[0], value * 1e9])}
      />
    </>
  );
}

/** Every corner of a channel, chamber or keep-out, as numbers. */
export function PlacesField({
  part,
}: {
  readonly part:
    | { readonly kind: 'channel'; readonly value: Channel }
    | { readonly kind: 'chamber'; readonly value: Chamber }
    | { readonly kind: 'keep-out'; readonly value: KeepOut };
}) {
  const { desk } = usePage();
  const places = part.kind === 'channel' ? part.value.path : part.value.outline;
  return (
    <details className="more">
      <summary>Corners</summary>
      <RowsField
        label="Across and up, one corner a line"
        columns={MM}
        rows={places.map(([x, y]) => [x / 1e9, y / 1e9])}
        onAccept={(rows) => {
          const points = rows.map(([x, y]) => [Math.round(x! * 1e9), Math.round(y! * 1e9)] as const);
          return desk.attempt({
            label: `set the corners of ${part.value.id}`,
            put: [
              part.kind === 'channel'
                ? { kind: 'channel', value: { ...part.value, path: points } }
                : ({ kind: part.kind, value: { ...part.value, outline: points } } as PartValue),
            ],
          });
        }}
      />
    </details>
  );
}
