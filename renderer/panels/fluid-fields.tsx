import { fluidOf } from '../../solver/fluid/fluid.ts';
import type { FluidSpec, ShearModel } from '../../solver/fluid/spec.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { RowsField } from '../card/rows-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';
import { capital, figure } from '../words/figure.ts';
import { spoken } from '../words/spoken.ts';

const NAMED = ['water', 'glycerol-water', 'saline', 'culture-medium', 'plasma', 'blood'] as const;
type Choice = (typeof NAMED)[number] | 'own' | 'power-law' | 'carreau' | 'casson' | 'table';

const choiceOf = (fluid: FluidSpec): Choice => {
  if ('name' in fluid) return fluid.name;
  if ('shear' in fluid) return fluid.shear.kind;
  return 'table' in fluid ? 'table' : 'own';
};

const SHEAR: Readonly<Record<'power-law' | 'carreau' | 'casson', ShearModel>> = {
  'power-law': { kind: 'power-law', consistency: 0.017, index: 0.708 },
  carreau: { kind: 'carreau', zeroShear: 0.056, infiniteShear: 0.00345, time: 3.313, index: 0.3568 },
  casson: { kind: 'casson', yieldStress: 0.005, viscosity: 0.0035 },
};

function first(choice: Choice, now: FluidSpec): FluidSpec {
  const temperature = 'temperature' in now ? now.temperature : 298.15;
  switch (choice) {
    case 'own':
      return { viscosity: 1e-3, density: 1000 };
    case 'power-law':
    case 'carreau':
    case 'casson':
      return { density: 1050, shear: SHEAR[choice] };
    case 'table':
      return 'table' in now ? now : { temperature, table: measuredFirst(temperature) };
    case 'glycerol-water':
      return {
        name: choice,
        temperature: Math.min(303.15, Math.max(288.15, temperature)),
        massFraction: 0.2,
      };
    case 'water':
    case 'saline':
      return { name: choice, temperature };
    default:
      return { name: choice, temperature: 310.15 };
  }
}

/** Two rows to be typed over: those of water, so that the first answer is no nonsense. */
const measuredFirst = (temperature: number) =>
  [temperature - 5, temperature + 5].map((at) => {
    const { viscosity, density } = fluidOf({ name: 'water', temperature: at });
    return { temperature: at, viscosity: viscosity ?? 1e-3, density };
  });

/** The fluid: one known by its source, or the user's own numbers. */
export function FluidFields({
  fluid,
  onFluid,
}: {
  readonly fluid: FluidSpec;
  readonly onFluid: (fluid: FluidSpec) => string | null;
}) {
  /** Fields show why a fluid cannot be; nothing is applied then. */
  const tried = (next: FluidSpec): string | null => {
    try {
      fluidOf(next);
    } catch (error) {
      return error instanceof Error ? error.message : 'There is no such fluid.';
    }
    return onFluid(next);
  };
  return (
    <section aria-label="Fluid" className="fields">
      <h3>Fluid</h3>
      <ChoiceField
        label="It is"
        value={choiceOf(fluid)}
        choices={[
          ...NAMED.map(
            (name) =>
              [name, name === 'glycerol-water' ? 'glycerol and water' : name.replace('-', ' ')] as const,
          ),
          ['own', 'one of my own'],
          ['power-law', 'shear-thinning, power law'],
          ['carreau', 'shear-thinning, Carreau'],
          ['casson', 'with a yield stress, Casson'],
          ['table', 'as measured'],
        ]}
        onAccept={(choice) => tried(first(choice, fluid))}
      />
      {'temperature' in fluid && (
        <QuantityField
          label="Temperature"
          value={fluid.temperature}
          kind="temperature"
          unit="degC"
          onAccept={(temperature) => tried({ ...fluid, temperature })}
        />
      )}
      {'name' in fluid && fluid.name === 'glycerol-water' && (
        <QuantityField
          label={fluid.massFraction === undefined ? 'Glycerol by volume' : 'Glycerol by mass'}
          value={fluid.massFraction ?? fluid.volumeFraction ?? 0}
          kind="share"
          unit="%"
          onAccept={(share) =>
            tried(
              fluid.massFraction === undefined
                ? { name: fluid.name, temperature: fluid.temperature, volumeFraction: share }
                : { name: fluid.name, temperature: fluid.temperature, massFraction: share },
            )
          }
        />
      )}
      {'table' in fluid && (
        <RowsField
          label="Measured: temperature, viscosity, density"
          columns={[
            { name: 'temperature', kind: 'temperature', unit: 'degC' },
            { name: 'viscosity', kind: 'viscosity', unit: 'mPa.s' },
            { name: 'density', kind: 'density', unit: 'kg/m^3' },
          ]}
          rows={fluid.table.map((row) => [row.temperature, row.viscosity, row.density])}
          onAccept={(rows) =>
            tried({
              ...fluid,
              table: rows.map(([at, viscosity, density]) => ({
                temperature: at!,
                viscosity: viscosity!,
                density: density!,
              })),
            })
          }
        />
      )}
      {'viscosity' in fluid && (
        <QuantityField
          label="Viscosity"
          value={fluid.viscosity}
          kind="viscosity"
          unit="mPa.s"
          onAccept={(viscosity) => tried({ ...fluid, viscosity })}
        />
      )}
      {'shear' in fluid && (
        <ShearFields model={fluid.shear} onModel={(shear) => tried({ ...fluid, shear })} />
      )}
      {'density' in fluid && (
        <QuantityField
          label="Density"
          value={fluid.density}
          kind="density"
          unit="kg/m^3"
          onAccept={(density) => tried({ ...fluid, density })}
        />
      )}
      <Source fluid={fluid} />
    </section>
  );
}

