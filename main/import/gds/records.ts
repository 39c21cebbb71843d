import { Problem } from '../../../solver/problem/problem.ts';

/** Record types of the GDSII stream format, release 6. */
export const RECORD = {
  HEADER: 0x00,
  BGNLIB: 0x01,
  LIBNAME: 0x02,
  UNITS: 0x03,
  ENDLIB: 0x04,
  BGNSTR: 0x05,
  STRNAME: 0x06,
  ENDSTR: 0x07,
  BOUNDARY: 0x08,
  PATH: 0x09,
  SREF: 0x0a,
  AREF: 0x0b,
  TEXT: 0x0c,
  LAYER: 0x0d,
  DATATYPE: 0x0e,
  WIDTH: 0x0f,
  XY: 0x10,
  ENDEL: 0x11,
  SNAME: 0x12,
  COLROW: 0x13,
  NODE: 0x15,
  STRANS: 0x1a,
  MAG: 0x1b,
  ANGLE: 0x1c,
  PATHTYPE: 0x21,
  BOX: 0x2d,
  BOXTYPE: 0x2e,
  BGNEXTN: 0x30,
  ENDEXTN: 0x31,
} as const;

export interface StreamRecord {
  readonly type: number;
  /** Byte at which it begins. */
  readonly at: number;
  readonly data: DataView;
}

/** The records of a stream one after another; stops after ENDLIB. */
export function* records(bytes: Uint8Array): Generator<StreamRecord> {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  let at = 0;
  while (at < bytes.length) {
    const length = at + 4 <= bytes.length ? view.getUint16(at) : 0;
    if (length < 4 || length % 2 !== 0 || at + length > bytes.length) {
      throw new Problem(
        'syntax',
        at + length > bytes.length || at + 4 > bytes.length
          ? 'The file ends inside a record.'
          : `A record cannot be ${length} bytes long.`,
        `byte ${at}`,
        'The file is damaged or cut short: save or copy it again.',
      );
    }
    const type = bytes[at + 2];
    yield { type, at, data: new DataView(bytes.buffer, bytes.byteOffset + at + 4, length - 4) };
    if (type === RECORD.ENDLIB) return;
    at += length;
  }
  throw new Problem(
    'syntax',
    'The file has no end of library.',
    `byte ${at}`,
    'It was cut short: save or copy it again.',
  );
}

function short(record: StreamRecord, bytes: number): void {
  if (record.data.byteLength >= bytes) return;
  throw new Problem(
    'syntax',
    `A record of type ${record.type} is shorter than its ${bytes} bytes.`,
    `byte ${record.at}`,
    'The file is damaged: save it again.',
  );
}

export function int16(record: StreamRecord, index = 0): number {
  short(record, 2 * index + 2);
  return record.data.getInt16(2 * index);
}

export function int32(record: StreamRecord, index = 0): number {
  short(record, 4 * index + 4);
  return record.data.getInt32(4 * index);
}

/** Eight bytes: sign, exponent of 16 in excess 64, fraction of 56 bits. */
export function real8(record: StreamRecord, index = 0): number {
  short(record, 8 * index + 8);
  const high = record.data.getUint32(8 * index);
  const low = record.data.getUint32(8 * index + 4);
  const fraction = ((high & 0xff_ff_ff) * 2 ** 32 + low) / 2 ** 56;
  return (high >>> 31 ? -1 : 1) * fraction * 16 ** (((high >>> 24) & 0x7f) - 64);
}

export function ascii({ data }: StreamRecord): string {
  const bytes = new Uint8Array(data.buffer, data.byteOffset, data.byteLength);
  return new TextDecoder('latin1').decode(bytes).replace(/\0+$/, '');
}
