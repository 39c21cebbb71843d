import { z } from 'zod';
import type { Chip } from '../../solver/chip/chip.ts';
import type { ChipEdit } from '../../solver/chip/edit.ts';
import type { Result } from '../../solver/chip/result.ts';
import { bringInPicture, bringInReport, bringInSettings, bringInState, drawingSummary } from './bring-in.ts';
import { MASK_FORMATS, maskOptions, maskReport, maskState } from './mask.ts';
import { noteState, noteWish } from './note.ts';

/**
 * The seam between the page and whichever host runs it: every request a page can make, every event
 * a host can send. A request is a name, an input and an output, both checked by the schema named
 * here at the host's edge; nothing passes that is not listed. The page imports types only (see
 * `client.ts`), so that no schema code is loaded there.
 *
 * Each window of the program holds at most one open project; requests about "the project" mean the
 * one of the window that asks. Refusals come back as a `Problem` (what, where, what to do).
 */

/** Bounds on what a request may carry. */
export const BOUNDS = {
  name: 200,
  path: 4096,
  text: 64 * 1024 * 1024,
  blob: 64 * 1024 * 1024,
  keys: 512,
  table: 8_000_000,
  settings: 2000,
  changes: 200_000,
} as const;

const name = z.string().min(1).max(BOUNDS.name);
const path = z
  .string()
  .min(1)
  .max(BOUNDS.path)
  .refine((text) => !text.includes('\0'), 'holds a character that no file name can have');
const key = z.string().min(1).max(512);
const id = z.int().positive();
const seq = z.int().nonnegative();
const bytes = z.custom<Uint8Array>((value) => value instanceof Uint8Array && value.length <= BOUNDS.blob);
const nothing = z.strictObject({});

/** Checked field by field where the chip is kept (it may be large); here only that it is one. */
const plainObject = (value: unknown): boolean =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
const chip = z.custom<Chip>(plainObject);
const result = z.custom<Result>(plainObject);
const edit = z.custom<ChipEdit>(
  (value) =>
    plainObject(value) &&
    typeof (value as ChipEdit).label === 'string' &&
    (value as ChipEdit).label.length <= BOUNDS.name &&
    Array.isArray((value as ChipEdit).changes) &&
    (value as ChipEdit).changes.length <= BOUNDS.changes,
);

/** How safe the open project is, in one word; `modeSays` of the state says it in sentences. */
export const MODES = [
  /** Every edit is in the file the person chose as soon as it is acknowledged. */
  'kept',
  /** Every edit is kept, in the program's own folder: the person has not chosen a place yet. */
  'draft',
  /** Nothing is written: open elsewhere, write-protected, or damaged. */
  'read-only',
  /** Every edit is kept in a copy in the program's own folder and written back whole to the chosen place. */
  'private copy',
] as const;
const mode = z.enum(MODES);
export type Mode = (typeof MODES)[number];

/** What changes with every edit. */
const position = z.object({
  /** Number of the last thing done; grows by one with every edit, undo and redo. */
  seq,
  /** Label of what undo and redo would do, null where there is nothing. */
  undo: z.string().nullable(),
  redo: z.string().nullable(),
});
export type Position = z.infer<typeof position>;

/** What changes with the place and the mode, sent again as the event `project` when it does. */
const standing = z.object({
  /** File name without its folder, or "Untitled". */
  name: z.string(),
  /** Where it is kept; null for a draft. */
  path: z.string().nullable(),
  mode,
  /** What is safe, what is not, what to do; '' where all is plain. */
  modeSays: z.string(),
  /** Whether anything was done since opening. */
  edited: z.boolean(),
});
export type Standing = z.infer<typeof standing>;

const state = z.object({
  ...standing.shape,
  ...position.shape,
  chip,
  /** What was kept of the view with `view.keep`; empty where nothing was. */
  view: z.record(z.string(), z.json()),
  /** What had to be done to open it (brought up from an older version, recovered after a crash), in sentences. */
  notes: z.array(z.string()),
  /** Grows by one with every project that this window opens. */
  opening: z.int().nonnegative(),
});
export type ProjectState = z.infer<typeof state>;

/** The undo or redo that was done: the page applies `edit` to its chip, as the host did. */
const moved = z.object({ ...position.shape, edit });

