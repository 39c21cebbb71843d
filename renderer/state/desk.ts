import type { Client } from '../../main/contract/client.ts';
import type { Input, Mode, Output, ProjectState, Standing } from '../../main/contract/contract.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { type ChipEdit, makeEdit } from '../../solver/chip/edit.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { toEdit } from '../edits/to-edit.ts';
import { Spatial } from '../sheet/spatial.ts';
import type { Solver } from '../solving/solver.ts';
import type { Alteration } from '../tools/tool.ts';
import type { Answer } from '../verdict/answer.ts';
import { type Document, done, openDocument, redo, undo } from './document.ts';
import { atField, besideTables, drawnChip, toldWithAnswer } from './drawn.ts';
import { Keeper } from './keeper.ts';
import { lockRefusal, readLocks, renamedLocks } from './locks.ts';
import { createStore, type PatientStore, type Store } from './store.ts';
import { FIRST_VIEW, type View } from './view.ts';

/** The open project as the page holds it. */
export interface Project {
  readonly document: Document;
  readonly name: string;
  readonly path: string | null;
  readonly mode: Mode;
  readonly modeSays: string;
  readonly notes: readonly string[];
  /** What the host can take back beyond this window's own steps. */
  readonly hostUndo: string | null;
  readonly hostRedo: string | null;
  /** ms since 1970 of the last edit acknowledged here; null before the first. */
  readonly keptAt: number | null;
  readonly keeping: boolean;
}

export type About = Output<'about'>;
/** JSON that is kept with a project, by what it is. */
export type KeptView = Input<'view.keep'>['view'];

/** Everything a window works with. */
export interface Desk {
  readonly client: Client;
  readonly solver: Solver;
  readonly project: PatientStore<Project | null>;
  readonly view: Store<View>;
  /** Waiting for the host to open something. */
  readonly opening: Store<string>;
  /** The chip for the sheet and the pictures beside it, and for the tables: while a field's edit is answered, the one before. */
  readonly drawn: { readonly sheet: Store<Chip | null>; readonly tables: Store<Chip | null> };
  chip(): Chip | null;
  spatial(): Spatial;
  /** Makes the change; null, or why it was not made. */
  attempt(alteration: Alteration): string | null;
  /** Makes the change, or tells the person why not. */
  alter(alteration: Alteration): boolean;
  undo(): void;
  redo(): void;
  /** Labels of what would be taken back and done again. */
  undoLabel(): string | null;
  redoLabel(): string | null;
  say(text: string): void;
  /** Holds parts where they are, from now on and when the project is opened again. */
  lock(locked: ReadonlySet<string>): void;
  /** What is remembered with the project and is not of the chip. */
  keptView(): KeptView;
  /** Remembers these beside what is remembered already. */
  keepView(patch: KeptView): void;
  /** Opens what a request to the host returns. */
  open(label: string, request: () => Promise<ProjectState>): Promise<void>;
  close(): Promise<void>;
  /** As it was at opening, as one step. */
  revert(): Promise<void>;
  /** The project's place or mode changed. */
  stand(standing: Standing): void;
  /** Resolves when all that was done is kept. */
  settled(): Promise<void>;
  /** The page is being left: what is not on its way to the host yet goes now. */
  leave(): void;
  /** The host's number of the last thing kept. */
  position(): number;
}

const wordsOf = (error: unknown): string =>
  error instanceof Problem ? `${error.what} ${error.remedy}` : 'That did not work. Try it once more.';

