import { memo, useMemo } from 'react';
import type { Channel, Chip } from '../../solver/chip/chip.ts';
import type { ChannelResult, Result } from '../../solver/chip/result.ts';
import { pathLength } from '../geometry/path.ts';
import { usePage } from '../page/context.tsx';
import { shown } from '../sheet/overlay.ts';
import { useResult } from '../state/live.ts';
import { useStore } from '../state/store.ts';
import { placeName } from '../verdict/answer.ts';
import { bandOf, plusMinus } from '../words/band.ts';
import { figure, lengthFigure } from '../words/figure.ts';
import { lengthened } from './lengthen.ts';
import { MakerCard } from './maker-card.tsx';
import { PartName } from './part-name.tsx';
import { PlacesField } from './place-fields.tsx';
import { PlaceFindings } from './place-findings.tsx';
import { QuantityField } from './quantity-field.tsx';
import { SectionPicture } from './section-picture.tsx';
import { TargetFields } from './target-fields.tsx';
import { ChoiceField, Figure } from './text-field.tsx';

/** One channel: its section, its numbers, what flows in it. */
export function ChannelCard({ channel }: { readonly channel: Channel }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const { result } = useResult(desk);
  const layer = chip.layers.find((found) => found.id === channel.layer);
  const solved = result?.channels.find((found) => found.id === channel.id);
  const put = (change: Partial<Channel>, label: string): string | null =>
    desk.attempt({ label, put: [{ kind: 'channel', value: { ...channel, ...change } }] });
  const asItsLayer = (): string | null => {
    const { depth: _, ...value } = channel;
    return desk.attempt({
      label: `make ${channel.id} as deep as its layer`,
      put: [{ kind: 'channel', value }],
    });
  };
  const nm = (metres: number): number => Math.round(metres * 1e9);
  const tapered = channel.width[0] !== channel.width[1];
  const length = pathLength(channel.path, channel.bendRadius);
  return (
    <>
      <h2>{channel.id}</h2>
      <p className="soft">
        {between(solved)}layer {channel.layer}
        {layer && `, ${lengthFigure(channel.depth ?? layer.depth, { digits: 3 })} deep`}
        {channel.depth !== undefined && ', a depth of its own'}
      </p>
      <SectionOf id={channel.id} />
      <div className="fields">
        <QuantityField
          label={tapered ? 'Width, start' : 'Width'}
          value={channel.width[0] / 1e9}
          kind="length"
          unit="um"
          onAccept={(value) => {
            const width = nm(value);
            return put(
              { width: tapered ? [width, channel.width[1]] : [width, width] },
              `set the width of ${channel.id}`,
            );
          }}
        />
        {tapered && (
          <QuantityField
            label="Width, end"
            value={channel.width[1] / 1e9}
            kind="length"
            unit="um"
            onAccept={(value) =>
              put({ width: [channel.width[0], nm(value)] }, `set the width of ${channel.id}`)
            }
          />
        )}
        {layer && (
          <QuantityField
            label="Depth"
            value={(channel.depth ?? layer.depth) / 1e9}
            kind="length"
            unit="um"
            onAccept={(value) => put({ depth: nm(value) }, `set the depth of ${channel.id}`)}
            {...(channel.depth !== undefined && { onEmpty: asItsLayer })}
          />
        )}
        {channel.depth !== undefined && (
          <button type="button" className="quiet" onClick={asItsLayer}>
            As deep as its layer
          </button>
        )}
        <QuantityField
          label="Length"
          value={length / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) => {
            const made = lengthened(chip, channel, nm(value));
            if (typeof made === 'string') return made;
            return desk.attempt(made);
          }}
        />
        <QuantityField
          label="Bend radius"
          value={channel.bendRadius / 1e9}
          kind="length"
          unit="um"
          onAccept={(value) => put({ bendRadius: nm(value) }, `set the bends of ${channel.id}`)}
        />
        {!tapered && (
          <button
            type="button"
            className="quiet"
            onClick={() =>
              put({ width: [channel.width[0], Math.round(channel.width[0] * 0.8)] }, `taper ${channel.id}`)
            }
          >
            Let it taper
          </button>
        )}
        {chip.layers.length > 1 && (
          <ChoiceField
            label="Layer"
            value={channel.layer}
            choices={chip.layers.map((found) => [found.id, found.id])}
            onAccept={(id) => put({ layer: id }, `move ${channel.id} to layer ${id}`)}
          />
        )}
        <PartName kind="channel" id={channel.id} />
        <PlacesField part={{ kind: 'channel', value: channel }} />
      </div>
      <dl className="fields">
        <Results solved={solved} chip={chip} result={result} />
      </dl>
      <TargetFields of={{ channel: channel.id }} />
      <MakerCard id={channel.id} />
      <PlaceFindings ids={[channel.id]} />
    </>
  );
}

