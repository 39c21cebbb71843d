import { type Ended, startImport } from '../../main/import/thread.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { boundary, bytesOf, chipOf, dxf, gds, outline, record, USUAL } from './read.ts';

/** Drawings that are broken, or made to break the program, and what becomes of them. */

/** mulberry32: small, and the same everywhere. */
export function randomFrom(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

const SPLICES = [
  '-1',
  '0',
  '1e308',
  'NaN',
  '99999999999',
  '\u0000',
  'ÿ',
  '<',
  '&a;',
  ']]>',
  '0\nSECTION\n',
  '0\nENDSEC\n',
  '1e-320',
];

export function mutated(seed: Uint8Array, random: () => number): Uint8Array {
  const bytes = Array.from(seed);
  const times = 1 + Math.floor(random() * 4);
  for (let k = 0; k < times; k += 1) {
    const at = Math.floor(random() * bytes.length);
    const span = Math.floor(random() * 24);
    switch (Math.floor(random() * 5)) {
      case 0:
        bytes[at] = Math.floor(random() * 256);
        break;
      case 1:
        bytes.splice(at, span);
        break;
      case 2:
        bytes.splice(at, 0, ...bytes.slice(at, at + 4 * span));
        break;
      case 3:
        bytes.splice(at, 0, ...bytesOf(SPLICES[Math.floor(random() * SPLICES.length)]!));
        break;
      default:
        bytes.length = Math.max(8, at);
    }
  }
  return Uint8Array.from(bytes);
}

const BLOCK = [
  0,
  'BLOCK',
  8,
  0,
  2,
  'B',
  10,
  0,
  20,
  0,
  ...outline(
    [
      [0, 0],
      [400, 0],
      [400, 40],
      [0, 40],
    ],
    '0',
  ),
  0,
  'ENDBLK',
];
export const SEEDS: Readonly<Record<string, Uint8Array>> = {
  dxf: bytesOf(
    dxf(
      [
        ...outline([
          [100, 100],
          [900, 100, 0.3],
          [900, 140],
          [100, 140],
        ]),
        ...[0, 'CIRCLE', 8, 'HOLES', 10, 100, 20, 120, 40, 30],
        ...[0, 'INSERT', 8, 'FLOW', 2, 'B', 10, 100, 20, 300, 50, 30, 70, 2, 44, 500],
        ...[
          0,
          'LINE',
          8,
          'FLOW',
          10,
          0,
          20,
          500,
          11,
          90,
          21,
          500,
          0,
          'ARC',
          8,
          'FLOW',
          10,
          90,
          20,
          520,
          40,
          20,
          50,
          270,
          51,
          90,
        ],
      ],
      BLOCK,
    ),
  ),
  svg: bytesOf(
    '<svg xmlns="http://www.w3.org/2000/svg" width="2mm" height="1mm" viewBox="0 0 2000 1000"><style>.a{fill:none;stroke:#000}</style>' +
      '<g id="flow" transform="translate(10 20)"><path d="M100 100h800v40h-800z m0 100c50 20 80 20 100 0v40z"/>' +
      '<polyline class="a" stroke-width="20" points="0,0 500,0 500,300"/></g><circle cx="100" cy="120" r="30"/></svg>',
  ),
  gds: gds({
    TOP: [
      boundary([100, 100, 9000, 100, 9000, 500, 100, 500]),
      [...record(0x0a, 0), ...record(0x12, 6, 'C'), ...record(0x10, 3, [0, 9000]), ...record(0x11, 0)],
    ],
    C: [boundary([0, 0, 9000, 0, 9000, 400, 0, 400])],
  }),
};

function nestedBlocks(levels: number, each: number): string {
  const name = (k: number): string => `B${k}`;
  const blocks: (string | number)[] = [
    0,
    'BLOCK',
    2,
    name(0),
    10,
    0,
    20,
    0,
    ...outline(
      [
        [0, 0],
        [9, 0],
        [9, 1],
      ],
      '0',
    ),
    0,
    'ENDBLK',
  ];
  for (let k = 1; k <= levels; k += 1) {
    blocks.push(0, 'BLOCK', 2, name(k), 10, 0, 20, 0);
    for (let i = 0; i < each; i += 1) blocks.push(0, 'INSERT', 8, 0, 2, name(k - 1), 10, i, 20, 0);
    blocks.push(0, 'ENDBLK');
  }
  return dxf([0, 'INSERT', 8, 'A', 2, name(levels), 10, 0, 20, 0], blocks);
}

const random = randomFrom(7);
const star = Array.from({ length: 4000 }, () => [random() * 1e4, random() * 1e4]);
const laughs = Array.from(
  { length: 10 },
  (_, k) => `<!ENTITY l${k + 1} "&l${k};&l${k};&l${k};&l${k};">`,
).join('');
const wideArray = [
  ...record(0x0b, 0),
  ...record(0x12, 6, 'C'),
  ...record(0x13, 2, [32767, 32767]),
  ...record(0x10, 3, [0, 0, 32767000, 0, 0, 32767000]),
  ...record(0x11, 0),
];
export const BOMBS: Readonly<Record<string, () => string | Uint8Array>> = {
  'blocks of blocks, ten thousand million in all': () => nestedBlocks(10, 10),
  'blocks nested twenty deep': () => nestedBlocks(20, 1),
  'an array of a thousand million structures': () =>
    gds({ TOP: [wideArray], C: [boundary([0, 0, 10, 0, 10, 5])] }),
  'a million lines': () => {
    const line = '0\nLINE\n8\nA\n10\n0\n20\n0\n11\n5\n21\n5\n';
    return `0\nSECTION\n2\nENTITIES\n${line.repeat(1_000_000)}0\nENDSEC\n0\nEOF\n`;
  },
  'a polyline of three million points': () =>
    `0\nSECTION\n2\nENTITIES\n0\nLWPOLYLINE\n8\nA\n70\n1\n${'10\n1\n20\n2\n10\n3\n20\n4\n'.repeat(1_500_000)}0\nENDSEC\n0\nEOF\n`,
  'an outline that crosses itself a million times': () => dxf(outline(star)),
  'a hundred thousand groups in each other': () => `<svg>${'<g>'.repeat(100_000)}`,
  'entities that unfold to a million': () => `<!DOCTYPE svg [<!ENTITY l0 "ha">${laughs}]><svg>&l10;</svg>`,
  'an entity from outside': () =>
    '<!DOCTYPE svg [<!ENTITY x SYSTEM "file:///etc/hostname">]><svg><text>&x;</text></svg>',
  'references in references': () =>
    `<svg width="1mm">${Array.from({ length: 12 }, (_, k) => `<g id="g${k + 1}">${`<use href="#g${k}"/>`.repeat(8)}</g>`).join('')}<rect id="g0" width="1" height="1"/></svg>`,
  'a path of ten million commands': () =>
    `<svg width="1mm"><path d="M0 0${'h1v1'.repeat(5_000_000)}"/></svg>`,
  'a stroke dragged to the end of the numbers': () =>
    '<svg width="1mm"><rect width="1e300" height="1e300"/></svg>',
};

/** Mutated files of one format: how many were refused by name, and the longest, s of processor time. Throws where one breaks the program. */
export function readMutated(kind: string, count: number, seed: number): { refused: number; longest: number } {
  const random = randomFrom(seed);
  let refused = 0;
  let longest = 0;
  for (let k = 0; k < count; k += 1) {
    const bytes = mutated(SEEDS[kind]!, random);
    const from = process.cpuUsage();
    try {
      chipOf(bytes, { unit: 1e-6 });
    } catch (error) {
      if (!(error instanceof Problem)) throw new Error(`${kind} file ${k}: ${(error as Error).stack}`);
      if (error.what.length <= 10 || error.remedy.length <= 10)
        throw new Error(`${kind} file ${k}: says nothing`);
      refused += 1;
    }
    const { user, system } = process.cpuUsage(from);
    longest = Math.max(longest, (user + system) / 1e6);
  }
  return { refused, longest };
}

/** What a thread does with a bomb, s of processor time, and MB more than before. */
export async function readBomb(name: string): Promise<{ ended: Ended; seconds: number; megabytes: number }> {
  const made = BOMBS[name]!();
  const bytes = typeof made === 'string' ? bytesOf(made) : made;
  const before = process.memoryUsage().rss;
  const from = process.cpuUsage();
  let most = before;
  const watch = setInterval(() => {
    most = Math.max(most, process.memoryUsage().rss);
  }, 20);
  const ended = await startImport({ bytes, file: name, settings: { ...USUAL, unit: 1e-6 } }, () => undefined)
    .ended;
  clearInterval(watch);
  const { user, system } = process.cpuUsage(from);
  return { ended, seconds: (user + system) / 1e6, megabytes: (most - before) / 1e6 };
}
