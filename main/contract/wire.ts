/**
 * A value as bytes: JSON with its byte arrays taken out and set behind it, so that a solved cell
 * travels as it is. Layout: length of the JSON (uint32, little endian), the JSON, then the arrays one
 * after another; in the JSON an array stands as {"$bytes": [offset, length]}.
 */

const MARK = '$bytes';

/** Whether byte arrays lie in `value`: most messages hold none, and are written several times as fast. */
function holdsBytes(value: unknown): boolean {
  if (typeof value !== 'object' || value === null) return false;
  if (value instanceof Uint8Array) return true;
  if (Array.isArray(value)) return value.some(holdsBytes);
  for (const key in value) if (holdsBytes((value as Record<string, unknown>)[key])) return true;
  return false;
}

/** Bytes of `value`. Throws on what JSON cannot hold (cycles). */
export function encode(value: unknown): Uint8Array<ArrayBuffer> {
  if (!holdsBytes(value)) return framed(JSON.stringify(value), [], 0);
  const blobs: Uint8Array[] = [];
  let total = 0;
  // Looked up in its holder: some byte arrays would turn themselves into lists of numbers first.
  const text = JSON.stringify(value, function (this: Record<string, unknown>, key, given: unknown) {
    const part = this[key];
    if (!(part instanceof Uint8Array)) return given;
    const at = total;
    blobs.push(part);
    total += part.length;
    return { [MARK]: [at, part.length] };
  });
  return framed(text, blobs, total);
}

function framed(text: string, blobs: readonly Uint8Array[], total: number): Uint8Array<ArrayBuffer> {
  const head = new TextEncoder().encode(text);
  const out = new Uint8Array(4 + head.length + total);
  new DataView(out.buffer).setUint32(0, head.length, true);
  out.set(head, 4);
  let at = 4 + head.length;
  for (const blob of blobs) {
    out.set(blob, at);
    at += blob.length;
  }
  return out;
}

/** The value of `bytes`; throws where they are not what `encode` writes. */
export function decode(bytes: Uint8Array): unknown {
  if (bytes.length < 4) throw new Error('cut short');
  const length = new DataView(bytes.buffer, bytes.byteOffset).getUint32(0, true);
  if (4 + length > bytes.length) throw new Error('cut short');
  const text = new TextDecoder('utf-8', { fatal: true }).decode(bytes.subarray(4, 4 + length));
  const tail = bytes.subarray(4 + length);
  if (!text.includes(`"${MARK}"`)) return JSON.parse(text);
  return JSON.parse(text, (_key, part: unknown) => {
    if (typeof part !== 'object' || part === null || !(MARK in part)) return part;
    const span = part[MARK];
    if (!Array.isArray(span) || span.length !== 2) throw new Error('a span that is none');
    const [at, size] = span as [unknown, unknown];
    if (!Number.isInteger(at) || !Number.isInteger(size)) throw new Error('a span that is none');
    if ((at as number) < 0 || (size as number) < 0 || (at as number) + (size as number) > tail.length)
      throw new Error('a span beyond the end');
    return tail.slice(at as number, (at as number) + (size as number));
  });
}
