import type { Chip } from '../../solver/chip/chip.ts';
import { refOfPart } from '../edits/parts.ts';
import { type ChamberRowWishes, chamberRow } from '../makers/chambers.ts';
import { type GradientTreeWishes, gradientTree } from '../makers/gradient-tree.ts';
import { family, familyOf, type Making } from '../makers/made.ts';
import { type PostWishes, posts } from '../makers/posts.ts';
import {
  readSerpentine,
  type SerpentineRoom,
  type SerpentineWishes,
  serpentine,
  serpentineReach,
} from '../makers/serpentine.ts';
import { type SplitTreeWishes, splitTree } from '../makers/split-tree.ts';
import { usePage } from '../page/context.tsx';
import { keepRoom, readRoom } from '../state/serpentine-rooms.ts';
import { useStore } from '../state/store.ts';
import { partsOfMade } from '../tools/maker-tools.ts';
import { lengthFigure } from '../words/figure.ts';
import { QuantityField } from './quantity-field.tsx';
import { remade } from './remake.ts';
import { SerpentineWish } from './serpentine-wish.tsx';
import { ChoiceField } from './text-field.tsx';

/** What made this part, and its wishes, to be changed as what they are. */
export function MakerCard({ id }: { readonly id: string }) {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const chosen = useStore(desk.view, (view) => view.selection.length);
  const wishes = wishesOf(chip, id, readRoom(desk.keptView(), id));
  if (!wishes) return null;
  const all = partsOfMade(family(chip, familyOf(id))).map(refOfPart);
  return (
    <>
      {wishes}
      {all.length > Math.max(1, chosen) && (
        <button
          type="button"
          className="quiet"
          onClick={() => desk.view.patch({ selection: all, panel: 'card' })}
        >
          Choose all of {familyOf(id)}, to move, copy or delete it
        </button>
      )}
    </>
  );
}

function wishesOf(chip: Chip, id: string, room: SerpentineRoom) {
  const single = readSerpentine(chip, id, room);
  if (single) return <SerpentineFields name={id} wishes={single} />;
  const name = familyOf(id);
  if (family(chip, name).channels.length < 2) return null;
  const tree = splitTree.read(chip, name);
  if (tree) return <SplitTreeFields name={name} wishes={tree} />;
  const gradient = gradientTree.read(chip, name);
  if (gradient) return <GradientFields name={name} wishes={gradient} />;
  const row = chamberRow.read(chip, name);
  if (row) return <RowFields name={name} wishes={row} />;
  const filter = posts.read(chip, name);
  if (filter) return <PostFields name={name} wishes={filter} />;
  return null;
}

/** Makes it anew with other wishes; what hangs on its ports and targets stays. */
function useRemake<W>(name: string, kind: string, make: (name: string, wishes: W) => Making) {
  const { desk } = usePage();
  return (wishes: W): string | null => {
    const making = make(name, wishes);
    if ('refusal' in making) return making.refusal;
    const chip = desk.chip()!;
    return desk.attempt(remade(chip, name, making.made, `change the ${kind} ${name}`));
  };
}

const nm = (metres: number): number => Math.round(metres * 1e9);

function SerpentineFields({ name, wishes }: { readonly name: string; readonly wishes: SerpentineWishes }) {
  const { desk } = usePage();
  const remake = useRemake<SerpentineWishes>(name, 'serpentine', serpentine.make);
  /** What is wished of its room stays wished, also where the length takes less of it. */
  const again = (next: SerpentineWishes): string | null => {
    const why = remake(next);
    const { box, gap, upright } = next;
    if (why === null)
      keepRoom(desk, name, { wall: gap, high: upright ? box.right - box.left : box.top - box.bottom });
    return why;
  };
  const reach = serpentineReach(wishes);
  return (
    <section aria-label="Serpentine" className="fields">
      <h3>Serpentine</h3>
      <p className="soft">
        {lengthFigure(reach.least, { digits: 3 })} to {lengthFigure(reach.most, { digits: 3 })} fit into its
        box.
      </p>
      <SerpentineWish name={name} wishes={wishes} onLength={(length) => again({ ...wishes, length })} />
      <QuantityField
        label="Least wall"
        value={wishes.gap / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, gap: nm(value) })}
      />
      <QuantityField
        label="Bends, at this length"
        value={wishes.bendRadius / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, bendRadius: nm(value) })}
      />
      <ChoiceField
        label="Legs"
        value={wishes.upright ? 'across' : 'up'}
        choices={[
          ['up', 'up and down'],
          ['across', 'to the sides'],
        ]}
        onAccept={(way) => again({ ...wishes, upright: way === 'across' })}
      />
      <BoxFields box={wishes.box} onBox={(box) => again({ ...wishes, box })} />
    </section>
  );
}

