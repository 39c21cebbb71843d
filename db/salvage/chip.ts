import type { Chip, Layer } from '../../solver/chip/chip.ts';
import { applyEdit } from '../../solver/chip/edit.ts';
import { readEdit } from '../../solver/chip/edit-read.ts';
import { readChip } from '../../solver/chip/schema-chip.ts';
import { assemble } from '../check/content.ts';
import { chipDigest, LIST_KINDS, type PartKind } from '../chip/parts.ts';
import { changesOf, type Step, stepHash } from '../journal/journal.ts';
import { NO_HASH, sameBytes } from '../store/hash.ts';
import { unpack } from '../store/pack.ts';
import type { Seal } from '../store/seals.ts';
import type { Row } from '../store/store.ts';
import { attempt } from './rows.ts';

/** Whole rows of the chip by kind and place. */
export type FoundParts = ReadonlyMap<string, Row>;

export interface SalvagedChip {
  readonly chip: Chip;
  /** What was lost or made up, in sentences; empty where the chip is whole as it last stood. */
  readonly report: readonly string[];
  /** Whether the steps kept lead to exactly this chip, so that undo can go on. */
  readonly exact: boolean;
}

/** Steps in order from the first that is there, as far as each follows from the one before. */
export function unbroken(steps: ReadonlyMap<number, Step>, from: number, hash: Uint8Array): Step[] {
  const chain: Step[] = [];
  let before = hash;
  for (let seq = from; ; seq += 1) {
    const step = steps.get(seq);
    if (!step || !sameBytes(step.hash, stepHash(before, step))) return chain;
    chain.push(step);
    before = step.hash;
  }
}

/** Where the steps that are kept begin, and where the last folding was. */
export interface Anchors {
  readonly base: { readonly seq: number; readonly hash: Uint8Array };
  readonly chip: Seal | undefined;
  readonly journal: Seal | undefined;
}

/** The chip as it last stood, by whichever way still leads there; else as much of it as there is. */
export function salvageChip(
  parts: FoundParts,
  steps: ReadonlyMap<number, Step>,
  anchors: Anchors,
): SalvagedChip | null {
  const { base, chip: seal, journal } = anchors;
  const chain = unbroken(steps, base.seq + 1, base.hash);
  const { lists, whole } = wholeParts(parts, seal);
  if (whole && seal) {
    const chip = attempt(() => readChip(assemble(lists)));
    // Where the steps before the folding are broken, those after it can still be relied on.
    const after = journal?.seq === seal.seq ? unbroken(steps, seal.seq + 1, journal.digest) : [];
    const reaches = (chain.at(-1)?.seq ?? 0) >= seal.seq;
    if (chip) return goOn(chip, seal.seq, reaches ? chain : after, reaches, steps, journal);
  }
  const start = chain[0];
  if (start?.kind === 'start') {
    const chip = attempt(() => readChip(unpack(start.body)));
    if (chip) return goOn(chip, start.seq, chain, true, steps, journal);
  }
  return pieced(lists, seal);
}

/** A step that follows from the one before it, as far as that one's own hash goes. */
function sound(steps: ReadonlyMap<number, Step>, seq: number): Step {
  const step = steps.get(seq);
  const before = steps.get(seq - 1)?.hash ?? NO_HASH;
  if (!step || !sameBytes(step.hash, stepHash(before, step))) throw new Error('not as it was written');
  return step;
}

/** Applies the steps of `chain` after `from`; `complete`: the chain holds every step that is kept. */
function goOn(
  chip: Chip,
  from: number,
  chain: readonly Step[],
  complete: boolean,
  steps: ReadonlyMap<number, Step>,
  journal: Seal | undefined,
): SalvagedChip {
  let now = chip;
  let reached = from;
  for (const step of chain) {
    if (step.seq <= from) continue;
    const next = attempt(() => {
      const { forward, backward } = changesOf(step.of === null ? step : sound(steps, step.of));
      const changes = step.kind === 'undo' ? backward : forward;
      return applyEdit(now, readEdit({ label: step.label, changes }));
    });
    if (!next) break;
    now = next;
    reached = step.seq;
  }
  const beyond = [...steps.keys()].filter((seq) => seq > reached).length;
  const lost = Math.max(beyond, (journal?.seq ?? 0) - reached, 0);
  const report =
    lost > 0 ? [`The last ${lost} of the steps could not be read; the chip is as it was before them.`] : [];
  return { chip: now, report, exact: complete && lost === 0 };
}

