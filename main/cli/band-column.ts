import type { Column } from './table.ts';

/** How far figures may be off by what the solver knows of its errors: a column beside them, where any is known. */
export const bandColumn = (head: string, bands: readonly (number | null | undefined)[]): Column[] =>
  bands.some((band) => band != null)
    ? [{ head, kind: 'share', digits: 2, values: bands.map((band) => band ?? null) }]
    : [];
