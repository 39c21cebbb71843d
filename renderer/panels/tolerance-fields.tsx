import type { Layer, Tolerance } from '../../solver/chip/chip.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';

const WAYS = [
  ['none', 'not said'],
  ['length', 'a length'],
  ['share', 'a share of it'],
] as const;
type Way = (typeof WAYS)[number][0];

/** Shares and lengths to begin with, to be typed over. */
const FIRST: Readonly<Record<Exclude<Way, 'none'>, Tolerance>> = {
  length: { length: 2000 },
  share: { share: 0.05 },
};

/** How far depth and width of a layer may be off as made. */
export function ToleranceFields({
  layer,
  onLayer,
}: {
  readonly layer: Layer;
  readonly onLayer: (layer: Layer, what: string) => string | null;
}) {
  const { tolerance, ...bare } = layer;
  const put = (key: 'depth' | 'width', next: Tolerance | null): string | null => {
    const { [key]: _, ...others } = tolerance ?? {};
    const all = next ? { ...others, [key]: next } : others;
    return onLayer(Object.keys(all).length > 0 ? { ...bare, tolerance: all } : bare, 'set the tolerances');
  };
  return (['depth', 'width'] as const).map((key) => {
    const own = tolerance?.[key];
    const way: Way = !own ? 'none' : 'share' in own ? 'share' : 'length';
    const label = key === 'depth' ? 'Depth tolerance' : 'Width tolerance';
    return (
      <div key={key} className="fields">
        <ChoiceField
          label={label}
          value={way}
          choices={WAYS}
          onAccept={(next) => put(key, next === 'none' ? null : FIRST[next])}
        />
        {own && (
          <QuantityField
            label={key === 'depth' ? 'Depth, ± at most' : 'Width, ± at most'}
            value={'share' in own ? own.share : own.length / 1e9}
            kind={'share' in own ? 'share' : 'length'}
            unit={'share' in own ? '%' : 'um'}
            onAccept={(value) =>
              put(key, 'share' in own ? { share: value } : { length: Math.round(value * 1e9) })
            }
          />
        )}
      </div>
    );
  });
}
