import type { Process, ProcessKind, ProcessNumbers } from '../chip/making.ts';
import type { Profile } from '../section/profile.ts';

/** A number that a process holds, and where it is from. */
export interface Rule {
  readonly number: number;
  readonly source: string;
}

export type RuleName = keyof ProcessNumbers;

/** What a process can make. A rule that it does not have is absent. Lengths in nm, modulus in Pa, else ratios. */
export interface ProcessRules extends Readonly<Partial<Record<RuleName, Rule>>> {
  /** "soft moulding from a film mask" */
  readonly name: string;
  /** Cross-sections that come out of it; all of them where absent. */
  readonly profiles?: readonly Profile['kind'][];
  /** Walls lie along two directions at right angles only. */
  readonly crystal?: boolean;
}

const COMMON = 'common practice, no source';
const um = (number: number, source = COMMON): Rule => ({ number: number * 1e3, source });
const ratio = (number: number, source = COMMON): Rule => ({ number, source });

/** What holds of every channel moulded in a soft elastomer, whatever its mask. */
const SOFT = {
  profiles: ['rectangle', 'trapezoid', 'rounded', 'polygon'],
  edge: um(1000),
  alignment: um(50),
  deepest: ratio(2, 'Delamarche et al. 1997, Adv. Mater. 9, 741: 0.2 < height/width < 2, from memory'),
  widest: ratio(10, `${COMMON}: depth over width above 1:10; some older guides say 1:5`),
  wall: ratio(2, `${COMMON}; posts lean from height/width 2 to 4 (Langmuir 2005, 21, 5542)`),
  modulus: ratio(
    2e6,
    'between 1.32 and 2.97 MPa for a 10:1 silicone by cure (Johnston et al. 2014, J. Micromech. Microeng. 24, 035017)',
  ),
} as const;

/** The usual numbers of each process; a chip may put its own in their place. */
export const PROCESSES: Readonly<Record<ProcessKind, ProcessRules>> = {
  'film-mask': {
    name: 'soft moulding from a film mask',
    leastWidth: um(25, `${COMMON}: film masks hold 10 to 25 µm`),
    leastGap: um(25, `${COMMON}: film masks hold 10 to 25 µm`),
    ...SOFT,
  },
  'glass-mask': {
    name: 'soft moulding from a glass mask',
    leastWidth: um(2, `${COMMON}: chrome on glass holds 1 to 2 µm`),
    leastGap: um(2, `${COMMON}: chrome on glass holds 1 to 2 µm`),
    ...SOFT,
  },
  'dry-film': {
    name: 'dry-film resist under a rigid lid',
    profiles: ['rectangle', 'trapezoid'],
    leastWidth: um(50),
    leastGap: um(50),
    edge: um(1000),
    alignment: um(100),
    deepest: ratio(1, `${COMMON}: openings at least as wide as the film is thick`),
    wall: ratio(1, `${COMMON}: walls at least as thick as the film`),
  },
  'glass-etch': {
    name: 'wet-etched glass',
    profiles: ['rounded', 'ellipse', 'polygon'],
    leastWidth: um(10),
    leastGap: um(20),
    edge: um(1000),
    alignment: um(20),
    undercut: ratio(
      1,
      'isotropic etch, 1.0 to 1.5 in practice (Madou, Fundamentals of Microfabrication, from memory)',
    ),
  },
  'silicon-etch': {
    name: 'silicon (100) etched in KOH',
    profiles: ['trapezoid', 'triangle', 'polygon'],
    crystal: true,
    leastWidth: um(5),
    leastGap: um(5),
    edge: um(1000),
    alignment: um(10),
  },
  milling: {
    name: 'micro-milling',
    profiles: ['rectangle', 'polygon'],
    toolRadius: um(100, `${COMMON}: usual tools have a radius of 50 to 500 µm`),
    leastGap: um(100),
    edge: um(1000),
    alignment: um(50),
    deepest: ratio(3, `${COMMON}: slots up to three tool diameters deep`),
    wall: ratio(10),
  },
  laser: {
    name: 'laser cutting',
    toolRadius: um(75, `${COMMON}: half of a kerf of 150 µm`),
    leastGap: um(150),
    edge: um(1000),
    alignment: um(100),
    deepest: ratio(5),
  },
  printing: {
    name: '3-D printing',
    leastWidth: um(200),
    leastGap: um(200),
    toolRadius: um(50),
    edge: um(500),
    alignment: um(100),
    wall: ratio(10),
  },
};

const OWN = "this chip's own number";

/** The rules of a chip's process with its own numbers in place; a slot is never narrower than its tool. */
export function rulesOf(process: Process): ProcessRules {
  const { kind, ...numbers } = process;
  const rules: { -readonly [K in keyof ProcessRules]: ProcessRules[K] } = { ...PROCESSES[kind] };
  for (const name of Object.keys(numbers) as RuleName[]) {
    rules[name] = { number: numbers[name]!, source: OWN };
  }
  if (rules.toolRadius && !rules.leastWidth) {
    rules.leastWidth = {
      number: 2 * rules.toolRadius.number,
      source: `twice the tool's radius (${rules.toolRadius.source})`,
    };
  }
  return rules;
}
