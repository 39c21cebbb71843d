import { expect, test } from 'vitest';
import { SECTION_VERSION, SectionCache } from './section-cache.ts';
import { sectionOf } from './section-of.ts';
import type { UnitSection } from './unit-section.ts';

const profile = { kind: 'trapezoid', wallAngle: 77 } as const;

test('a shape is solved once, whatever its size', () => {
  const cache = new SectionCache();
  const a = sectionOf(profile, 3e-4, 1e-4, '', { cache });
  expect(cache.size).toBe(1);
  const b = sectionOf(profile, 6e-5, 2e-5, '', { cache });
  expect(cache.size).toBe(1);
  expect(b.conductance / a.conductance / 0.2 ** 4).toBeCloseTo(1, 12);
  // Another shape, and another accuracy, are not the same thing.
  sectionOf(profile, 3.1e-4, 1e-4, '', { cache });
  sectionOf(profile, 3e-4, 1e-4, '', { cache, accuracy: 1e-2 });
  expect(cache.size).toBe(3);
  // All flat middles beyond ten depths are one.
  sectionOf(profile, 3e-3, 1e-4, '', { cache });
  sectionOf(profile, 4e-3, 1e-4, '', { cache });
  expect(cache.size).toBe(4);
});

test('closed forms need no cache', () => {
  const cache = new SectionCache();
  sectionOf({ kind: 'rectangle' }, 2, 1, '', { cache });
  sectionOf({ kind: 'circle' }, 1, 1, '', { cache });
  sectionOf({ kind: 'triangle' }, 1, Math.sqrt(0.75), '', { cache });
  expect(cache.size).toBe(0);
});

test('what is kept comes back through text to the last bit', () => {
  const cache = new SectionCache();
  const before = sectionOf(profile, 3e-4, 1e-4, '', { cache });
  const text = JSON.stringify(cache.entries());
  const other = new SectionCache();
  expect(other.load(JSON.parse(text))).toBe(1);
  expect(other.size).toBe(1);
  expect(sectionOf(profile, 3e-4, 1e-4, '', { cache: other })).toEqual(before);
  expect(other.size).toBe(1);
});

const unit: UnitSection = {
  conductance: 1,
  top: 1,
  topAt: [0, 0],
  peakShear: 1,
  peakShearAt: [0, 0],
  floorShear: 1,
  sideShear: 1,
  error: 0,
  shearError: 0,
  wall: [0, 0, 1],
};

test('flows alone are kept and come back as well', () => {
  const cache = new SectionCache(2);
  for (const key of ['a', 'b', 'c']) cache.setFlow(key, 1e-5, 0.5);
  expect(cache.flow('a', 1e-5)).toBeUndefined();
  expect(cache.flow('b', 1e-4)).toBeUndefined();
  const other = new SectionCache();
  expect(other.load(JSON.parse(JSON.stringify(cache.entries())))).toBe(2);
  expect(other.flow('b', 1e-5)).toBe(0.5);
  const flow = { key: 'a', accuracy: 1e-5, conductance: 1 };
  const bad = [7, { ...flow, key: 1 }, { ...flow, accuracy: 0 }, { ...flow, conductance: 'x' }];
  expect(other.load({ version: SECTION_VERSION, flows: bad })).toBe(0);
});

test('the least recently used goes first', () => {
  const cache = new SectionCache(3);
  for (const key of ['a', 'b', 'c']) cache.set(key, 1e-3, unit);
  expect(cache.get('a', 1e-3)).toBe(unit);
  cache.set('d', 1e-3, unit);
  expect(cache.get('b', 1e-3)).toBeUndefined();
  expect(cache.entries().sections.map(({ key }) => key)).toEqual(['c', 'a', 'd']);
});

test('what is not ours, or of another version, is left out', () => {
  const kept = { key: 'a', accuracy: 1e-3, unit };
  const version = SECTION_VERSION;
  const cache = new SectionCache();
  for (const foreign of [null, 7, 'x', [], {}, { version }, { version: version + 1, sections: [kept] }]) {
    expect(cache.load(foreign)).toBe(0);
  }
  const bad = [
    null,
    { ...kept, key: 3 },
    { ...kept, accuracy: -1 },
    { ...kept, unit: { ...unit, conductance: 0 } },
    { ...kept, unit: { ...unit, conductance: '1' } },
    { ...kept, unit: { ...unit, topAt: [0] } },
    { ...kept, unit: { ...unit, peakShear: null } },
    { ...kept, unit: { ...unit, floorShear: null } },
    { ...kept, unit: { ...unit, wall: [0, 1] } },
    { ...kept, unit: { ...unit, wall: [0, 1, null] } },
  ];
  expect(cache.load({ version, sections: bad })).toBe(0);
  const open = { ...kept, unit: { ...unit, peakShear: null, peakShearAt: null } };
  expect(cache.load({ version, sections: [...bad, kept, { ...open, key: 'b' }] })).toBe(2);
  expect(cache.get('b', 1e-3)?.peakShear).toBeNull();
});
