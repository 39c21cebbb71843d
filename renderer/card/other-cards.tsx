import type { Chamber, Channel, Via } from '../../solver/chip/chip.ts';
import { findParts } from '../edits/parts.ts';
import { widen } from '../edits/shape.ts';
import { area, boxOf } from '../geometry/path.ts';
import { familyOf } from '../makers/made.ts';
import { usePage } from '../page/context.tsx';
import { PARTS, type Ref } from '../state/ref.ts';
import { useStore } from '../state/store.ts';
import type { PartValue } from '../tools/tool.ts';
import { capital, counted, figure, lengthFigure } from '../words/figure.ts';
import { DriveFields } from './drive-fields.tsx';
import { MakerCard } from './maker-card.tsx';
import { PartName } from './part-name.tsx';
import { PlaceFields, PlacesField } from './place-fields.tsx';
import { PlaceFindings } from './place-findings.tsx';
import { QuantityField } from './quantity-field.tsx';
import { ChoiceField, Figure } from './text-field.tsx';

const nm = (metres: number): number => Math.round(metres * 1e9);

export function ChamberCard({ chamber }: { readonly chamber: Chamber }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const layer = chip.layers.find((found) => found.id === chamber.layer);
  const size = Math.abs(area(chamber.outline)) / 1e18;
  const box = boxOf(chamber.outline)!;
  const put = (change: Partial<Chamber>, label: string): string | null =>
    desk.attempt({ label, put: [{ kind: 'chamber', value: { ...chamber, ...change } }] });
  const stretch = (wide: number, high: number): string | null =>
    wide > 0 && high > 0
      ? put(
          {
            outline: chamber.outline.map(([x, y]) => [
              Math.round(box.left + ((x - box.left) * wide) / (box.right - box.left)),
              Math.round(box.bottom + ((y - box.bottom) * high) / (box.top - box.bottom)),
            ]),
          },
          `set the size of ${chamber.id}`,
        )
      : 'A chamber has a width and a height above zero.';
  return (
    <>
      <h2>{chamber.id}</h2>
      <p className="soft">
        chamber on layer {chamber.layer}
        {layer && `, ${lengthFigure(layer.depth, { digits: 3 })} deep`}
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
        {chip.layers.length > 1 && (
          <ChoiceField
            label="Layer"
            value={chamber.layer}
            choices={chip.layers.map((found) => [found.id, found.id])}
            onAccept={(id) => put({ layer: id }, `move ${chamber.id} to layer ${id}`)}
          />
        )}
        <PartName kind="chamber" id={chamber.id} />
        <PlacesField part={{ kind: 'chamber', value: chamber }} />
      </div>
      <dl className="fields">
        <Figure label="Floor" figure={figure(size, 'area')} />
        {layer && <Figure label="Volume" figure={figure((size * layer.depth) / 1e9, 'volume')} />}
        <Figure label="Corners" figure={String(chamber.outline.length)} />
      </dl>
      <MakerCard id={chamber.id} />
      <PlaceFindings ids={[chamber.id]} />
    </>
  );
}

export function ViaCard({ via }: { readonly via: Via }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const put = (change: Partial<Via>, label: string): string | null =>
    desk.attempt({ label, put: [{ kind: 'via', value: { ...via, ...change } }] });
  return (
    <>
      <h2>{via.id}</h2>
      <p className="soft">
        via at {lengthFigure(via.at[0])}, {lengthFigure(via.at[1])}
      </p>
      <div className="fields">
        <QuantityField
          label="Diameter"
          value={via.diameter / 1e9}
          kind="length"
          unit="um"
          onAccept={(value) => put({ diameter: nm(value) }, `set the diameter of ${via.id}`)}
        />
        <PlaceFields part={{ kind: 'via', value: via }} />
        {([0, 1] as const).map((end) => (
          <ChoiceField
            key={end}
            label={end === 0 ? 'From layer' : 'To layer'}
            value={via.layers[end]}
            choices={chip.layers.map((found) => [found.id, found.id])}
            onAccept={(id) =>
              put(
                { layers: end === 0 ? [id, via.layers[1]] : [via.layers[0], id] },
                `lead ${via.id} to layer ${id}`,
              )
            }
          />
        ))}
        <PartName kind="via" id={via.id} />
      </div>
      <PlaceFindings ids={[via.id]} />
    </>
  );
}

