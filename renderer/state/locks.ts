import type { Chip } from '../../solver/chip/chip.ts';
import { findPart, placesOf, refOfPart } from '../edits/parts.ts';
import type { Alteration } from '../tools/tool.ts';
import { partOf, type Ref, readRef } from './ref.ts';

/** Locks as they were kept with a project; whatever is no name of a part is left out. */
export function readLocks(view: unknown): ReadonlySet<Ref> {
  const locked =
    typeof view === 'object' && view !== null && 'locked' in view && Array.isArray(view.locked)
      ? view.locked
      : [];
  return new Set(locked.filter((ref): ref is Ref => typeof ref === 'string' && partOf(ref) !== null));
}

/** Why a change must not be made: it moves or deletes what is locked. Null where it does not. */
export function lockRefusal(
  chip: Chip,
  locked: ReadonlySet<Ref>,
  { put = [], drop = [] }: Alteration,
): string | null {
  if (locked.size === 0) return null;
  const gone = drop.find((ref) => locked.has(ref));
  if (gone) return `${readRef(gone).id} is locked. Unlock it first to delete it.`;
  for (const part of put) {
    const ref = refOfPart(part);
    if (!locked.has(ref)) continue;
    const before = findPart(chip, ref);
    if (!before) continue;
    const [now, then] = [placesOf(part), placesOf(before)];
    const same =
      now.length === then.length && now.every((p, i) => p[0] === then[i]![0] && p[1] === then[i]![1]);
    if (!same) return `${part.value.id} is locked, and this would move it. Unlock it first.`;
  }
  return null;
}

/** Locks follow parts that get another name. */
export function renamedLocks(
  locked: ReadonlySet<Ref>,
  renames: NonNullable<Alteration['rename']>,
): ReadonlySet<Ref> {
  const to = new Map(renames.map((rename) => [rename.ref, `${readRef(rename.ref).kind}:${rename.to}`]));
  return renames.some(({ ref }) => locked.has(ref))
    ? new Set([...locked].map((ref) => to.get(ref) ?? ref))
    : locked;
}
