import { deflateRawSync, inflateRawSync } from 'node:zlib';

const PLAIN = 0;
const DEFLATED = 1;
const SMALL = 4096;
/** Bytes that one packed value may unfold to: of an honest one never so many times as it has packed. */
const MOST_UNPACKED = 256 * 1024 * 1024;
const MOST_TIMES = 200;

/** A JSON value as bytes; larger ones are compressed, where that does not make them look like a trap. */
export function pack(value: unknown): Uint8Array {
  const text = Buffer.from(JSON.stringify(value));
  if (text.length > SMALL) {
    const small = deflateRawSync(text, { level: 1 });
    if (text.length <= unfoldsTo(small.length)) return tagged(DEFLATED, small);
  }
  return tagged(PLAIN, text);
}

function unfoldsTo(packed: number): number {
  return Math.min(MOST_UNPACKED, SMALL + MOST_TIMES * packed);
}

function tagged(tag: number, body: Buffer): Uint8Array {
  const out = Buffer.allocUnsafe(1 + body.length);
  out[0] = tag;
  body.copy(out, 1);
  return out;
}

/** The value; throws where the bytes are not what `pack` writes or unfold to more than is allowed. */
export function unpack(bytes: Uint8Array): unknown {
  const body = bytes.subarray(1);
  if (bytes[0] === PLAIN) return JSON.parse(Buffer.from(body).toString('utf8'));
  if (bytes[0] !== DEFLATED) throw new Error('not packed');
  const text = inflateRawSync(body, { maxOutputLength: unfoldsTo(body.length) });
  return JSON.parse(text.toString('utf8'));
}