const trial = z.object({
  id,
  name: z.string(),
  /** Milliseconds since 1970. */
  made: z.number(),
  hasResult: z.boolean(),
});
export type TrialSummary = z.infer<typeof trial>;

const fileKind = z.enum(['folder', 'project', 'description', 'other']);
const backup = z.object({
  id: z.string(),
  /** Milliseconds since 1970. */
  made: z.number(),
  size: z.number(),
  daily: z.boolean(),
});

/** A value that JSON can hold, bounded by the size of the request. */
const json = z.json();

export const REQUESTS = {
  /** The program and its host. `dialogs`: the host has the system's own file dialogs (`files.choose`). */
  about: {
    input: nothing,
    output: z.object({
      name: z.string(),
      version: z.string(),
      host: z.enum(['desktop', 'browser']),
      dialogs: z.boolean(),
      platform: z.string(),
      /** Versions of what the program stands on, by name. */
      parts: z.record(z.string(), z.string()),
    }),
  },
  /** The published and exact checks with the error this version shows; null where none were recorded. */
  'about.verification': {
    input: nothing,
    output: z.object({ rows: z.array(z.record(z.string(), json)).nullable() }),
  },

  /** A new draft holding `chip`; opens it in this window (what was open is closed). */
  'project.new': { input: z.strictObject({ chip }), output: state },
  /** A new draft from a chip description (JSON text). */
  'project.import': {
    input: z.strictObject({ text: z.string().max(BOUNDS.text), name: name.optional() }),
    output: state,
  },
  /** A new draft from a demo. */
  'project.demo': { input: z.strictObject({ id: key }), output: state },
  /**
   * Opens a project file here (what was open is closed). A damaged one is left as it is: what can be read
   * of it is opened as a draft, and `notes` say what was kept and what was lost.
   */
  'project.open': { input: z.strictObject({ path }), output: state },
  /** A project file whose bytes the page was given (dropped on a browser): opened as a draft. */
  'project.upload': { input: z.strictObject({ name, bytes }), output: state },
  'project.close': { input: nothing, output: nothing },
  /** The state as it stands, null where this window has no project open. */
  'project.state': { input: nothing, output: z.object({ state: state.nullable() }) },
  /** Writes the project to `path` and goes on there. An existing file is replaced only with `replace`. */
  'project.saveAs': { input: z.strictObject({ path, replace: z.boolean().optional() }), output: standing },
  /** Writes a copy to `path` (by default beside the original, under the next free name) and stays here. */
  'project.duplicate': {
    input: z.strictObject({ path: path.optional(), replace: z.boolean().optional() }),
    output: z.object({ path: z.string() }),
  },
  /** `seq` is the position the page made the edit at; another one in between is refused. Acknowledged = kept. */
  'project.edit': { input: z.strictObject({ edit, seq }), output: position },
  'project.undo': { input: nothing, output: moved },
  'project.redo': { input: nothing, output: moved },
  /** Back to how the project was when it was opened, as one step that can be undone. */
  'project.revert': { input: nothing, output: moved },
  /** The last things done, newest first. */
  'project.history': {
    input: z.strictObject({ limit: z.int().min(1).max(10_000).optional() }),
    output: z.object({
      steps: z.array(z.object({ seq, label: z.string(), made: z.number(), undone: z.boolean() })),
    }),
  },
  /** Backups of the file at `path` (by default of the open project), newest first. */
  'project.backups': {
    input: z.strictObject({ path: path.optional() }),
    output: z.object({ backups: z.array(backup) }),
  },
  /** Puts a backup beside the file, under a name that says so, and opens it; the file itself stays. */
  'project.restore': { input: z.strictObject({ path: path.optional(), id: key }), output: state },

  'demos.list': {
    input: nothing,
    output: z.object({ demos: z.array(z.object({ id: z.string(), name: z.string(), says: z.string() })) }),
  },
  'recent.list': {
    input: nothing,
    output: z.object({
      recent: z.array(
        z.object({ path: z.string(), name: z.string(), opened: z.number(), there: z.boolean() }),
      ),
    }),
  },
  'recent.forget': { input: z.strictObject({ path }), output: nothing },

  /** Freezes the chip as it stands at `seq` (or `chip` in its place, such as the made one), with its result where there is one. */
  'trials.freeze': {
    input: z.strictObject({ name, seq, result: result.nullable(), chip: chip.optional() }),
    output: trial,
  },
  'trials.list': { input: nothing, output: z.object({ trials: z.array(trial) }) },
  'trials.rename': { input: z.strictObject({ id, name }), output: trial },
  'trials.delete': { input: z.strictObject({ id }), output: nothing },
  'trials.get': {
    input: z.strictObject({ id }),
    output: z.object({ trial, chip, result: result.nullable() }),
  },

  /** A table of measurements as cells, with the line of the text that each row begins on. */
  'measurements.read': {
    input: z.strictObject({ text: z.string().max(BOUNDS.table) }),
    output: z.object({ rows: z.array(z.array(z.string())), lines: z.array(z.number()) }),
  },

  /**
   * Keeps a result with what it was made from: the chip at `seq` and the settings of the solve (any
   * text that names them). `kept` is false where the chip has moved on since.
   */
  /** What the page remembers of the view (such as locks), with the project and not of the chip; replaced whole. */
  'view.keep': { input: z.strictObject({ view: z.record(z.string(), json) }), output: nothing },
  'results.keep': {
    input: z.strictObject({ seq, settings: z.string().max(BOUNDS.settings), result }),
    output: z.object({ kept: z.boolean() }),
  },
  /** The kept result of exactly the chip as it stands and these settings, null where there is none. */
  'results.get': {
    input: z.strictObject({ settings: z.string().max(BOUNDS.settings) }),
    output: z.object({ seq, result: result.nullable() }),
  },

  /** Solved cells and sections by key: those found, in any order. A damaged entry counts as not found. */
  'cells.get': {
    input: z.strictObject({ keys: z.array(key).max(BOUNDS.keys) }),
    output: z.object({ found: z.array(z.object({ key: z.string(), bytes })) }),
  },
  /** Kept until the cache is full, then those longest unused go. Never waited for; a failure only costs time. */
  'cells.put': {
    input: z.strictObject({ entries: z.array(z.strictObject({ key, bytes })).max(BOUNDS.keys) }),
    output: nothing,
  },

  /** User preferences (units, theme, keys, ...), kept for the person, not in the project. */
  'preferences.get': { input: nothing, output: z.object({ preferences: z.record(z.string(), json) }) },
  /** Sets those named; null takes one away. */
  'preferences.set': {
    input: z.strictObject({ patch: z.record(key, json) }),
    output: z.object({ preferences: z.record(z.string(), json) }),
  },

  /** The system's own file dialog (only where `about.dialogs`); null where the person cancelled. */
  'files.choose': {
    input: z.strictObject({
      purpose: z.enum(['open', 'save']),
      title: name,
      suggest: z.string().max(BOUNDS.path).optional(),
      kinds: z
        .array(z.strictObject({ name, extensions: z.array(z.string().regex(/^[a-z0-9]{1,12}$/)).max(20) }))
        .max(20),
    }),
    output: z.object({ path: z.string().nullable() }),
  },
  /** What a folder holds, for the page's own file chooser; the person's documents folder by default. */
  'files.list': {
    input: z.strictObject({ folder: path.optional() }),
    output: z.object({
      folder: z.string(),
      parent: z.string().nullable(),
      entries: z.array(
        z.object({
          name: z.string(),
          path: z.string(),
          kind: fileKind,
          size: z.number(),
          changed: z.number(),
        }),
      ),
      /** True where the folder holds more than is listed. */
      more: z.boolean(),
    }),
  },
  /** Reads a file to import. */
  'files.read': { input: z.strictObject({ path }), output: z.object({ name: z.string(), bytes }) },
  /** Writes an export whole: the old file stays until the new one is complete. Replaced only with `replace`. */
  'files.write': {
    input: z.strictObject({
      path,
      content: z.union([z.string().max(BOUNDS.text), bytes]),
      replace: z.boolean().optional(),
    }),
    output: z.object({ path: z.string() }),
  },

  /**
   * Begins to make masks of the chip as it stands, in a thread of its own; the event `mask` tells how the
   * job goes on, `mask.take` hands over the outcome once (also of a failed job: it then refuses with the
   * problem). With `path` the files are written: a path that is a folder or ends in a separator takes
   * them under their own names; any other takes its ending off and is the beginning of every name (a
   * single file is written to exactly `path`). Without, their bytes are handed back to be kept by the
   * page. Options left out take the values that `maskOptions` names; everything is read back and
   * compared before a job is done.
   */
  'mask.start': {
    input: z.strictObject({
      formats: z.array(z.enum(MASK_FORMATS)).min(1).max(MASK_FORMATS.length),
      options: maskOptions,
      path: path.optional(),
      /** Files that are there already are replaced; else they are a refusal. */
      replace: z.boolean().optional(),
    }),
    output: z.object({ job: z.int().positive() }),
  },
  'mask.take': {
    input: z.strictObject({ job: z.int().positive() }),
    output: z.object({
      report: maskReport,
      /** `bytes` is null where the file was written. */
      files: z.array(z.object({ name: z.string(), path: z.string().nullable(), bytes: bytes.nullable() })),
    }),
  },
  /** Ends a job; nothing of it is written. */
  'mask.cancel': { input: z.strictObject({ job: z.int().positive() }), output: nothing },

  /**
   * Begins to write the fabrication note, or its flow-split table alone, in a thread of its own; the event
   * `note` tells how it ended. `result` is that of the chip at `seq`; a chip that has moved on is refused.
   */
  'note.start': {
    input: z.strictObject({ ...noteWish, seq, result, path, replace: z.boolean().optional() }),
    output: z.object({ job: z.int().positive() }),
  },
  /** Ends a job; nothing of it is written. */
  'note.cancel': { input: z.strictObject({ job: z.int().positive() }), output: nothing },
  /** The flow-split table for the clipboard: tabs between cells, as spreadsheets take it. */
  'note.split': {
    input: z.strictObject({ seq, result }),
    output: z.object({ tabbed: z.string(), rows: z.number() }),
  },

  /**
   * Begins to read a drawing (DXF, SVG, GDSII) in a thread of its own; the event `bringIn` tells how it goes on,
   * `bringIn.take` hands over the outcome once (of a failed job it refuses with the problem). Without settings
   * only what the file holds is told; with them, what chip it makes.
   */
  'bringIn.start': {
    input: z.strictObject({
      file: z.union([z.strictObject({ path }), z.strictObject({ name, bytes })]),
      settings: bringInSettings.nullable(),
    }),
    output: z.object({ job: z.int().positive() }),
  },
  'bringIn.take': {
    input: z.strictObject({ job: z.int().positive() }),
    output: z.object({
      summary: drawingSummary.nullable(),
      outcome: z.object({ chip, report: bringInReport, picture: bringInPicture }).nullable(),
    }),
  },
  /** Ends a job; nothing comes of it. */
  'bringIn.cancel': { input: z.strictObject({ job: z.int().positive() }), output: nothing },
} as const;

