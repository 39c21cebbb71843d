/** Lengths of findings as people read them, three digits. */

/** @param nm "84 µm", "1.5 mm" */
export function length(nm: number): string {
  const [value, unit] = nm >= 1e6 ? [nm / 1e6, 'mm'] : nm >= 1e3 ? [nm / 1e3, 'µm'] : [nm, 'nm'];
  return `${Number(value.toPrecision(3))} ${unit}`;
}

export const digits = (value: number, count = 2): string => `${Number(value.toPrecision(count))}`;

export const percent = (share: number): string => `${digits(100 * share)} %`;

/** nm to m */
export const METRE = 1e9;

export const placeOf = (x: number, y: number): readonly [number, number] => [x / METRE, y / METRE];
