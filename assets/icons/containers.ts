/** A picture as PNG, square, of `size` pixels. */
export interface Picture {
  readonly size: number;
  readonly png: Uint8Array;
}

/** The pictures as an ICO file: a directory of entries, then the PNGs. */
export function icoOf(pictures: readonly Picture[]): Buffer {
  const head = Buffer.alloc(6 + 16 * pictures.length);
  head.writeUInt16LE(1, 2);
  head.writeUInt16LE(pictures.length, 4);
  let at = head.length;
  for (const [index, { size, png }] of pictures.entries()) {
    const entry = 6 + 16 * index;
    // 256 is written as 0.
    head.writeUInt8(size % 256, entry);
    head.writeUInt8(size % 256, entry + 1);
    head.writeUInt16LE(1, entry + 4);
    head.writeUInt16LE(32, entry + 6);
    head.writeUInt32LE(png.length, entry + 8);
    head.writeUInt32LE(at, entry + 12);
    at += png.length;
  }
  return Buffer.concat([head, ...pictures.map(({ png }) => png)]);
}

/** Kinds of an ICNS file by pixels; some sizes stand twice, as themselves and as the fine one of half the size. */
const ICNS: readonly (readonly [string, number])[] = [
  ['icp4', 16],
  ['icp5', 32],
  ['ic11', 32],
  ['ic12', 64],
  ['ic07', 128],
  ['ic08', 256],
  ['ic13', 256],
  ['ic09', 512],
  ['ic14', 512],
  ['ic10', 1024],
];

/** The pictures as an ICNS file. Throws where a size that it needs is missing. */
export function icnsOf(pictures: readonly Picture[]): Buffer {
  const parts = ICNS.map(([kind, size]) => {
    const picture = pictures.find((one) => one.size === size);
    if (!picture) throw new Error(`no picture of ${size} pixels`);
    const head = Buffer.alloc(8);
    head.write(kind, 'latin1');
    head.writeUInt32BE(8 + picture.png.length, 4);
    return Buffer.concat([head, picture.png]);
  });
  const body = Buffer.concat(parts);
  const head = Buffer.alloc(8);
  head.write('icns', 'latin1');
  head.writeUInt32BE(8 + body.length, 4);
  return Buffer.concat([head, body]);
}
