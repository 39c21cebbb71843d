import type { Target } from '../../solver/chip/chip.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { figure } from '../words/figure.ts';
import { QuantityField } from './quantity-field.tsx';
import { ChoiceField, Figure } from './text-field.tsx';

type Of = { readonly port: string } | { readonly channel: string };

const same = (target: Target, of: Of): boolean =>
  'port' in of
    ? 'port' in target && target.port === of.port
    : 'channel' in target && target.channel === of.channel;

/** What the designer wants here, and what it gets. */
export function TargetFields({ of }: { readonly of: Of }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const { result } = useStore(desk.solver.solved);
  const target = chip.targets.find((found) => same(found, of));
  const name = 'port' in of ? of.port : of.channel;
  const set = (next: Target | null, label: string): string | null => {
    const rest = chip.targets.filter((found) => !same(found, of));
    const targets =
      next === null
        ? rest
        : target
          ? chip.targets.map((found) => (same(found, of) ? next : found))
          : [...rest, next];
    return desk.attempt({ label, set: { targets } });
  };
  const got = result?.targets.find((found) =>
    'port' in of ? found.port === of.port : found.channel === of.channel,
  );
  if (!target)
    return (
      <p>
        <button
          type="button"
          className="quiet"
          onClick={() =>
            set(
              { ...of, share: got?.got ?? equalShare(chip.ports.length), within: 0.02 },
              `give ${name} a target`,
            )
          }
        >
          Give it a target
        </button>
      </p>
    );
  const byShare = 'share' in target;
  return (
    <section aria-label="Target" className="fields">
      <h3>Target</h3>
      <ChoiceField
        label="Wanted as"
        value={byShare ? 'share' : 'flow'}
        choices={[
          ['share', 'a share of all'],
          ['flow', 'a flow'],
        ]}
        onAccept={(kind) =>
          set(
            kind === 'share'
              ? { ...of, share: 0.5, within: target.within }
              : { ...of, flow: 1e-9 / 60, within: target.within },
            `change the target of ${name}`,
          )
        }
      />
      <QuantityField
        label="Wanted"
        value={byShare ? target.share : target.flow}
        kind={byShare ? 'share' : 'flow'}
        {...(byShare && { unit: '%' })}
        onAccept={(value) =>
          set(
            byShare
              ? { ...of, share: value, within: target.within }
              : { ...of, flow: value, within: target.within },
            `change the target of ${name}`,
          )
        }
      />
      <QuantityField
        label="Within"
        value={target.within}
        kind="share"
        unit="%"
        onAccept={(within) => set({ ...target, within }, `change the target of ${name}`)}
      />
      {got && (
        <dl>
          <Figure
            label="It gets"
            figure={figure(got.got, byShare ? 'share' : 'flow', byShare ? { unit: '%' } : {})}
            missed={!got.met}
          />
        </dl>
      )}
      <button type="button" className="quiet" onClick={() => set(null, `take the target of ${name} away`)}>
        Take the target away
      </button>
    </section>
  );
}

const equalShare = (ports: number): number => 1 / Math.max(1, ports - 1);
