import { deflateRawSync, inflateRawSync } from 'node:zlib';

const PLAIN = 0;
const DEFLATED = 1;
const SMALL = 4096;
/** Bytes that one packed value may unfold to. */
export const MOST_UNPACKED = 256 * 1024 * 1024;

/** A JSON value as bytes; larger ones are compressed. */
export function pack(value: unknown): Uint8Array {
  const text = Buffer.from(JSON.stringify(value));
  const body = text.length > SMALL ? deflateRawSync(text, { level: 1 }) : text;
  const out = Buffer.allocUnsafe(1 + body.length);
  out[0] = text.length > SMALL ? DEFLATED : PLAIN;
  body.copy(out, 1);
  return out;
}

/** The value; throws where the bytes are not what `pack` writes or unfold to more than is allowed. */
export function unpack(bytes: Uint8Array): unknown {
  const body = bytes.subarray(1);
  if (bytes[0] === PLAIN) return JSON.parse(Buffer.from(body).toString('utf8'));
  if (bytes[0] !== DEFLATED) throw new Error('not packed');
  return JSON.parse(inflateRawSync(body, { maxOutputLength: MOST_UNPACKED }).toString('utf8'));
}
