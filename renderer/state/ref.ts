/**
 * What can be pointed at, as text: "channel:feed", "chamber:well", "via:v1", "port:in", "keep-out:clamp" are
 * parts of the chip; "junction:3", "piece:feed#2", "route:in>out", "finding:4" and "chip" are read from it.
 */
export type Ref = string;

export const PARTS = ['channel', 'chamber', 'via', 'port', 'keep-out'] as const;
export type Part = (typeof PARTS)[number];

export const refTo = (kind: string, id: string): Ref => `${kind}:${id}`;

export function readRef(ref: Ref): { readonly kind: string; readonly id: string } {
  const colon = ref.indexOf(':');
  return colon < 0 ? { kind: ref, id: '' } : { kind: ref.slice(0, colon), id: ref.slice(colon + 1) };
}

/** The part a reference names, or null where it names something read from the chip. */
export function partOf(ref: Ref): { readonly kind: Part; readonly id: string } | null {
  const { kind, id } = readRef(ref);
  const known = PARTS.find((part) => part === kind);
  return known ? { kind: known, id } : null;
}
