import fc from 'fast-check';
import type {
  Chamber,
  Channel,
  Chip,
  Drive,
  KeepOut,
  Layer,
  Limit,
  Point,
  Port,
  Target,
  Tolerance,
  Via,
} from '../../solver/chip/chip.ts';
import { PROCESS_KINDS } from '../../solver/chip/making.ts';
import type { FluidSpec } from '../../solver/fluid/spec.ts';
import type { Profile } from '../../solver/section/profile.ts';

/** Chips that a description may hold, in every variety that it has words for; not all of them can be solved. */

const plan = fc.integer({ min: -1_000_000_000, max: 1_000_000_000 });
const length = fc.integer({ min: 1, max: 1_000_000_000 });
const size = fc.double({ min: 1e-15, max: 1e9, noNaN: true });
const signed = fc.oneof(
  fc.constant(0),
  size,
  size.map((value) => -value),
);
const share = fc.double({ min: 1e-9, max: 1, noNaN: true });
const word = fc
  .string({ unit: 'grapheme', minLength: 1, maxLength: 12 })
  .filter(
    (text) => text.trim() !== '' && !/[\p{Cc}\p{Cs}\p{Zl}\p{Zp}\u202a-\u202e\u2066-\u2069]/u.test(text),
  );

const profile: fc.Arbitrary<Profile> = fc.oneof(
  fc.constantFrom<Profile>(
    { kind: 'rectangle' },
    { kind: 'rounded' },
    { kind: 'ellipse' },
    { kind: 'triangle' },
  ),
  fc
    .double({ min: 90, max: 170, noNaN: true })
    .map((wallAngle): Profile => ({ kind: 'trapezoid', wallAngle })),
  fc
    .tuple(fc.double({ min: 1e-6, max: 1e-3, noNaN: true }), fc.double({ min: 1e-6, max: 1e-3, noNaN: true }))
    .map(
      ([w, h]): Profile => ({
        kind: 'polygon',
        points: [
          [0, 0],
          [w, 0],
          [w / 3, h],
        ],
      }),
    ),
);

const tolerance: fc.Arbitrary<Tolerance> = fc.oneof(
  fc.double({ min: 1e-9, max: 0.99, noNaN: true }).map((value) => ({ share: value })),
  length.map((value) => ({ length: value })),
);

const layer = (id: string): fc.Arbitrary<Layer> =>
  fc.record(
    {
      id: fc.constant(id),
      depth: length,
      profile,
      fillet: fc.nat(1_000_000),
      tolerance: fc.record({ depth: tolerance, width: tolerance }, { requiredKeys: [] }),
      roof: fc.record(
        {
          modulus: size,
          thickness: size,
          poisson: fc.double({ min: 1e-9, max: 0.5, noNaN: true }),
          law: fc.constant('thick' as const),
          constant: size,
        },
        { requiredKeys: ['modulus', 'thickness', 'poisson'] },
      ),
    },
    { requiredKeys: ['id', 'depth', 'profile', 'fillet'] },
  );

/** Points that go on in one direction, so that no vertex turns straight back. */
const path: fc.Arbitrary<Point[]> = fc
  .tuple(
    fc.integer({ min: -1e8, max: 1e8 }),
    fc.array(fc.tuple(fc.integer({ min: 1e4, max: 1e7 }), fc.integer({ min: -1e8, max: 1e8 })), {
      minLength: 2,
      maxLength: 5,
    }),
    fc.boolean(),
  )
  .map(([start, steps, upright]) => {
    let along = start;
    return steps.map(([step, across]): Point => {
      along += step;
      return upright ? [across, along] : [along, across];
    });
  });

const channel = (id: string, layers: readonly string[]): fc.Arbitrary<Channel> =>
  fc.record({
    id: fc.constant(id),
    layer: fc.constantFrom(...layers),
    path,
    width: fc.oneof(
      length.map((w): [number, number] => [w, w]),
      fc.tuple(length, length),
    ),
    bendRadius: fc.oneof(fc.constant(0), length),
  });

const chamber = (id: string, layers: readonly string[]): fc.Arbitrary<Chamber> =>
  fc.record({
    id: fc.constant(id),
    layer: fc.constantFrom(...layers),
    outline: fc
      .tuple(fc.integer({ min: -1e8, max: 1e8 }), fc.integer({ min: 1, max: 1e8 }))
      .map(([x, w]): Point[] => [
        [x, -w],
        [x + w, 0],
        [x, w],
        [x - w, 0],
      ]),
  });

