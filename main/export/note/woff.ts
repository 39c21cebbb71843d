import { inflateSync } from 'node:zlib';

const HEAD = 44;
const ENTRY = 20;

/**
 * The font inside a WOFF file as plain TrueType (WOFF File Format 1.0, W3C Recommendation of 13 December
 * 2012). A reader of the packed file unpacks a whole table again for every glyph that it takes; one of the
 * plain file does not.
 */
export function unpackWoff(woff: Uint8Array): Uint8Array {
  const view = new DataView(woff.buffer, woff.byteOffset, woff.byteLength);
  if (view.getUint32(0) !== 0x774f4646) throw new RangeError('not a WOFF file');
  const count = view.getUint16(12);
  const tables = Array.from({ length: count }, (_, i) => {
    const at = HEAD + ENTRY * i;
    const offset = view.getUint32(at + 4);
    const packed = woff.subarray(offset, offset + view.getUint32(at + 8));
    const length = view.getUint32(at + 12);
    return {
      tag: view.getUint32(at),
      checksum: view.getUint32(at + 16),
      data: packed.length < length ? inflateSync(packed) : packed,
    };
  });
  const padded = (length: number): number => (length + 3) & ~3;
  const first = 12 + 16 * count;
  const size = tables.reduce((sum, { data }) => sum + padded(data.length), first);
  const font = new Uint8Array(size);
  const out = new DataView(font.buffer);
  out.setUint32(0, view.getUint32(4));
  const power = Math.floor(Math.log2(count));
  out.setUint16(4, count);
  out.setUint16(6, 16 * 2 ** power);
  out.setUint16(8, power);
  out.setUint16(10, 16 * count - 16 * 2 ** power);
  let offset = first;
  for (const [i, { tag, checksum, data }] of tables.entries()) {
    const at = 12 + 16 * i;
    out.setUint32(at, tag);
    out.setUint32(at + 4, checksum);
    out.setUint32(at + 8, offset);
    out.setUint32(at + 12, data.length);
    font.set(data, offset);
    offset += padded(data.length);
  }
  return font;
}