function BoxFields<B extends { left: number; right: number; bottom: number; top: number }>({
  box,
  onBox,
}: {
  readonly box: B;
  readonly onBox: (box: B) => string | null;
}) {
  return (
    <>
      <QuantityField
        label="Box width"
        value={(box.right - box.left) / 1e9}
        kind="length"
        unit="mm"
        onAccept={(value) => onBox({ ...box, right: box.left + nm(value) })}
      />
      <QuantityField
        label="Box height"
        value={(box.top - box.bottom) / 1e9}
        kind="length"
        unit="mm"
        onAccept={(value) => {
          const middle = (box.top + box.bottom) / 2;
          return onBox({
            ...box,
            bottom: Math.round(middle - nm(value) / 2),
            top: Math.round(middle + nm(value) / 2),
          });
        }}
      />
    </>
  );
}

function SplitTreeFields({ name, wishes }: { readonly name: string; readonly wishes: SplitTreeWishes }) {
  const again = useRemake<SplitTreeWishes>(name, 'splitting tree', splitTree.make);
  return (
    <section aria-label="Splitting tree" className="fields">
      <h3>Splitting tree</h3>
      <ChoiceField
        label="Outlets"
        value={String(wishes.levels)}
        choices={Array.from({ length: 7 }, (_, i) => [String(i + 1), String(2 ** (i + 1))] as const)}
        onAccept={(levels) => again({ ...wishes, levels: Number(levels) })}
      />
      <QuantityField
        label="Trunk width"
        value={wishes.trunkWidth / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, trunkWidth: nm(value) })}
      />
      <QuantityField
        label="Leaf width"
        value={wishes.leafWidth / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, leafWidth: nm(value) })}
      />
      {wishes.portDiameter !== null && (
        <QuantityField
          label="Holes"
          value={wishes.portDiameter / 1e9}
          kind="length"
          unit="um"
          onAccept={(value) => again({ ...wishes, portDiameter: nm(value) })}
        />
      )}
      <ChoiceField
        label="Flow"
        value={wishes.joining ? 'joining' : 'splitting'}
        choices={[
          ['splitting', 'one to many'],
          ['joining', 'many to one'],
        ]}
        onAccept={(way) => again({ ...wishes, joining: way === 'joining' })}
      />
      <BoxFields box={wishes.box} onBox={(box) => again({ ...wishes, box })} />
    </section>
  );
}

function GradientFields({ name, wishes }: { readonly name: string; readonly wishes: GradientTreeWishes }) {
  const again = useRemake<GradientTreeWishes>(name, 'gradient tree', gradientTree.make);
  return (
    <section aria-label="Gradient tree" className="fields">
      <h3>Gradient tree</h3>
      <QuantityField
        label="Inlets"
        value={wishes.inlets}
        kind="number"
        counts
        onAccept={(inlets) => again({ ...wishes, inlets })}
      />
      <QuantityField
        label="Stages"
        value={wishes.stages}
        kind="number"
        counts
        onAccept={(stages) => again({ ...wishes, stages })}
      />
      <QuantityField
        label="Width"
        value={wishes.width / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, width: nm(value) })}
      />
      <QuantityField
        label="Mixing length"
        value={wishes.mixing / 1e9}
        kind="length"
        unit="mm"
        onAccept={(value) => again({ ...wishes, mixing: nm(value) })}
      />
      <BoxFields box={wishes.box} onBox={(box) => again({ ...wishes, box })} />
    </section>
  );
}

function RowFields({ name, wishes }: { readonly name: string; readonly wishes: ChamberRowWishes }) {
  const again = useRemake<ChamberRowWishes>(name, 'row', chamberRow.make);
  return (
    <section aria-label="Row of chambers" className="fields">
      <h3>Row of chambers</h3>
      <QuantityField
        label="Chambers"
        value={wishes.count}
        kind="number"
        counts
        onAccept={(count) => again({ ...wishes, count })}
      />
      <QuantityField
        label="Each long"
        value={wishes.chamberLength / 1e9}
        kind="length"
        unit="mm"
        onAccept={(value) => again({ ...wishes, chamberLength: nm(value) })}
      />
      <QuantityField
        label="Channel width"
        value={wishes.channelWidth / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, channelWidth: nm(value) })}
      />
      <BoxFields box={wishes.box} onBox={(box) => again({ ...wishes, box })} />
    </section>
  );
}

function PostFields({ name, wishes }: { readonly name: string; readonly wishes: PostWishes }) {
  const again = useRemake<PostWishes>(name, 'posts', posts.make);
  return (
    <section aria-label="Posts" className="fields">
      <h3>Posts</h3>
      <QuantityField
        label="Gap"
        value={wishes.gap / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, gap: nm(value) })}
      />
      <QuantityField
        label="Post"
        value={wishes.post / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, post: nm(value) })}
      />
      <QuantityField
        label="Along the flow"
        value={wishes.along / 1e9}
        kind="length"
        unit="um"
        onAccept={(value) => again({ ...wishes, along: nm(value) })}
      />
      <BoxFields box={wishes.box} onBox={(box) => again({ ...wishes, box })} />
    </section>
  );
}
