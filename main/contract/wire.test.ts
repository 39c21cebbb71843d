import fc from 'fast-check';
import { expect, test } from 'vitest';
import { decode, encode } from './wire.ts';

test('values with byte arrays come back as they went', () => {
  fc.assert(
    fc.property(
      fc.array(fc.record({ key: fc.string(), bytes: fc.uint8Array() })),
      fc.jsonValue(),
      (entries, rest) => {
        const plain = JSON.parse(JSON.stringify(rest)) as unknown;
        expect(decode(encode({ entries, plain }))).toEqual({ entries, plain });
      },
    ),
  );
});

test('a buffer of Node passes as bytes like any other array', () => {
  expect(decode(encode({ bytes: Buffer.from([7, 8]) }))).toEqual({ bytes: new Uint8Array([7, 8]) });
});

test('bytes that are no message are refused, whatever they are', () => {
  const whole = encode({ entries: [{ key: 'a', bytes: new Uint8Array([1, 2, 3]) }] });
  for (let cut = 0; cut < whole.length; cut += 1) expect(() => decode(whole.subarray(0, cut))).toThrow();
  expect(() => decode(encode({ at: { $bytes: [0, 1e9] } }))).toThrow('beyond the end');
  expect(() => decode(encode({ at: { $bytes: [-1, 1] } }))).toThrow('beyond the end');
  expect(() => decode(encode({ at: { $bytes: 'x' } }))).toThrow('none');
});
