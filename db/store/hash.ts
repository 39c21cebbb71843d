import { hash } from 'node:crypto';

export const NO_HASH = new Uint8Array(32);

/** SHA-256 of bytes or of a text in UTF-8. */
export function sha256(data: Uint8Array | string): Uint8Array {
  return hash('sha256', data, 'buffer');
}

/** SHA-256 of several fields, each with its length before it, so that no two lists share bytes. */
export function sha256Of(...fields: readonly (Uint8Array | string | number | null)[]): Uint8Array {
  const parts: Uint8Array[] = [];
  for (const field of fields) {
    const bytes = field instanceof Uint8Array ? field : Buffer.from(field === null ? '' : String(field));
    const head = Buffer.alloc(5);
    head.writeUInt8(field === null ? 0 : 1, 0);
    head.writeUInt32LE(bytes.length, 1);
    parts.push(head, bytes);
  }
  return sha256(Buffer.concat(parts));
}

export function sameBytes(a: unknown, b: Uint8Array): boolean {
  return a instanceof Uint8Array && Buffer.compare(a, b) === 0;
}
