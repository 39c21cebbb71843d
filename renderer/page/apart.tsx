import { Component, type ReactNode, useMemo } from 'react';
import { useStore } from '../state/store.ts';
import { usePage } from './context.tsx';

/**
 * One part of the page held apart: where the program fails in drawing it, it says so in its place, and the rest
 * of the page stays. It is drawn anew as soon as what it shows is another: an undo brings it back.
 */
export function Apart({
  name,
  className,
  children,
}: {
  readonly name: string;
  readonly className: string;
  readonly children: ReactNode;
}) {
  const { desk } = usePage();
  const chip = useStore(desk.project, (project) => project?.document.chip);
  const result = useStore(desk.solver.solved, (solved) => solved.result);
  const selection = useStore(desk.view, (view) => view.selection);
  const panel = useStore(desk.view, (view) => view.panel);
  // biome-ignore lint/correctness/useExhaustiveDependencies: a new one whenever what is shown may be another
  const shown = useMemo(() => ({}), [chip, result, selection, panel]);
  return (
    <Boundary name={name} className={className} shown={shown}>
      {children}
    </Boundary>
  );
}

interface Held {
  readonly name: string;
  readonly className: string;
  readonly shown: object;
  readonly children: ReactNode;
}

interface Standing {
  readonly fault: Error | null;
  readonly shown: object;
}

class Boundary extends Component<Held, Standing> {
  override state: Standing = { fault: null, shown: this.props.shown };

  static getDerivedStateFromError(error: unknown): Partial<Standing> {
    return { fault: error instanceof Error ? error : new Error(String(error)) };
  }

  static getDerivedStateFromProps({ shown }: Held, state: Standing): Partial<Standing> | null {
    return shown === state.shown ? null : { fault: null, shown };
  }

  override render(): ReactNode {
    const { fault } = this.state;
    const { name, className, children } = this.props;
    if (!fault) return children;
    return (
      <section className={className} aria-label={name}>
        <p className="fault" role="alert">
          {name} cannot be shown: the program failed in drawing it ({fault.message}). Your chip is safe, and
          every edit is kept. Undo the last edit, choose something else, or{' '}
          <button type="button" className="quiet" onClick={() => this.setState({ fault: null })}>
            try again
          </button>
          .
        </p>
      </section>
    );
  }
}
