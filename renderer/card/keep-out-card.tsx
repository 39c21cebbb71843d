import type { KeepOut } from '../../solver/chip/chip.ts';
import { area, boxOf } from '../geometry/path.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { figure } from '../words/figure.ts';
import { PartName } from './part-name.tsx';
import { PlacesField } from './place-fields.tsx';
import { PlaceFindings } from './place-findings.tsx';
import { QuantityField } from './quantity-field.tsx';
import { ChoiceField, Figure, TextField } from './text-field.tsx';

const nm = (metres: number): number => Math.round(metres * 1e9);
const EVERY = '\u0000';

/** A part of the chip that is to stay clear: its size, how far to stay off, of which layer, and why. */
export function KeepOutCard({ keepOut }: { readonly keepOut: KeepOut }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const found = useStore(desk.solver.solved).result?.findings ?? [];
  const { id, outline, clearance, note, layer } = keepOut;
  const box = boxOf(outline)!;
  const put = (value: KeepOut, label: string): string | null =>
    desk.attempt({ label, put: [{ kind: 'keep-out', value }] });
  const change = (more: Partial<KeepOut>, label: string): string | null =>
    put({ ...keepOut, ...more }, label);
  const stretch = (wide: number, high: number): string | null =>
    wide > 0 && high > 0
      ? change(
          {
            outline: outline.map(([x, y]) => [
              Math.round(box.left + ((x - box.left) * wide) / (box.right - box.left)),
              Math.round(box.bottom + ((y - box.bottom) * high) / (box.top - box.bottom)),
            ]),
          },
          `set the size of ${id}`,
        )
      : 'A keep-out has a width and a height above zero.';
  const ids = found
    .filter(
      ({ kind, says }) =>
        kind === 'keep-out' && [';', '.', ',', ' ('].some((end) => says.includes(`${id}${end}`)),
    )
    .map(({ where }) => where.slice(where.indexOf(':') + 1));
  return (
    <>
      <h2>{id}</h2>
      <p className="soft">
        keep-out of {layer === undefined ? 'every layer' : `layer ${layer}`}: nothing drawn may reach into it.
        It is no part of a mask.
      </p>
      <div className="fields">
        <QuantityField
          label="Width"
          value={(box.right - box.left) / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) => stretch(nm(value), box.top - box.bottom)}
        />
        <QuantityField
          label="Height"
          value={(box.top - box.bottom) / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) => stretch(box.right - box.left, nm(value))}
        />
        <QuantityField
          label="Stay off by"
          value={clearance / 1e9}
          kind="length"
          unit="um"
          onAccept={(value) => change({ clearance: nm(value) }, `set how far to stay off ${id}`)}
        />
        {(chip.layers.length > 1 || layer !== undefined) && (
          <ChoiceField
            label="Layer"
            value={layer ?? EVERY}
            choices={[[EVERY, 'every layer'], ...chip.layers.map((one) => [one.id, one.id] as const)]}
            onAccept={(to) => {
              const { layer: _, ...every } = keepOut;
              return to === EVERY
                ? put(every, `make ${id} one of every layer`)
                : change({ layer: to }, `make ${id} one of layer ${to}`);
            }}
          />
        )}
        <TextField
          label="For"
          value={note ?? ''}
          onAccept={(text) => {
            const { note: _, ...bare } = keepOut;
            return put(text === '' ? bare : { ...bare, note: text }, `say what ${id} is for`);
          }}
        />
        <PartName kind="keep-out" id={id} />
        <PlacesField part={{ kind: 'keep-out', value: keepOut }} />
      </div>
      <dl className="fields">
        <Figure label="Area" figure={figure(Math.abs(area(outline)) / 1e18, 'area')} />
        <Figure label="Corners" figure={String(outline.length)} />
      </dl>
      <PlaceFindings ids={ids} />
    </>
  );
}