function ShearFields({
  model,
  onModel,
}: {
  readonly model: ShearModel;
  readonly onModel: (model: ShearModel) => string | null;
}) {
  if (model.kind === 'casson')
    return (
      <>
        <QuantityField
          label="Yield stress"
          value={model.yieldStress}
          kind="stress"
          unit="mPa"
          onAccept={(yieldStress) => onModel({ ...model, yieldStress })}
        />
        <QuantityField
          label="Viscosity"
          value={model.viscosity}
          kind="viscosity"
          unit="mPa.s"
          onAccept={(viscosity) => onModel({ ...model, viscosity })}
        />
      </>
    );
  if (model.kind === 'carreau')
    return (
      <>
        <QuantityField
          label="At rest"
          value={model.zeroShear}
          kind="viscosity"
          unit="mPa.s"
          onAccept={(zeroShear) => onModel({ ...model, zeroShear })}
        />
        <QuantityField
          label="Sheared fast"
          value={model.infiniteShear}
          kind="viscosity"
          unit="mPa.s"
          onAccept={(infiniteShear) => onModel({ ...model, infiniteShear })}
        />
        <QuantityField
          label="Time"
          value={model.time}
          kind="time"
          unit="s"
          onAccept={(time) => onModel({ ...model, time })}
        />
        <QuantityField
          label="Index n"
          value={model.index}
          kind="number"
          onAccept={(index) => onModel({ ...model, index })}
        />
      </>
    );
  return (
    <>
      <QuantityField
        label="Consistency, Pa·sⁿ"
        value={model.consistency}
        kind="number"
        onAccept={(consistency) => onModel({ ...model, consistency })}
      />
      <QuantityField
        label="Index n"
        value={model.index}
        kind="number"
        onAccept={(index) => onModel({ ...model, index })}
      />
    </>
  );
}

function Source({ fluid }: { readonly fluid: FluidSpec }) {
  try {
    const known = fluidOf(fluid);
    return (
      <div className="soft small">
        {known.viscosity !== null && (
          <p>
            {figure(known.viscosity, 'viscosity')}, {figure(known.density, 'density')}
          </p>
        )}
        <p>
          {capital(spoken(known.source))}. Holds for {spoken(known.range)}.
        </p>
        {known.caution && <p>{spoken(known.caution)}</p>}
      </div>
    );
  } catch (error) {
    return <p className="fault">{error instanceof Error ? error.message : ''}</p>;
  }
}
