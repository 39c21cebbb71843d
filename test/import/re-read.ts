import type { Role } from '../../main/contract/bring-in.ts';
import type { MaskFormat } from '../../main/contract/mask.ts';
import { makeMasks } from '../../main/export/mask/make.ts';
import type { Chamber, Channel, Chip } from '../../solver/chip/chip.ts';
import { solve } from '../../solver/solve.ts';
import { chipOf, drawingOf } from './read.ts';

/** The mask formats that drawings come in by too. */
export const FORMATS = ['dxf', 'gdsii', 'svg'] as const;

/** Asked of solved junctions, well below what the two may differ by. */
const ACCURACY = 0.001;
/** A port that takes less than this of the whole is compared by the whole. */
const LEAST_SHARE = 0.05;
/** Chords stand for arcs within this, m. */
const CHORD_ERROR = 0.1e-6;

/** The masks of a chip: its layers and its outline alone. */
export async function masks(chip: Chip, format: MaskFormat): Promise<Uint8Array[]> {
  const { files } = await makeMasks(chip, {
    formats: [format],
    options: { marks: false, labels: false, lane: 0, polarity: 'clear-field' },
    version: 'test',
    made: new Date(0),
  });
  return files.map(({ content }) => content);
}

function roleOf(name: string, chip: Chip): Role {
  const layer = chip.layers[Number(/^L?(\d+)/.exec(name)?.[1] ?? 0) - 1];
  if (!/^L?\d/.test(name) || /_(MARKS|LANE|LABELS)$|\/[134]$/.test(name)) return { kind: 'ignore' };
  if (/_OUTLINE$|\/2$/.test(name)) return { kind: 'outline' };
  return layer ? { kind: 'cavity', depth: layer.depth, layer: layer.id } : { kind: 'holes' };
}

export interface ReRead {
  readonly chip: Chip;
  /** Outline of each drawing that holds a layer. */
  readonly outlines: readonly Chip['outline'][];
  /** The largest area of the difference over what the chord error allows. */
  readonly area: number;
  /** The furthest that walls lie apart, m. */
  readonly furthest: number;
}

/** The chip with the channels and chambers that its masks hold; a mask has no ports and drives: those stay. */
export async function reRead(chip: Chip, format: MaskFormat): Promise<ReRead> {
  const channels: Channel[] = [];
  const chambers: Chamber[] = [];
  const outlines: Chip['outline'][] = [];
  let [area, furthest] = [0, 0];
  for (const bytes of await masks(chip, format)) {
    const roles = drawingOf(bytes).layers.map(({ name }): [string, Role] => [name, roleOf(name, chip)]);
    if (!roles.some(([, { kind }]) => kind === 'cavity')) continue;
    const { chip: read, report } = chipOf(bytes, { roles: Object.fromEntries(roles) });
    outlines.push(read.outline);
    channels.push(...read.channels.map((one) => ({ ...one, id: `${one.layer} ${one.id}` })));
    chambers.push(...read.chambers.map((one) => ({ ...one, id: `${one.layer} ${one.id}` })));
    for (const { deviation } of report.chipLayers) {
      area = Math.max(area, deviation!.difference / (CHORD_ERROR * deviation!.perimeter));
      furthest = Math.max(furthest, deviation!.furthest);
    }
  }
  return { chip: { ...chip, channels, chambers }, outlines, area, furthest };
}

/** The most that a port's flow differs by, relative; whether all junctions were taken as asked. */
export function apart(
  one: Chip,
  other: Chip,
  junctions: 'ideal' | 'solved',
): { readonly off: number; readonly whole: boolean } {
  const results = [one, other].map((chip) => solve(chip, { junctions, accuracy: ACCURACY }));
  const [wanted, got] = results.map(({ ports }) => ports);
  const total = wanted!.reduce((sum, { flow }) => sum + Math.max(0, flow!), 0);
  const off = wanted!.reduce((most, { id, flow }) => {
    const again = got!.find((port) => port.id === id)!.flow!;
    return Math.max(most, Math.abs(again - flow!) / Math.max(Math.abs(flow!), LEAST_SHARE * total));
  }, 0);
  return { off, whole: results.every((result) => result.junctions === junctions) };
}