/** The parts in order, and whether they are all that the seal names. */
function wholeParts(
  parts: FoundParts,
  seal: Seal | undefined,
): { lists: Record<PartKind, unknown[]>; whole: boolean } {
  const lists = { head: [] } as unknown as Record<PartKind, unknown[]>;
  const hashes: Uint8Array[] = [];
  for (const kind of ['head', ...LIST_KINDS] as const) {
    const list: unknown[] = [];
    const rows = [...parts.values()].filter((row) => row.kind === kind);
    for (const row of rows.sort((a, b) => Number(a.place) - Number(b.place))) {
      const value = attempt(() => JSON.parse(String(row.body)) as unknown);
      if (value === null) continue;
      list.push(value);
      hashes.push(row.hash as Uint8Array);
    }
    lists[kind] = list;
  }
  const whole =
    seal !== undefined && hashes.length === seal.rows && sameBytes(chipDigest(hashes), seal.digest);
  return { lists, whole };
}

const NO_HEAD = {
  name: 'Recovered',
  note: '',
  lengthUnit: 'um',
  outline: { width: 1_000_000_000, height: 1_000_000_000 },
  fluid: { name: 'water', temperature: 298.15 },
} as const;

/** As much of the chip as is whole, with stand-ins for what the rest cannot do without. */
function pieced(lists: Record<PartKind, unknown[]>, seal: Seal | undefined): SalvagedChip | null {
  const kept = LIST_KINDS.reduce((sum, kind) => sum + lists[kind].length, 0) + lists.head.length;
  if (kept === 0) return null;
  const report = [
    seal
      ? `Of ${seal.rows} parts of the chip ${kept} are whole and kept; edits made in the last moments may be missing.`
      : `${kept} parts of the chip are whole and kept; how many there were is not known.`,
  ];
  if (lists.head.length !== 1) {
    report.push(
      'Name, outline and fluid of the chip were lost: water at 25 °C and an outline of one metre stand for them.',
    );
    lists.head = [NO_HEAD];
  }
  const layers = new Set((lists.layer as Layer[]).map((layer) => layer.id));
  const add = (id: unknown): void => {
    if (typeof id !== 'string' || layers.has(id)) return;
    layers.add(id);
    lists.layer.push({ id, depth: 50_000, profile: { kind: 'rectangle' }, fillet: 0 });
    report.push(`Layer "${id}" was lost: one of 50 µm depth stands for it; give it its depth again.`);
  };
  for (const kind of ['channel', 'chamber', 'port', 'keep-out'] as const)
    for (const thing of lists[kind]) add((thing as { layer?: unknown }).layer);
  for (const via of lists.via) for (const id of (via as { layers?: unknown[] }).layers ?? []) add(id);
  const chip = attempt(() => readChip(assemble(lists))) ?? withoutTerms(lists, report);
  return chip ? { chip, report, exact: false } : null;
}

/** Targets and limits may name things that were lost. */
function withoutTerms(lists: Record<PartKind, unknown[]>, report: string[]): Chip | null {
  const count = lists.target.length + lists.limit.length;
  if (count === 0) return null;
  const good: Record<'target' | 'limit', unknown[]> = { target: [], limit: [] };
  for (const kind of ['target', 'limit'] as const) {
    for (const term of lists[kind]) {
      const alone = { ...lists, target: [], limit: [], [kind]: [term] };
      if (attempt(() => readChip(assemble(alone)))) good[kind].push(term);
    }
  }
  const lost = count - good.target.length - good.limit.length;
  report.push(`${lost} targets or limits name things that were lost; they are left out.`);
  return attempt(() => readChip(assemble({ ...lists, ...good })));
}
