import type { Chip } from '../../solver/chip/chip.ts';

export interface ChipEdit {
  readonly label: string;
  readonly changes: readonly unknown[];
}

interface Change {
  readonly part: keyof Chip;
  readonly value: unknown;
}

export function applyEdit(chip: Chip, edit: ChipEdit): Chip {
  const next: Record<string, unknown> = { ...chip };
  for (const change of edit.changes as Change[]) next[change.part] = change.value;
  return next as unknown as Chip;
}

export function invertEdit(chip: Chip, edit: ChipEdit): ChipEdit {
  return {
    label: edit.label,
    changes: (edit.changes as Change[]).map(({ part }) => ({ part, value: chip[part] })).reverse(),
  };
}
