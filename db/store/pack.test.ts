import { deflateRawSync } from 'node:zlib';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { pack, unpack } from './pack.ts';

test('values come back as they went, small and large, however regular', () => {
  fc.assert(
    fc.property(fc.jsonValue(), (value) => {
      const plain = JSON.parse(JSON.stringify(value)) as unknown;
      expect(unpack(pack(plain))).toEqual(plain);
    }),
  );
  const regular = new Array(400_000).fill(0);
  expect(unpack(pack(regular))).toEqual(regular);
  const words = Array.from({ length: 20_000 }, (_, index) => ({ id: `c${index}` }));
  expect(unpack(pack(words))).toEqual(words);
  expect(pack(words).length).toBeLessThan(JSON.stringify(words).length / 3);
});

test('what unfolds to more than an honest value would is refused before it fills the memory', () => {
  const bomb = Buffer.concat([Buffer.from([1]), deflateRawSync(Buffer.alloc(50_000_000, 0x20))]);
  expect(() => unpack(bomb)).toThrow();
  expect(() => unpack(Buffer.from([7, 1, 2]))).toThrow('not packed');
  expect(() => unpack(Buffer.from([]))).toThrow('not packed');
});
