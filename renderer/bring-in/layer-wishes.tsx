import type { DrawingSummary, Role } from '../../main/contract/bring-in.ts';
import { NM_PER_M } from '../../solver/chip/units.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { TextField } from '../card/text-field.tsx';

export interface LayerWish {
  readonly role: Role['kind'];
  /** nm; null for that of the whole drawing. */
  readonly depth: number | null;
  /** Layer of the chip. */
  readonly layer: string;
}

const WORDS: Readonly<Record<Role['kind'], string>> = {
  cavity: 'fluid',
  holes: 'holes of ports',
  outline: 'edge of the chip',
  ignore: 'left out',
};

/** What a layer holds, leaving out what it has none of: "1 region, 3 bare lines". */
function counts(regions: number, paths: number, lines: number): string {
  const of = (n: number, one: string, many: string): string[] =>
    n === 0 ? [] : [`${n.toLocaleString('en')} ${n === 1 ? one : many}`];
  const all = [
    ...of(regions, 'region', 'regions'),
    ...of(paths, 'path with a width', 'paths with a width'),
    ...of(lines, 'bare line', 'bare lines'),
  ];
  return all.length > 0 ? all.join(', ') : 'nothing that is a shape';
}

/** What each layer of the drawing is on the chip. */
export function LayerWishes({
  layers,
  wishes,
  depth,
  onChange,
}: {
  readonly layers: DrawingSummary['layers'];
  readonly wishes: Readonly<Record<string, LayerWish>>;
  /** m */
  readonly depth: number;
  readonly onChange: (name: string, wish: LayerWish) => void;
}) {
  return (
    <>
      {layers.map(({ name, role, regions, paths, lines }) => {
        const wish = wishes[name] ?? { role, depth: null, layer: name };
        const id = `drawn-${name}`;
        return (
          <fieldset key={name} className="fields">
            <legend>{name}</legend>
            <p className="soft small">{counts(regions, paths, lines)}</p>
            <div className="field">
              <label htmlFor={id}>It is</label>
              <select
                id={id}
                value={wish.role}
                onChange={(event) => onChange(name, { ...wish, role: event.target.value as Role['kind'] })}
              >
                {Object.entries(WORDS).map(([kind, words]) => (
                  <option key={kind} value={kind}>
                    {words}
                  </option>
                ))}
              </select>
            </div>
            {wish.role === 'cavity' && (
              <>
                <QuantityField
                  label="Depth"
                  value={wish.depth === null ? depth : wish.depth / NM_PER_M}
                  kind="length"
                  unit="um"
                  onAccept={(value) => {
                    if (!(value > 0 && value <= 0.1)) return 'Takes a length above zero, of at most 100 mm.';
                    onChange(name, { ...wish, depth: Math.round(value * NM_PER_M) });
                    return null;
                  }}
                />
                <TextField
                  label="Layer of the chip"
                  value={wish.layer}
                  onAccept={(value) => {
                    if (value === '' || value.length > 64) return 'Takes a name of at most 64 characters.';
                    onChange(name, { ...wish, layer: value });
                    return null;
                  }}
                />
              </>
            )}
          </fieldset>
        );
      })}
    </>
  );
}