/** Its cross-section as the newest answer has it: drawn anew with that, not with every figure typed. */
const SectionOf = memo(function SectionOf({ id }: { readonly id: string }) {
  const { desk } = usePage();
  const chip = useStore(desk.drawn.sheet)!;
  const { chip: answered, result } = useResult(desk);
  const of = answered ?? chip;
  const ramp = useMemo(() => shown('wall shear', of, result), [of, result]);
  const channel = chip.channels.find((found) => found.id === id);
  const layer = chip.layers.find((found) => found.id === channel?.layer);
  if (!channel || !layer) return null;
  const solved = result?.channels.find((found) => found.id === id);
  // a channel that lies in solved junctions all the way has no piece of its own
  const widest = solved?.pieces.toSorted((a, b) => (b.peakWallShear ?? 0) - (a.peakWallShear ?? 0))[0];
  return (
    <SectionPicture
      layer={channel.depth === undefined ? layer : { ...layer, depth: channel.depth }}
      width={Math.min(...channel.width)}
      flow={widest?.flow ?? null}
      viscosity={result?.fluid.viscosity ?? null}
      fluid={chip.fluid}
      told={{
        mean: widest?.meanWallShear ?? null,
        peak: widest?.peakWallShear ?? null,
        speed: widest?.peakVelocity ?? null,
        uniform: channel.width[0] === channel.width[1] && layer.roof === undefined,
      }}
      most={ramp.to}
    />
  );
});

function between(solved: ChannelResult | undefined): string {
  const first = solved?.pieces[0];
  const last = solved?.pieces.at(-1);
  if (!first || !last) return '';
  return `from ${placeName(first.from)} to ${placeName(last.to)} · `;
}

function Results({
  solved,
  chip,
  result,
}: {
  readonly solved: ChannelResult | undefined;
  readonly chip: Chip;
  readonly result: Result | null;
}) {
  if (!solved) return <Figure label="Flow" figure="comes with the first answer" />;
  if (solved.pieces.length === 0) return <Figure label="Flow" figure="solved as part of a junction" />;
  const { pieces } = solved;
  const sum = (pick: (piece: (typeof pieces)[number]) => number | null): number | null =>
    pieces.reduce<number | null>((total, piece) => {
      const value = pick(piece);
      return total === null || value === null ? null : total + value;
    }, 0);
  const most = (pick: (piece: (typeof pieces)[number]) => number | null): number | null => {
    const values = pieces.map(pick).filter((value) => value !== null);
    return values.length > 0 ? Math.max(...values) : null;
  };
  const flows = new Set(pieces.map((piece) => (piece.flow === null ? null : piece.flow.toPrecision(6))));
  const first = pieces[0]!;
  const limit = Math.min(
    ...chip.limits.map((found) => ('shear' in found && !found.where ? found.shear : Infinity)),
  );
  const shear = most((piece) => piece.peakWallShear);
  const hardest = pieces.find((piece) => piece.peakWallShear === shear);
  return (
    <>
      <Figure
        label="Resistance"
        figure={figure(
          sum((p) => p.resistance),
          'resistance',
          { digits: 3 },
        )}
      />
      <Figure
        label={flows.size > 1 ? 'Flow, first piece' : 'Flow'}
        figure={`${figure(first.flow, 'flow')}${first.flow === null ? '' : plusMinus(bandOf(result, 'flow', first))}`}
      />
      <Figure
        label="Pressure drop"
        figure={figure(
          sum((p) => p.pressureDrop),
          'pressure',
        )}
      />
      <Figure
        label="Mean speed"
        figure={figure(
          most((p) => p.meanVelocity),
          'velocity',
          { digits: 3 },
        )}
      />
      <Figure
        label="Peak wall shear"
        figure={`${figure(shear, 'stress', { digits: 3 })}${shear === null ? '' : plusMinus(bandOf(result, 'shear', hardest))}`}
        missed={shear !== null && shear > limit}
      />
      <Figure
        label="Reynolds number"
        figure={figure(
          most((p) => p.reynolds),
          'number',
          { digits: 2 },
        )}
      />
      <Figure
        label="Residence time"
        figure={figure(
          sum((p) => p.residenceTime),
          'time',
          { digits: 3 },
        )}
      />
    </>
  );
}
