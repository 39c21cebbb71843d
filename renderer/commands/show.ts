import { boxOfParts, findParts, listOf } from '../edits/parts.ts';
import type { Box } from '../geometry/path.ts';
import { fitted, INSET, panned, zoomed } from '../sheet/camera.ts';
import { OVERLAYS } from '../sheet/overlay.ts';
import { fitChip } from '../sheet/sheet.tsx';
import type { Desk } from '../state/desk.ts';
import { PARTS, type Ref } from '../state/ref.ts';
import { TABS } from '../state/view.ts';
import type { Command } from './command.ts';

const HELP: Readonly<Record<(typeof OVERLAYS)[number], string>> = {
  share: 'Colour each channel by its share of the flow.',
  speed: 'Colour each channel by its mean speed.',
  pressure: 'Colour each channel by its pressure.',
  'wall shear': 'Colour each channel by its peak wall shear against the limit.',
  time: 'Colour each channel by the time a liquid stays in it.',
  'off target': 'Colour each channel by how far its target is missed.',
  depth: 'Colour each channel by the depth of its layer.',
  findings: 'Fill the channels that a finding names.',
};

/** The ground of a chosen junction or other place read from the drawing: a few widths of what meets there. */
function siteBox(desk: Desk, selection: readonly string[]): Box | null {
  const { graph } = desk.solver.solved.get();
  const chip = desk.chip();
  const site = graph?.sites.find((found) => selection.includes(found.name));
  if (!site || !chip) return null;
  const widths = chip.channels
    .filter(({ path }) => path.some((p) => Math.hypot(p[0] - site.at[0], p[1] - site.at[1]) < 1_000_000))
    .map(({ width }) => Math.max(...width));
  const reach = 1.5 * Math.max(100_000, ...widths);
  const [x, y] = site.at;
  return { left: x - reach, right: x + reach, bottom: y - reach, top: y + reach };
}

export function showCommands(desk: Desk, bring: (ref: Ref) => void): Command[] {
  const open = (): string | null => (desk.chip() ? null : 'Open or begin a chip first.');
  const show = (
    id: string,
    title: string,
    keys: readonly string[],
    help: string,
    run: () => void,
    more: Pick<Command, 'repeats'> = {},
  ): Command => ({
    id,
    title,
    keys,
    help,
    group: 'Show',
    why: open,
    run,
    ...more,
  });
  const HELD = { repeats: true } as const;
  const zoom = (factor: number) => (): void => {
    const { camera, size } = desk.view.get();
    if (camera) desk.view.patch({ camera: zoomed(camera, size, [size.width / 2, size.height / 2], factor) });
  };
  /** The part before or after the one chosen, in the order of the chip. */
  const another = (by: 1 | -1) => (): void => {
    const chip = desk.chip()!;
    const refs = PARTS.flatMap((kind) => listOf(chip, kind).map((part) => `${kind}:${part.id}` as const));
    if (refs.length === 0) {
      desk.say('Nothing is drawn yet.');
      return;
    }
    const chosen = desk.view.get().selection;
    const at = refs.findIndex((ref) => ref === (by > 0 ? chosen.at(-1) : chosen[0]));
    bring(refs[at < 0 ? (by > 0 ? 0 : refs.length - 1) : (at + by + refs.length) % refs.length]!);
  };
  const pan = (dx: number, dy: number) => (): void => {
    const { camera } = desk.view.get();
    if (camera) desk.view.patch({ camera: panned(camera, dx, dy) });
  };
  return [
    ...OVERLAYS.map((name, i) =>
      show(`show ${name}`, `Show ${name}`, [String(i + 1)], HELP[name], () =>
        desk.view.patch({ overlay: name }),
      ),
    ),
    show(
      'streamlines',
      'Streamlines in junctions',
      ['9'],
      'Lines of equal flow inside solved junctions, when near, with speed or wall shear shown.',
      () => desk.view.patch({ streamlines: !desk.view.get().streamlines }),
    ),
    show('fit', 'Whole chip', ['f'], 'Show the whole chip.', () => fitChip(desk)),
    show('near', 'Near', ['n'], 'Show the chosen parts as large as they fit.', () => {
      const { selection, size } = desk.view.get();
      const box = boxOfParts(findParts(desk.chip()!, selection)) ?? siteBox(desk, selection);
      if (!box) return fitChip(desk);
      const least = 200_000;
      const more = Math.max(least, 0.1 * Math.max(box.right - box.left, box.top - box.bottom));
      desk.view.patch({
        camera: fitted(
          { left: box.left - more, right: box.right + more, bottom: box.bottom - more, top: box.top + more },
          size,
          INSET,
        ),
      });
    }),
    show('next part', 'Next part', ['.'], 'Choose the part after this one, of every kind.', another(1), HELD),
    show(
      'previous part',
      'Previous part',
      [','],
      'Choose the part before this one, of every kind.',
      another(-1),
      HELD,
    ),
    show('zoom in', 'Nearer', ['+', '='], 'Enlarge the sheet.', zoom(1.5), HELD),
    show('zoom out', 'Farther', ['-'], 'Make the sheet smaller.', zoom(1 / 1.5), HELD),
    show('pan left', 'Move the view left', ['Ctrl+ArrowLeft'], 'Move the view.', pan(120, 0), HELD),
    show('pan right', 'Move the view right', ['Ctrl+ArrowRight'], 'Move the view.', pan(-120, 0), HELD),
    show('pan up', 'Move the view up', ['Ctrl+ArrowUp'], 'Move the view.', pan(0, 120), HELD),
    show('pan down', 'Move the view down', ['Ctrl+ArrowDown'], 'Move the view.', pan(0, -120), HELD),
    ...TABS.map((tab) =>
      show(`ledger ${tab}`, `Table of ${tab}`, [], 'Go to this table below the sheet.', () => {
        desk.view.patch({ tab });
        document.querySelector<HTMLElement>('[role="grid"]')?.focus();
      }),
    ),
    show('next layer', 'Next layer', ['Shift+l'], 'Draw on the next layer.', () => {
      const layers = desk.chip()!.layers;
      const at = layers.findIndex((layer) => layer.id === desk.view.get().layer);
      const next = layers[(Math.max(0, at) + 1) % layers.length]!;
      desk.view.patch({ layer: next.id });
      desk.say(`Drawing on layer ${next.id}.`);
    }),
    show('plots', 'Plots', ['u'], 'Pressure and shear along a route, shares against targets, a sweep.', () =>
      desk.view.patch({ panel: 'plots' }),
    ),
  ];
}
