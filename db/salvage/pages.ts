/**
 * Rows read off the pages of a project file one by one, without the tree that leads to them: what a
 * broken page cuts off is found all the same. The layout of pages and records is the published file
 * format of the engine (SQLite Database File Format, sections 1.6 and 2).
 */

const PAGE = 4096;
/** Kinds of page that hold records, and where the list of them begins. */
const TABLE_LEAF = 0x0d;
const INDEX_LEAF = 0x0a;
const INDEX_INNER = 0x02;
/** Bytes that one record may have. */
const MOST_RECORD = 64 * 1024 * 1024;

export type RawValue = number | bigint | string | Uint8Array | null;

/** A record as it lies in the file; `rowid` is null in tables that have none. */
export interface RawRecord {
  readonly rowid: number | null;
  readonly values: readonly RawValue[];
}

/** Every record of every page that can be read, stale ones of freed pages among them. */
export function* rawRecords(bytes: Uint8Array): Generator<RawRecord> {
  const file = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length);
  const pages = Math.floor(file.length / PAGE);
  for (let page = 0; page < pages; page += 1) {
    const start = page * PAGE;
    const head = start + (page === 0 ? 100 : 0);
    const kind = file[head];
    if (kind !== TABLE_LEAF && kind !== INDEX_LEAF && kind !== INDEX_INNER) continue;
    const pointers = head + (kind === INDEX_INNER ? 12 : 8);
    const count = Math.min(file.readUInt16BE(head + 3), Math.floor((start + PAGE - pointers) / 2));
    for (let cell = 0; cell < count; cell += 1) {
      const at = start + file.readUInt16BE(pointers + 2 * cell);
      try {
        yield recordAt(file, at, start + PAGE, kind);
      } catch {
        // This one is broken; the next may not be.
      }
    }
  }
}

class Cursor {
  readonly bytes: Buffer;
  at: number;

  constructor(bytes: Buffer, at: number) {
    this.bytes = bytes;
    this.at = at;
  }

  /** Up to nine bytes, seven bits each, the most significant first. */
  varint(): number {
    let value = 0n;
    for (let index = 0; index < 9; index += 1) {
      const byte = this.bytes[this.at];
      if (byte === undefined) throw new Error('cut short');
      this.at += 1;
      if (index === 8) {
        value = (value << 8n) | BigInt(byte);
        break;
      }
      value = (value << 7n) | BigInt(byte & 0x7f);
      if ((byte & 0x80) === 0) break;
    }
    return Number(BigInt.asIntN(64, value));
  }
}

function recordAt(file: Buffer, at: number, end: number, kind: number): RawRecord {
  const cursor = new Cursor(file, kind === INDEX_INNER ? at + 4 : at);
  const size = cursor.varint();
  const rowid = kind === TABLE_LEAF ? cursor.varint() : null;
  if (size <= 0 || size > MOST_RECORD || cursor.at > end) throw new Error('no record');
  return { rowid, values: valuesOf(payload(file, cursor.at, size, kind)) };
}

/** The whole of a record, gathered from its page and the pages it runs over to. */
function payload(file: Buffer, at: number, size: number, kind: number): Buffer {
  const most = kind === TABLE_LEAF ? PAGE - 35 : Math.floor(((PAGE - 12) * 64) / 255) - 23;
  const least = Math.floor(((PAGE - 12) * 32) / 255) - 23;
  if (size <= most) return file.subarray(at, at + size);
  const fitting = least + ((size - least) % (PAGE - 4));
  const local = fitting <= most ? fitting : least;
  const parts = [file.subarray(at, at + local)];
  let left = size - local;
  let next = file.readUInt32BE(at + local);
  while (left > 0) {
    const start = (next - 1) * PAGE;
    if (next === 0 || start + PAGE > file.length) throw new Error('cut short');
    const part = file.subarray(start + 4, start + 4 + Math.min(left, PAGE - 4));
    parts.push(part);
    left -= part.length;
    next = file.readUInt32BE(start);
  }
  return Buffer.concat(parts);
}

function valuesOf(record: Buffer): RawValue[] {
  const head = new Cursor(record, 0);
  const headSize = head.varint();
  const types: number[] = [];
  while (head.at < headSize) types.push(head.varint());
  let at = headSize;
  return types.map((type) => {
    const size = sizeOf(type);
    if (at + size > record.length) throw new Error('cut short');
    const value = decoded(record, at, type, size);
    at += size;
    return value;
  });
}

function sizeOf(type: number): number {
  if (type >= 12) return Math.floor((type - 12) / 2);
  const size = [0, 1, 2, 3, 4, 6, 8, 8, 0, 0][type];
  if (size === undefined) throw new Error('no such type');
  return size;
}

function decoded(record: Buffer, at: number, type: number, size: number): RawValue {
  if (type === 0) return null;
  if (type === 7) return record.readDoubleBE(at);
  if (type === 8 || type === 9) return type - 8;
  if (type === 6) return Number(record.readBigInt64BE(at));
  if (type < 6) return record.readIntBE(at, size);
  const bytes = record.subarray(at, at + size);
  return type % 2 === 0 ? new Uint8Array(bytes) : bytes.toString('utf8');
}
