import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import type { Whole } from '../tools/tool.ts';
import { FluidFields } from './fluid-fields.tsx';
import { LayerFields } from './layer-fields.tsx';
import { LimitFields } from './limit-fields.tsx';
import { ProcessFields } from './process-fields.tsx';
import { RunningFields } from './running-fields.tsx';

/** The chip as a whole: size, layers, fluid, limits. */
export function ChipPanel() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const set = (label: string, whole: Whole): string | null => desk.attempt({ label, set: whole });
  const nm = (metres: number): number => Math.round(metres * 1e9);
  return (
    <>
      <section aria-label="Size" className="fields">
        <QuantityField
          label="Width"
          value={chip.outline.width / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) =>
            set('set the width of the chip', { outline: { ...chip.outline, width: nm(value) } })
          }
        />
        <QuantityField
          label="Height"
          value={chip.outline.height / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) =>
            set('set the height of the chip', { outline: { ...chip.outline, height: nm(value) } })
          }
        />
        <ChoiceField
          label="Lengths written in"
          value={chip.lengthUnit}
          choices={[
            ['nm', 'nm'],
            ['um', 'µm'],
            ['mm', 'mm'],
            ['cm', 'cm'],
            ['m', 'm'],
          ]}
          onAccept={(lengthUnit) => set('set the unit of the description', { lengthUnit })}
        />
      </section>
      <LayerFields />
      <FluidFields fluid={chip.fluid} onFluid={(fluid) => set('change the fluid', { fluid })} />
      <LimitFields />
      <ProcessFields process={chip.process} onProcess={(process) => set('change the process', { process })} />
      <RunningFields chip={chip} onSet={set} />
      <NoteField note={chip.note} onNote={(note) => set('change the note', { note })} />
    </>
  );
}

function NoteField({
  note,
  onNote,
}: {
  readonly note: string;
  readonly onNote: (note: string) => string | null;
}) {
  return (
    <section aria-label="Note" className="fields">
      <h3>Note</h3>
      <textarea
        key={note}
        aria-label="Note"
        rows={4}
        maxLength={10_000}
        defaultValue={note}
        onBlur={(event) => event.target.value !== note && onNote(event.target.value)}
      />
    </section>
  );
}