const via = (id: string, layers: readonly string[]): fc.Arbitrary<Via> =>
  fc.record({
    id: fc.constant(id),
    at: fc.tuple(plan, plan),
    layers: fc
      .shuffledSubarray([...layers], { minLength: 2, maxLength: 2 })
      .map((two) => two as unknown as [string, string]),
    diameter: length,
  });

const drive: fc.Arbitrary<Drive> = fc.oneof(
  signed.map((pressure): Drive => ({ kind: 'pressure', pressure })),
  signed.map((flow): Drive => ({ kind: 'flow', flow: flow * 1e-12 })),
  signed.map((head): Drive => ({ kind: 'head', head })),
  fc.constant<Drive>({ kind: 'closed' }),
);

const port = (id: string, layers: readonly string[]): fc.Arbitrary<Port> =>
  fc.record(
    {
      id: fc.constant(id),
      at: fc.tuple(plan, plan),
      layer: fc.constantFrom(...layers),
      diameter: fc.oneof(fc.constant(0), length),
      drive,
      tubing: fc.array(fc.record({ bore: size, length: size }), { maxLength: 2 }),
      pump: fc.oneof(
        fc.record({ pressure: size }),
        fc.record({ flow: size, bore: size, volume: size }, { requiredKeys: ['flow'] }),
      ),
      reservoir: fc.oneof(
        fc.record({ bore: size, volume: size }, { requiredKeys: ['bore'] }),
        fc.record({ area: size }),
      ),
    },
    { requiredKeys: ['id', 'at', 'layer', 'diameter', 'drive', 'tubing'] },
  );

const keepOut = (id: string, layers: readonly string[]): fc.Arbitrary<KeepOut> =>
  fc.record(
    {
      id: fc.constant(id),
      layer: fc.constantFrom(...layers),
      outline: fc.tuple(plan, plan, fc.integer({ min: 1, max: 1_000_000 })).map(([x, y, wide]): Point[] =>
        [
          [x / 2, y / 2],
          [x / 2 + wide, y / 2],
          [x / 2, y / 2 + 2 * wide],
        ].map(([a, b]) => [Math.round(a!) + 0, Math.round(b!) + 0] as const),
      ),
      clearance: fc.oneof(fc.constant(0), length),
      note: word,
    },
    { requiredKeys: ['id', 'outline', 'clearance'] },
  );

const temperature = fc.double({ min: 270, max: 380, noNaN: true });
const fluid: fc.Arbitrary<FluidSpec> = fc.oneof(
  fc.record({
    name: fc.constantFrom('water', 'saline', 'culture-medium', 'plasma', 'blood'),
    temperature,
  }) as fc.Arbitrary<FluidSpec>,
  fc.record({
    name: fc.constant('glycerol-water'),
    temperature,
    massFraction: share,
  }) as fc.Arbitrary<FluidSpec>,
  fc.record({
    name: fc.constant('glycerol-water'),
    temperature,
    volumeFraction: share,
  }) as fc.Arbitrary<FluidSpec>,
  fc.record({ viscosity: size, density: size }),
  fc.record({
    temperature,
    table: fc.record({ viscosity: size, density: size }).map((row) => [
      { temperature: 290, ...row },
      { temperature: 300.5, ...row },
    ]),
  }),
  fc.record({
    density: size,
    shear: fc.record({ kind: fc.constant('power-law' as const), consistency: size, index: share }),
  }),
  fc.record({
    density: size,
    shear: fc.record({
      kind: fc.constant('carreau' as const),
      zeroShear: size,
      infiniteShear: size,
      time: size,
      index: share,
    }),
  }),
  fc.record({
    density: size,
    shear: fc.record({ kind: fc.constant('casson' as const), yieldStress: size, viscosity: size }),
  }),
);

const target = (ports: readonly string[], channels: readonly string[]): fc.Arbitrary<Target> => {
  const wanted = fc.oneof(
    share.map((value) => ({ share: value })),
    size.map((value) => ({ flow: value * 1e-12 })),
  );
  const place = [
    ...ports.map((id) => fc.constant({ port: id })),
    ...channels.map((id) => fc.constant({ channel: id })),
  ];
  return fc
    .tuple(fc.oneof(...place), wanted, share)
    .map(([a, b, within]): Target => ({ ...a, ...b, within }));
};

