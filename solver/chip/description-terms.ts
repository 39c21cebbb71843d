import { z } from 'zod';
import { BOUNDS } from './bounds.ts';
import type { Limit, LimitPlace, Target } from './chip.ts';
import { defined } from './description-parts.ts';
import { Fault } from './schema-fault.ts';
import { id, keyed, list, pair, quantity, readId, readList, text } from './schema-fields.ts';
import { step } from './schema-parse.ts';

/** What the designer wants and what the cells bear: targets and limits of a description. */

export const target = keyed(
  {
    port: id().optional(),
    channel: id().optional(),
    share: quantity('share').optional(),
    flow: quantity('flow').optional(),
    within: quantity('share'),
  },
  { within: '"5 %"' },
).transform(
  step(({ port, channel, share, flow, within }): Target => {
    const one = (a: unknown, b: unknown, words: string, remedy: string): void => {
      if ((a === undefined) !== (b === undefined)) return;
      throw new Fault(
        a === undefined ? 'missing' : 'quantity',
        a === undefined ? `has neither ${words.replace(' and ', ' nor ')}.` : `has both ${words}.`,
        remedy,
      );
    };
    one(port, channel, 'a port and a channel', 'Name the one that the target is for.');
    one(share, flow, 'a share and a flow', 'Give the one that is wanted.');
    const place = port !== undefined ? { port } : { channel: channel! };
    return { ...place, ...(share !== undefined ? { share } : { flow: flow! }), within };
  }),
);

const where = z.unknown().transform(
  step((value): string | [string, string] => {
    if (!Array.isArray(value)) return readId(value);
    const [from, to] = readList(value, 2, 2);
    return [readId(from), readId(to)];
  }),
);

const curvePoint = z
  .unknown()
  .transform(step((value) => readList(value, 2, 2)))
  .pipe(z.tuple([quantity('time'), quantity('stress')]));

const law = keyed(
  { constant: quantity('number'), stress: quantity('number'), time: quantity('number') },
  { constant: '3.62e-5', stress: '2.416', time: '0.785' },
);

/** The four ways to state a limit, each with the keys that go with it and an example. */
const WAYS = {
  shear: {},
  floor: { area: '0.9' },
  curve: {},
  law: { damage: '"0.1 %"', passes: '1' },
} as const;

export const limit = keyed(
  {
    name: text(BOUNDS.name),
    where: where.optional(),
    cellDiameter: quantity('length').optional(),
    shear: quantity('stress').optional(),
    floor: pair(quantity('stress')).optional(),
    area: quantity('share').optional(),
    curve: list(curvePoint, BOUNDS.curve, 1).optional(),
    law: law.optional(),
    damage: quantity('share').optional(),
    passes: quantity('number').optional(),
  },
  { name: '"suspended cells"' },
).transform(
  step((value): Limit => {
    const ways = (Object.keys(WAYS) as (keyof typeof WAYS)[]).filter((way) => value[way] !== undefined);
    const [way] = ways;
    if (way === undefined || ways.length > 1) {
      throw new Fault(
        way === undefined ? 'missing' : 'quantity',
        way === undefined ? 'states no limit.' : `states ${ways.join(' and ')} at once.`,
        'Give one of "shear", "floor", "curve" or "law".',
      );
    }
    const passes = value.passes ?? (way === 'law' ? 1 : undefined);
    const given = defined({ ...value, passes });
    for (const [owner, keys] of Object.entries(WAYS)) {
      for (const [key, example] of Object.entries(keys)) {
        const there = Object.hasOwn(given, key);
        if (there === (owner === way)) continue;
        throw there
          ? new Fault('quantity', `goes with "${owner}", not with "${way}".`, `Take "${key}" away.`, [key])
          : new Fault('missing', `has no "${key}".`, `Add "${key}", such as ${example}.`);
      }
    }
    if (given.name.trim() === '') throw new Fault('missing', 'is empty.', 'Give the limit a name.', ['name']);
    return given as LimitPlace as Limit;
  }),
);
