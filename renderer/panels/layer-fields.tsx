import type { Layer } from '../../solver/chip/chip.ts';
import type { Profile, ProfileKind } from '../../solver/section/profile.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { RowsField } from '../card/rows-field.tsx';
import { ChoiceField, TextField } from '../card/text-field.tsx';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { RoofFields } from './roof-fields.tsx';
import { ToleranceFields } from './tolerance-fields.tsx';

const PROFILES: readonly (readonly [ProfileKind, string])[] = [
  ['rectangle', 'rectangle'],
  ['trapezoid', 'trapezoid, leaning walls'],
  ['rounded', 'rounded by etching'],
  ['circle', 'round bore'],
  ['ellipse', 'ellipse'],
  ['triangle', 'triangle'],
  ['polygon', 'as measured'],
];

/** The layers: depth, cross-section, corner radius. */
export function LayerFields() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const used = (id: string): boolean =>
    chip.channels.some((part) => part.layer === id) ||
    chip.chambers.some((part) => part.layer === id) ||
    chip.ports.some((part) => part.layer === id) ||
    chip.vias.some((part) => part.layers.includes(id)) ||
    (chip.keepOuts?.some((part) => part.layer === id) ?? false);
  const set = (label: string, layers: readonly Layer[]): string | null =>
    desk.attempt({ label, set: { layers } });
  const add = (): void => {
    let n = chip.layers.length + 1;
    while (chip.layers.some((layer) => layer.id === `layer ${n}`)) n += 1;
    const { depth, profile, fillet } = chip.layers.at(-1) ?? {
      depth: 50_000,
      profile: { kind: 'rectangle' as const },
      fillet: 5_000,
    };
    const why = set('add a layer', [...chip.layers, { id: `layer ${n}`, depth, profile, fillet }]);
    if (why) desk.say(why);
  };
  return (
    <section aria-label="Layers">
      <h3>Layers</h3>
      {chip.layers.map((layer) => (
        <fieldset key={layer.id} className="fields">
          <legend>{layer.id}</legend>
          <OneLayer
            layer={layer}
            onLayer={(next, what) =>
              set(
                `${what} of layer ${layer.id}`,
                chip.layers.map((old) => (old === layer ? next : old)),
              )
            }
            onName={(to) =>
              desk.attempt({ label: `rename layer ${layer.id}`, rename: [{ ref: `layer:${layer.id}`, to }] })
            }
          />
          {chip.layers.length > 1 && !used(layer.id) && (
            <button
              type="button"
              className="quiet"
              onClick={() =>
                set(
                  `take layer ${layer.id} away`,
                  chip.layers.filter((old) => old !== layer),
                )
              }
            >
              Take it away
            </button>
          )}
        </fieldset>
      ))}
      <button type="button" className="quiet" onClick={add}>
        Add a layer
      </button>
    </section>
  );
}

function OneLayer({
  layer,
  onLayer,
  onName,
}: {
  readonly layer: Layer;
  readonly onLayer: (layer: Layer, what: string) => string | null;
  readonly onName: (name: string) => string | null;
}) {
  const nm = (metres: number): number => Math.round(metres * 1e9);
  return (
    <>
      <QuantityField
        label="Depth"
        value={layer.depth / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => onLayer({ ...layer, depth: nm(value) }, 'set the depth')}
      />
      <ChoiceField
        label="Cross-section"
        value={layer.profile.kind}
        choices={PROFILES}
        onAccept={(kind) => onLayer({ ...layer, profile: firstProfile(kind, layer) }, 'change the section')}
      />
      {layer.profile.kind === 'trapezoid' && (
        <QuantityField
          label="Wall angle"
          value={layer.profile.wallAngle}
          kind="angle"
          unit="deg"
          onAccept={(wallAngle) =>
            onLayer({ ...layer, profile: { kind: 'trapezoid', wallAngle } }, 'set the wall angle')
          }
        />
      )}
      <QuantityField
        label="Corner fillet"
        value={layer.fillet / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => onLayer({ ...layer, fillet: nm(value) }, 'set the fillet')}
      />
      {layer.profile.kind === 'polygon' && (
        <RowsField
          label="Outline as measured, across and up"
          columns={[
            { name: 'across', kind: 'length', unit: 'um' },
            { name: 'up', kind: 'length', unit: 'um' },
          ]}
          rows={layer.profile.points}
          onAccept={(points) =>
            onLayer(
              {
                ...layer,
                profile: { kind: 'polygon', points: points as readonly (readonly [number, number])[] },
              },
              'change the section',
            )
          }
        />
      )}
      <ToleranceFields layer={layer} onLayer={onLayer} />
      <RoofFields layer={layer} onLayer={onLayer} />
      <TextField
        label="Name"
        value={layer.id}
        onAccept={(name) => (name ? onName(name) : 'A layer needs a name.')}
      />
    </>
  );
}

/** As measured begins as a rectangle of the layer's depth, twice as wide, to be typed over. */
function firstProfile(kind: ProfileKind, { profile, depth }: Layer): Profile {
  if (kind === profile.kind) return profile;
  if (kind === 'trapezoid') return { kind, wallAngle: 85 };
  if (kind !== 'polygon') return { kind };
  const high = depth / 1e9;
  return {
    kind,
    points: [
      [-high, 0],
      [high, 0],
      [high, high],
      [-high, high],
    ],
  };
}