const limit = (
  ids: readonly string[],
  ports: readonly string[],
  layers: readonly string[],
): fc.Arbitrary<Limit> => {
  const stated = fc.oneof(
    size.map((shear) => ({ shear })),
    fc.tuple(size, share).map(([low, area]) => ({ floor: [low, low * 2] as const, area })),
    fc.tuple(size, size).map(([time, stress]) => ({
      curve: [
        [time, stress],
        [time * 3, stress / 2],
      ] as const,
    })),
    fc.record({
      law: fc.record({ constant: size, stress: size, time: size }),
      damage: share,
      passes: fc.integer({ min: 1, max: 100 }),
    }),
  );
  const routes = ports.length < 2 ? [] : [fc.constant([ports[0]!, ports[1]!] as const)];
  const place = fc.record(
    { name: word, where: fc.oneof(fc.constantFrom(...ids, ...layers), ...routes), cellDiameter: size },
    { requiredKeys: ['name'] },
  );
  return fc.tuple(place, stated).map(([a, b]) => ({ ...a, ...b }) as Limit);
};

const sequence = <T>(ids: readonly string[], make: (id: string) => fc.Arbitrary<T>): fc.Arbitrary<T[]> =>
  ids.length === 0 ? fc.constant([]) : (fc.tuple(...ids.map(make)) as unknown as fc.Arbitrary<T[]>);

const making = fc.record(
  {
    process: fc.record(
      {
        kind: fc.constantFrom(...PROCESS_KINDS),
        leastWidth: length,
        toolRadius: length,
        deepest: fc.double({ min: 0.1, max: 20, noNaN: true }),
        undercut: fc.double({ min: 1e-3, max: 2, noNaN: true }),
        modulus: fc.double({ min: 1e5, max: 1e7, noNaN: true }),
      },
      { requiredKeys: ['kind'] },
    ),
    accepted: fc.uniqueArray(
      fc.record({ kind: fc.constantFrom('least-width', 'least-gap'), where: word, reason: word }),
      { minLength: 1, maxLength: 3, selector: ({ kind, where }) => `${kind} ${where}` },
    ),
    rating: fc.record({ pressure: size }),
    assay: fc.record({ time: size }),
  },
  { requiredKeys: [] },
);

/** Counts of layers, channels, chambers, vias and ports, and words to make ids of. */
export const randomChip: fc.Arbitrary<Chip> = fc
  .tuple(
    fc.uniqueArray(word, { minLength: 2, maxLength: 3 }),
    fc.uniqueArray(word, { minLength: 4, maxLength: 12 }),
    fc.infiniteStream(fc.nat(4)),
  )
  .chain(([layers, ids, picks]) => {
    const groups: [string[], string[], string[], string[], string[]] = [[], [], [], [], []];
    ids.forEach((id, i) => {
      groups[i < 2 ? 0 : i < 4 ? 3 : (picks.next().value as number)]!.push(id);
    });
    const [channels, chambers, vias, ports, keepOuts] = groups;
    const drawn = ids.filter((id) => !keepOuts.includes(id));
    return fc
      .record({
        name: word,
        note: fc.oneof(fc.constant(''), word, fc.constant('two\nlines\tand "quotes" \\ µ')),
        lengthUnit: fc.constantFrom('nm' as const, 'um' as const, 'mm' as const, 'cm' as const, 'm' as const),
        outline: fc.record({ width: length, height: length }),
        layers: sequence(layers, layer),
        channels: sequence(channels, (id) => channel(id, layers)),
        chambers: sequence(chambers, (id) => chamber(id, layers)),
        vias: sequence(vias, (id) => via(id, layers)),
        ports: sequence(ports, (id) => port(id, layers)),
        keepOuts: sequence(keepOuts, (id) => keepOut(id, layers)),
        fluid,
        targets: fc.array(target(ports, channels), { maxLength: 3 }),
        limits: fc.array(limit(drawn, ports, layers), { maxLength: 3 }),
        making,
      })
      .map(({ making: made, keepOuts: kept, ...chip }): Chip => {
        // A chamber needs a cross-section of its own: its layers are made plain.
        const held = new Set(chip.chambers.map((entry) => entry.layer));
        // Cloned, because the generator's records have no prototype.
        return structuredClone({
          ...chip,
          ...made,
          ...(kept.length > 0 && { keepOuts: kept }),
          layers: chip.layers.map((entry) =>
            held.has(entry.id) ? { ...entry, profile: { kind: 'rectangle' } } : entry,
          ),
        });
      });
  });
