import { expect, test } from 'vitest';
import { spoken } from './spoken.ts';

test('places are named as people say them, and figures stay with their units', () => {
  expect(spoken('shifts the flow through junction:2 by about 5.9 %, more than its 0.50 % accuracy')).toBe(
    'shifts the flow through junction 2 by about 5.9\u00a0%, more than its 0.50\u00a0% accuracy',
  );
  expect(spoken('must run at 2.8 µL/min within 8 % at 1.4 kPa, 60 µm deep')).toBe(
    'must run at 2.8\u00a0µL/min within 8\u00a0% at 1.4\u00a0kPa, 60\u00a0µm deep',
  );
});

test('what is no name of a place and no unit stays as it is', () => {
  for (const text of ['Is 3 more like it: yes.', 'port: none', 'in 2 shops', 'the 4 minor lines'])
    expect(spoken(text)).toBe(text);
});
