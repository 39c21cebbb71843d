import type { SerpentineWishes } from '../makers/serpentine.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { ductFigures } from './duct-figures.ts';
import { QuantityField } from './quantity-field.tsx';

/** The wish for a serpentine as a length, a resistance or a time: each is set through the length it needs. */
export function SerpentineWish({
  name,
  wishes,
  onLength,
}: {
  readonly name: string;
  readonly wishes: SerpentineWishes;
  readonly onLength: (length: number) => string | null;
}) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const { result } = useStore(desk.solver.solved);
  const pieces = result?.channels.find((channel) => channel.id === name)?.pieces ?? [];
  const duct = ductFigures(chip, wishes.layer, wishes.width);
  const flow = pieces[0]?.flow ?? null;
  const length = wishes.length / 1e9;
  return (
    <>
      <QuantityField
        label="Wanted length"
        value={Number(length.toPrecision(6))}
        kind="length"
        unit="mm"
        onAccept={(value) => onLength(Math.round(value * 1e9))}
      />
      {duct && (
        <QuantityField
          label="or resistance"
          value={Number((duct.resistance * length).toPrecision(6))}
          kind="resistance"
          onAccept={(value) => onLength(Math.round((value / duct.resistance) * 1e9))}
        />
      )}
      {duct && flow !== null && flow !== 0 && (
        <QuantityField
          label="or time at this flow"
          value={Number(((duct.area * length) / Math.abs(flow)).toPrecision(6))}
          kind="time"
          unit="s"
          onAccept={(value) => onLength(Math.round(((value * Math.abs(flow)) / duct.area) * 1e9))}
        />
      )}
    </>
  );
}