/** What a host sends unasked, to one window. */
export const EVENTS = {
  /** The project's place, mode or name changed. */
  project: standing,
  /** The host opened another project in this window (start, file association, menu): ask for its state. */
  opened: z.object({ opening: z.int().nonnegative() }),
  /** A command chosen in the system's menu, by the page's name for it. */
  command: z.object({ name: z.string() }),
  /** Something went wrong that no request waits for. */
  problem: z.object({ kind: z.string(), what: z.string(), where: z.string(), remedy: z.string() }),
  /** How a mask job stands; sent at every step and once at its end. */
  mask: maskState,
  /** How a drawing that comes in stands; sent at every step and once at its end. */
  bringIn: bringInState,
  /** How a note job ended. */
  note: noteState,
  /** The host is about to stop; everything is kept. */
  closing: z.object({ says: z.string() }),
} as const;

export type RequestName = keyof typeof REQUESTS;
export type Input<N extends RequestName> = z.input<(typeof REQUESTS)[N]['input']>;
export type Output<N extends RequestName> = z.output<(typeof REQUESTS)[N]['output']>;
export type EventName = keyof typeof EVENTS;
export type EventData<N extends EventName> = z.output<(typeof EVENTS)[N]>;

/** A refusal as it travels. */
export interface Refusal {
  readonly kind: string;
  readonly what: string;
  readonly where: string;
  readonly remedy: string;
}
export type Reply =
  | { readonly ok: true; readonly output: unknown }
  | { readonly ok: false; readonly problem: Refusal };
