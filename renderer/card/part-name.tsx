import { usePage } from '../page/context.tsx';
import type { Part } from '../state/ref.ts';
import { TextField } from './text-field.tsx';

/** The name a part bears; what speaks of it follows. */
export function PartName({ kind, id }: { readonly kind: Part; readonly id: string }) {
  const { desk } = usePage();
  return (
    <TextField
      label="Name"
      value={id}
      onAccept={(to) => {
        if (to === '') return 'A part needs a name.';
        const why = desk.attempt({ label: `rename ${id}`, rename: [{ ref: `${kind}:${id}`, to }] });
        if (why !== null) return why;
        desk.view.patch({ selection: [`${kind}:${to}`] });
        return null;
      }}
    />
  );
}