/** What several parts have in common, changed together. */
export function SeveralCard({ refs }: { readonly refs: readonly Ref[] }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const parts = findParts(chip, refs);
  const channels = parts.flatMap((part) => (part.kind === 'channel' ? [part.value] : []));
  const ports = parts.flatMap((part) => (part.kind === 'port' ? [part.value] : []));
  const vias = parts.flatMap((part) => (part.kind === 'via' ? [part.value] : []));
  // parts of one making are changed as what they are
  const made = new Set(parts.map((part) => familyOf(part.value.id)));
  const kinds = PARTS.map(
    (kind) => [kind, parts.filter((part) => part.kind === kind).length] as const,
  ).filter(([, n]) => n > 0);
  const common = <T,>(values: readonly T[]): T | null =>
    values.length > 0 && values.every((value) => value === values[0]) ? values[0]! : null;
  const change = (label: string, put: readonly PartValue[]): string | null => desk.attempt({ label, put });
  const all = (value: Partial<Channel>, what: string): string | null =>
    change(
      `set the ${what} of ${counted(channels.length, 'channel')}`,
      channels.map((channel) => ({ kind: 'channel', value: { ...channel, ...value } })),
    );
  const depthOf = (id: string): number | null => chip.layers.find((layer) => layer.id === id)?.depth ?? null;
  const layers = common(
    parts.flatMap((part) => (part.kind === 'via' || part.kind === 'keep-out' ? [] : [part.value.layer])),
  );
  return (
    <>
      <h2>{capital(kinds.map(([kind, n]) => counted(n, kind)).join(' and '))}</h2>
      <p className="soft">What is changed here is changed for all.</p>
      <div className="fields">
        {channels.length > 0 && (
          <>
            <QuantityField
              label="Width"
              value={toMetres(common(channels.flatMap((channel) => [...channel.width])))}
              kind="length"
              unit="um"
              onAccept={(value) => {
                const made = widen(chip, refs, nm(value));
                return typeof made === 'string' ? made : desk.attempt(made);
              }}
            />
            <QuantityField
              label="Depth"
              value={toMetres(common(channels.map((channel) => channel.depth ?? depthOf(channel.layer))))}
              kind="length"
              unit="um"
              onAccept={(value) => all({ depth: nm(value) }, 'depth')}
            />
            <QuantityField
              label="Bend radius"
              value={toMetres(common(channels.map((channel) => channel.bendRadius)))}
              kind="length"
              unit="um"
              onAccept={(value) => all({ bendRadius: nm(value) }, 'bends')}
            />
          </>
        )}
        {ports.length > 0 && (
          <QuantityField
            label="Hole"
            value={toMetres(common(ports.map((port) => port.diameter)))}
            kind="length"
            unit="um"
            onAccept={(value) =>
              change(
                `set the hole of ${counted(ports.length, 'port')}`,
                ports.map((port) => ({ kind: 'port', value: { ...port, diameter: nm(value) } })),
              )
            }
          />
        )}
        <DriveFields
          drives={ports.map((port) => port.drive)}
          onDrive={(drive) =>
            change(
              `set the drive of ${counted(ports.length, 'port')}`,
              ports.map((port) => ({ kind: 'port', value: { ...port, drive } })),
            )
          }
        />
        {vias.length > 0 && (
          <QuantityField
            label="Diameter of vias"
            value={toMetres(common(vias.map((via) => via.diameter)))}
            kind="length"
            unit="um"
            onAccept={(value) =>
              change(
                `set the diameter of ${counted(vias.length, 'via')}`,
                vias.map((via) => ({ kind: 'via', value: { ...via, diameter: nm(value) } })),
              )
            }
          />
        )}
        {chip.layers.length > 1 && (
          <ChoiceField
            label="Layer"
            value={layers ?? ''}
            choices={chip.layers.map((found) => [found.id, found.id])}
            onAccept={(layer) =>
              change(
                `move ${counted(parts.length, 'part')} to layer ${layer}`,
                parts
                  .filter((part) => part.kind !== 'via' && part.kind !== 'keep-out')
                  .map((part) => ({ kind: part.kind, value: { ...part.value, layer } }) as PartValue),
              )
            }
          />
        )}
      </div>
      {made.size === 1 && parts[0] && <MakerCard id={parts[0].value.id} />}
      <PlaceFindings ids={parts.map((part) => part.value.id)} />
    </>
  );
}

const toMetres = (value: number | null): number | null => (value === null ? null : value / 1e9);
