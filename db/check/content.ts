import type { Chip } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { readEdit } from '../../solver/chip/edit-read.ts';
import { readChip } from '../../solver/chip/schema-chip.ts';
import {
  chipDigest,
  type Head,
  LIST_KINDS,
  LISTS,
  listOf,
  type PartKind,
  partHash,
  rememberPart,
} from '../chip/parts.ts';
import { Chain, changesOf, readStep, type Step, stepOf } from '../journal/journal.ts';
import { Stacks } from '../journal/stacks.ts';
import { cellIsWhole } from '../kept/cells.ts';
import { resultIsWhole } from '../kept/results.ts';
import { trialIsWhole } from '../kept/trials.ts';
import { strangeLayout } from '../layout/layout.ts';
import { sameBytes } from '../store/hash.ts';
import { readSeals, type Seal, type Sealed, sameSeal, sealOfAbout, sealOfRows } from '../store/seals.ts';
import type { Store } from '../store/store.ts';
import { Damage } from './damage.ts';

/** What a project file holds, read and found whole. */
export interface Content {
  /** As it stands. */
  readonly chip: Chip;
  /** As it stood at the last folding, and after which step that was. */
  readonly folded: Chip;
  readonly foldedSeq: number;
  readonly seq: number;
  /** Hash of the last step, and of the one before the first that is kept. */
  readonly hash: Uint8Array;
  readonly base: { readonly seq: number; readonly hash: Uint8Array };
  readonly stacks: Stacks;
}

/** Bytes that single parts may take; more is refused before it is read. */
const MOST_PART = 32 * 1024 * 1024;

/**
 * Reads everything and checks everything, after `checkStructure`: every row against its hash, every table against its seal, every step against the
 * chain. Throws `Damage` where something is not as it was written.
 */
export function readContent(store: Store): Content {
  const seals = readSeals(store);
  if (!seals) throw new Damage(['the record of what the file holds cannot be read']);
  checkRows(store, seals);
  const folded = readFolded(store, seals.chip);
  const base = { seq: seals.base.seq, hash: seals.base.digest };
  const { steps, chain, stacks } = readSteps(store, base, seals.journal, seals.chip.seq);
  const chip = replay(store, folded, steps);
  return { chip, folded, foldedSeq: seals.chip.seq, seq: chain.seq, hash: chain.hash, base, stacks };
}

/** The structure of the file and its declarations, as layout `version` has them. */
export function checkStructure(store: Store, version: number): void {
  const strange = strangeLayout(store, version);
  if (strange.length > 0) throw new Damage(['the file holds parts that do not belong in a project']);
  if (store.pragma('integrity_check(1)') !== 'ok') throw new Damage(['its inner structure is broken']);
  if (store.all('PRAGMA foreign_key_check').length > 0) throw new Damage(['a trial lost its result']);
}

function checkRows(store: Store, seals: Readonly<Record<Sealed, Seal>>): void {
  const reasons: string[] = [];
  const need = (good: boolean, reason: string): void => {
    if (!good) reasons.push(reason);
  };
  need(sameSeal(sealOfAbout(store), seals.about), 'what it says about itself was altered');
  for (const table of ['result', 'trial'] as const) {
    const whole = table === 'result' ? resultIsWhole : trialIsWhole;
    let good = true;
    for (const row of store.iterate(`SELECT * FROM ${table}`)) good &&= whole(row);
    need(good && sameSeal(sealOfRows(store, table), seals[table]), `its ${table}s were altered`);
  }
  let good = true;
  for (const row of store.iterate('SELECT key, body, hash FROM cell')) good &&= cellIsWhole(row);
  need(good, 'solved junctions kept in it were altered (they can be solved again)');
  if (reasons.length > 0) throw new Damage(reasons);
}

/** The chip as of the last folding. */
function readFolded(store: Store, seal: Seal): Chip {
  const altered = new Damage(['the drawing was altered']);
  const size = store.get('SELECT max(octet_length(body)) AS size FROM chip');
  if (Number(size?.size) > MOST_PART) throw altered;
  const kinds = ['head', ...LIST_KINDS] as const;
  const found = new Map<string, { body: string; hash: Uint8Array }[]>(kinds.map((kind) => [kind, []]));
  let rows = 0;
  for (const row of store.iterate('SELECT kind, place, body, hash FROM chip ORDER BY kind, place')) {
    rows += 1;
    const { kind, place, body } = row;
    const list = found.get(String(kind));
    if (!list || place !== list.length || typeof body !== 'string') throw altered;
    const hash = partHash(String(kind), body);
    if (!sameBytes(row.hash, hash)) throw altered;
    list.push({ body, hash });
  }
  const inOrder = kinds.flatMap((kind) => found.get(kind)!);
  const digest = chipDigest(inOrder.map((part) => part.hash));
  if (found.get('head')!.length !== 1 || rows !== seal.rows || !sameBytes(digest, seal.digest)) throw altered;
  const lists = Object.fromEntries(
    kinds.map((kind) => [kind, found.get(kind)!.map((part) => JSON.parse(part.body) as unknown)]),
  ) as Record<PartKind, unknown[]>;
  const chip = readChip(assemble(lists));
  for (const kind of LIST_KINDS) {
    const list = listOf(chip, kind);
    for (const [place, { body, hash }] of found.get(kind)!.entries()) rememberPart(list[place]!, body, hash);
  }
  return chip;
}

/** A chip, still to be checked, from its parts. */
export function assemble(lists: Readonly<Record<PartKind, readonly unknown[]>>): unknown {
  const chip: Record<string, unknown> = { ...(lists.head[0] as Head) };
  for (const kind of LIST_KINDS) chip[LISTS[kind]] = lists[kind];
  return chip;
}

/** Walks every step kept; returns those after the folding. */
function readSteps(
  store: Store,
  base: { seq: number; hash: Uint8Array },
  seal: Seal,
  foldedSeq: number,
): { steps: Step[]; chain: Chain; stacks: Stacks } {
  const altered = new Damage(['the record of edits was altered']);
  const chain = new Chain(base);
  const stacks = new Stacks();
  const steps: Step[] = [];
  let sealed = base.seq === seal.seq && sameBytes(base.hash, seal.digest);
  for (const row of store.iterate('SELECT * FROM journal ORDER BY seq')) {
    const step = stepOf(row);
    if (!step || !chain.takes(step) || !stacks.take(step)) throw altered;
    if (step.seq === seal.seq) sealed = sameBytes(step.hash, seal.digest);
    if (step.seq > foldedSeq) steps.push(step);
  }
  if (!sealed || chain.seq < foldedSeq) throw altered;
  return { steps, chain, stacks };
}

/** The chip after `steps`. */
function replay(store: Store, folded: Chip, steps: readonly Step[]): Chip {
  let chip = folded;
  for (const step of steps) {
    const of = step.of === null ? step : readStep(store, step.of);
    if (step.kind === 'start') throw new Damage(['the record of edits was altered']);
    const { forward, backward } = changesOf(of);
    const edit = readEdit({ label: step.label, changes: step.kind === 'undo' ? backward : forward });
    chip = applyEdit(chip, edit);
  }
  return chip;
}