/** @param presumed answers that are known to hold for a project as it is opened; null where there are none */
export function createDesk(
  client: Client,
  solver: Solver,
  presumed: (state: ProjectState) => readonly Answer[] | null = () => null,
): Desk {
  const project = createStore<Project | null>(null);
  const view = createStore<View>(FIRST_VIEW);
  const opening = createStore('');
  const drawn = {
    sheet: drawnChip(project, solver, atField),
    tables: drawnChip(project, solver, besideTables),
  };
  let spatial: Spatial | null = null;
  let keptView: KeptView = {};
  const say = (text: string): void => view.patch({ says: text });

  const keeper = new Keeper(client, {
    kept: (position) => {
      const open = project.get();
      const keeping = keeper.busy;
      // while more is on its way, what the host could take back now is not what it will be then
      if (open)
        project.set({
          ...open,
          keptAt: Date.now(),
          keeping,
          ...(!keeping && open.document.done.length === 0 && { hostUndo: position.undo }),
          ...(!keeping && open.document.undone.length === 0 && { hostRedo: position.redo }),
        });
    },
    refused: (problem) => {
      say(`${problem.what} ${problem.remedy}`);
      void client
        .call('project.state', {})
        .then(({ state }) => state && show(state))
        .catch((error: unknown) => say(wordsOf(error)));
    },
  });

  const show = (state: ProjectState): void => {
    keeper.start(state.seq);
    // first, so that it is solved while the page is drawn
    solver.load(state.chip, {});
    const early = presumed(state);
    if (early) solver.presume(early);
    keptView = state.view;
    project.set({
      document: openDocument(state.chip),
      name: state.name,
      path: state.path,
      mode: state.mode,
      modeSays: state.modeSays,
      notes: state.notes,
      hostUndo: state.undo,
      hostRedo: state.redo,
      keptAt: null,
      keeping: false,
    });
    view.patch({
      selection: [],
      locked: readLocks(state.view),
      tool: 'select',
      camera: null,
      layer: '',
      panel: 'card',
      says: [state.mode === 'draft' ? '' : state.modeSays, ...state.notes].filter(Boolean).join(' '),
    });
  };

  const owed = toldWithAnswer(project, solver);
  const put = (document: Document, edit: ChipEdit, more: Partial<Project> = {}): void => {
    const open = project.get()!;
    const next = { ...open, document, keeping: true, ...more };
    if (besideTables()) {
      project.hold(next);
      owed();
    } else project.set(next);
    solver.edit(edit, document.chip);
    const { selection } = view.get();
    const left = selection.filter((ref) => stillThere(document.chip, ref));
    view.patch({ says: '', ...(left.length !== selection.length && { selection: left }) });
  };

  const beyond = async (kind: 'undo' | 'redo'): Promise<void> => {
    await keeper.settled();
    try {
      const { edit, ...position } = await client.call(kind === 'undo' ? 'project.undo' : 'project.redo', {});
      const open = project.get();
      if (!open) return;
      const { chip, inverse } = makeEdit(open.document.chip, edit);
      const step = kind === 'undo' ? { edit: inverse, inverse: edit } : { edit, inverse };
      keeper.start(position.seq);
      put(
        {
          chip,
          done: kind === 'undo' ? [] : [...open.document.done, step],
          undone: kind === 'undo' ? [...open.document.undone, step] : [],
        },
        edit,
        { hostUndo: position.undo, hostRedo: position.redo, keeping: false, keptAt: Date.now() },
      );
    } catch (error) {
      say(wordsOf(error));
    }
  };

  const keepView = (patch: KeptView): void => {
    keptView = { ...keptView, ...patch };
    if (project.get()?.mode === 'read-only') return;
    void keeper
      .quiet()
      .then(() => client.call('view.keep', { view: keptView }))
      .catch((error: unknown) => say(wordsOf(error)));
  };

  const lock = (locked: ReadonlySet<string>): void => {
    view.patch({ locked });
    keepView({ locked: [...locked] });
  };

  const attempt = (alteration: Alteration): string | null => {
    const open = project.get();
    if (!open) return 'No chip is open.';
    if (open.mode === 'read-only')
      return open.modeSays || 'This project is only to be read; save it under another name to change it.';
    const { locked } = view.get();
    const held = lockRefusal(open.document.chip, locked, alteration);
    if (held !== null) return held;
    try {
      const edit = toEdit(open.document.chip, alteration);
      if (edit.changes.length === 0) return null;
      const document = done(open.document, edit);
      put(document, edit, { hostRedo: null });
      keeper.add({ kind: 'edit', edit });
      if (alteration.rename) {
        const follow = renamedLocks(locked, alteration.rename);
        if (follow !== locked) lock(follow);
      }
      return null;
    } catch (error) {
      return wordsOf(error);
    }
  };

  return {
    client,
    solver,
    project,
    view,
    opening,
    drawn,
    say,
    lock,
    keptView: () => keptView,
    keepView,
    chip: () => project.get()?.document.chip ?? null,
    spatial() {
      const chip = project.get()!.document.chip;
      if (spatial?.chip !== chip) spatial = new Spatial(chip);
      return spatial;
    },
    attempt,
    alter(alteration) {
      const why = attempt(alteration);
      if (why !== null) say(why);
      return why === null;
    },
    undo() {
      const open = project.get();
      if (!open) return;
      const back = undo(open.document);
      if (!back) {
        if (open.hostUndo) void beyond('undo');
        return;
      }
      put(back.document, back.edit);
      keeper.add({ kind: 'undo' });
    },
    redo() {
      const open = project.get();
      if (!open) return;
      const again = redo(open.document);
      if (!again) {
        if (open.hostRedo) void beyond('redo');
        return;
      }
      put(again.document, again.edit);
      keeper.add({ kind: 'redo' });
    },
    undoLabel: () => {
      const open = project.get();
      return open ? (open.document.done.at(-1)?.edit.label ?? open.hostUndo) : null;
    },
    redoLabel: () => {
      const open = project.get();
      return open ? (open.document.undone.at(-1)?.edit.label ?? open.hostRedo) : null;
    },
    async open(label, request) {
      opening.set(label);
      try {
        await keeper.settled();
        show(await request());
      } catch (error) {
        say(wordsOf(error));
      } finally {
        opening.set('');
      }
    },
    async close() {
      await keeper.settled();
      await client.call('project.close', {}).catch((error: unknown) => say(wordsOf(error)));
      project.set(null);
      view.set({ ...FIRST_VIEW, size: view.get().size });
    },
    async revert() {
      await keeper.settled();
      try {
        const { edit, ...position } = await client.call('project.revert', {});
        const open = project.get();
        if (!open) return;
        const { chip, inverse } = makeEdit(open.document.chip, edit);
        keeper.start(position.seq);
        put({ chip, done: [...open.document.done, { edit, inverse }], undone: [] }, edit, {
          hostUndo: position.undo,
          hostRedo: position.redo,
          keeping: false,
          keptAt: Date.now(),
        });
      } catch (error) {
        say(wordsOf(error));
      }
    },
    stand({ name, path, mode, modeSays }) {
      const open = project.get();
      if (!open) return;
      project.set({ ...open, name, path, mode, modeSays });
      if (modeSays && modeSays !== open.modeSays) say(modeSays);
    },
    settled: () => keeper.settled(),
    leave: () => keeper.hurry(),
    position: () => keeper.position,
  };
}

function stillThere(chip: Chip, ref: string): boolean {
  const colon = ref.indexOf(':');
  const id = ref.slice(colon + 1);
  switch (ref.slice(0, colon)) {
    case 'channel':
      return chip.channels.some((part) => part.id === id);
    case 'chamber':
      return chip.chambers.some((part) => part.id === id);
    case 'via':
      return chip.vias.some((part) => part.id === id);
    case 'port':
      return chip.ports.some((part) => part.id === id);
    case 'keep-out':
      return chip.keepOuts?.some((part) => part.id === id) ?? false;
    default:
      return true;
  }
}
