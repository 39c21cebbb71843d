import type { Chip } from '../../solver/chip/chip.ts';
import type { Xy } from '../geometry/vector.ts';
import { gridFor } from '../tools/snap.ts';
import type { Preview, Scope, ToolEvent, ToolName } from '../tools/tool.ts';
import { type Hand, take } from '../tools/tools.ts';
import type { Desk } from './desk.ts';
import { createStore, type Store } from './store.ts';

/** px within which the hand catches things. */
const REACH = 7;

/** The hand at the desk: which tool it holds and what that tool sees. */
export interface Workbench {
  readonly hand: Store<Hand | null>;
  /** Null where no project is open. */
  scope(): Scope | null;
  preview(): Preview;
  event(event: ToolEvent): void;
  take(name: ToolName): void;
  /** Where the pointer was last over the sheet, nm; null before it ever was. */
  pointer(): Xy | null;
  /** Called when the card is wanted for typing. */
  onCard(listener: () => void): () => void;
}

export function createWorkbench(desk: Desk): Workbench {
  const hand = createStore<Hand | null>(null);
  let pointer: Xy | null = null;
  const cardListeners = new Set<() => void>();

  const scope = (): Scope | null => {
    const chip = desk.chip();
    if (!chip) return null;
    const view = desk.view.get();
    const nmPerPixel = view.camera ? 1 / view.camera.scale : 50_000;
    return {
      chip,
      spatial: desk.spatial(),
      layer: layerOf(chip, view.layer),
      selection: view.selection.filter((ref) => !view.locked.has(ref)),
      locked: view.locked,
      reach: REACH * nmPerPixel,
      grid: gridFor(nmPerPixel, 8),
      habits: view.habits,
      centre: [Math.round(chip.outline.width / 2), Math.round(chip.outline.height / 2)],
    };
  };
  /** Whatever lays a tool down says so in the view: another project is begun with an empty hand. */
  const holding = (s: Scope): Hand => {
    const { tool } = desk.view.get();
    const held = hand.get();
    return held?.name === tool ? held : take(tool, s);
  };

  return {
    hand,
    scope,
    preview() {
      const s = scope();
      return s ? holding(s).preview(s) : {};
    },
    event(event) {
      const s = scope();
      if (!s) return;
      if ('at' in event) pointer = event.at;
      const before = holding(s);
      const outcome = before.on(event, s);
      const view = desk.view.get();
      desk.view.set({
        ...view,
        ...(outcome.habits && { habits: { ...view.habits, ...outcome.habits } }),
        ...(event.kind !== 'move' && { says: outcome.says ?? '' }),
      });
      const made = outcome.alter ? desk.alter(outcome.alter) : true;
      // what was drawn and cannot be put stays in the hand; what was dragged goes back to where it was
      hand.set(made || before.name === 'select' ? outcome.hand : before);
      if (outcome.select && made) desk.view.patch({ selection: outcome.select, panel: 'card' });
      if (outcome.goes === 'select') this.take('select');
      if (outcome.goes === 'card' && made) {
        this.take('select');
        for (const listener of cardListeners) listener();
      }
    },
    take(name) {
      const s = scope();
      desk.view.patch({ tool: name, says: '' });
      hand.set(s ? take(name, s) : null);
    },
    pointer: () => pointer,
    onCard(listener) {
      cardListeners.add(listener);
      return () => cardListeners.delete(listener);
    },
  };
}

/** The layer that is drawn on: the one chosen, else the first. */
export const layerOf = (chip: Chip, wanted: string): string =>
  chip.layers.some((layer) => layer.id === wanted) ? wanted : (chip.layers[0]?.id ?? '');
