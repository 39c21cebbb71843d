import type { Layer, Roof } from '../../solver/chip/chip.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';

/** A lid of a soft silicone of a few millimetres, to be typed over; invented, of the usual size. */
const FIRST: Roof = { modulus: 2e6, thickness: 4e-3, poisson: 0.5 };

/** A lid that gives way under pressure. */
export function RoofFields({
  layer,
  onLayer,
}: {
  readonly layer: Layer;
  readonly onLayer: (layer: Layer, what: string) => string | null;
}) {
  const { roof, ...bare } = layer;
  const put = (next: Roof | null): string | null =>
    onLayer(next ? { ...bare, roof: next } : bare, 'change the roof');
  return (
    <div className="fields">
      <ChoiceField
        label="Roof"
        value={roof ? 'soft' : 'stiff'}
        choices={[
          ['stiff', 'stiff'],
          ['soft', 'soft, it bulges'],
        ]}
        onAccept={(kind) => put(kind === 'soft' ? FIRST : null)}
      />
      {roof && (
        <>
          <QuantityField
            label="Its modulus"
            value={roof.modulus}
            kind="modulus"
            unit="MPa"
            onAccept={(modulus) => put({ ...roof, modulus })}
          />
          <QuantityField
            label="Its thickness"
            value={roof.thickness}
            kind="length"
            unit="mm"
            onAccept={(thickness) => put({ ...roof, thickness })}
          />
          <QuantityField
            label="Poisson's ratio"
            value={roof.poisson}
            kind="number"
            onAccept={(poisson) => put({ ...roof, poisson })}
          />
          <ChoiceField
            label="Bulges as"
            value={roof.law ?? 'own'}
            choices={[
              ['own', 'its thickness says'],
              ['thick', 'a thick block'],
              ['plate', 'a thin plate'],
            ]}
            onAccept={(law) => {
              const { law: _, ...rest } = roof;
              return put(law === 'own' ? rest : { ...rest, law });
            }}
          />
          {roof.law !== 'plate' && (
            <QuantityField
              label="Factor of a thick block"
              value={roof.constant ?? null}
              kind="number"
              onAccept={(constant) => put({ ...roof, constant })}
              onEmpty={() => {
                const { constant: _, ...rest } = roof;
                return put(rest);
              }}
            />
          )}
        </>
      )}
    </div>
  );
}
