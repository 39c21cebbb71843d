import { keyShown } from '../commands/command.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { placeName } from '../verdict/answer.ts';
import { figure, lengthFigure, tally } from '../words/figure.ts';
import { fluidWords } from '../words/fluid.ts';
import { spoken } from '../words/spoken.ts';
import { Figure } from './text-field.tsx';

/** Nothing is chosen: the chip in short, and what can be done next. */
export function NothingCard() {
  const { desk, commands } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const solved = useStore(desk.solver.solved);
  const empty = chip.channels.length + chip.chambers.length === 0;
  const next = empty
    ? (['tool channel', 'tool split tree', 'tool serpentine'] as const)
    : (['tool channel', 'tool port', 'chip', 'plots'] as const);
  return (
    <>
      <h2>{chip.name}</h2>
      <p className="soft">
        {lengthFigure(chip.outline.width, { digits: 3 })} by{' '}
        {lengthFigure(chip.outline.height, { digits: 3 })}
      </p>
      {chip.note && <p className="note">{spoken(chip.note)}</p>}
      {solved.problem && (
        <div className="finding">
          <p>{solved.problem.what}</p>
          <p className="soft">{solved.problem.remedy}</p>
          {solved.problem.where && (
            <button
              type="button"
              className="quiet"
              onClick={() => commands.show(refOf(solved.problem!.where, chip))}
            >
              Show {placeName(solved.problem.where)}
            </button>
          )}
        </div>
      )}
      <dl className="fields">
        <Figure label="Channels" figure={tally(chip.channels.length)} />
        <Figure label="Ports" figure={tally(chip.ports.length)} />
        {chip.layers.map((layer) => (
          <Figure
            key={layer.id}
            label={`Layer ${layer.id}`}
            figure={`${lengthFigure(layer.depth, { digits: 3 })} deep`}
          />
        ))}
        <Figure label="Fluid" figure={fluidWords(chip.fluid)} />
        {solved.result && (
          <Figure label="Viscosity" figure={figure(solved.result.fluid.viscosity, 'viscosity')} />
        )}
      </dl>
      <h3>{empty ? 'Begin with' : 'Next'}</h3>
      <ul className="nexts">
        {next.map((id) => {
          const command = commands.byId(id);
          return (
            <li key={id}>
              <button type="button" onClick={() => commands.run(id)}>
                <span>
                  {command.title} <kbd>{keyShown(commands.keyOf(id))}</kbd>
                </span>
                <span className="soft">{command.help}</span>
              </button>
            </li>
          );
        })}
      </ul>
    </>
  );
}

function refOf(where: string, chip: { readonly ports: readonly { readonly id: string }[] }): string {
  if (where.includes(':')) return where;
  return chip.ports.some((port) => port.id === where)
    ? `port:${where}`
    : `channel:${where.replace(/#\d+$/, '')}`;
}
