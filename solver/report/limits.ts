import type { Chip, Limit } from '../chip/chip.ts';
import type { CellResult, ChannelResult, LimitResult } from '../chip/result.ts';
import type { Finding } from '../problem/finding.ts';

/** Names of the pieces ("feed#1") that carry fluid from one port to another. */
export type Between = (start: string, goal: string) => ReadonlySet<string>;

/** Each limit against what was found where it holds. */
export function limitResults(
  chip: Chip,
  channels: readonly ChannelResult[],
  cells: readonly CellResult[],
  between: Between,
): { readonly results: readonly LimitResult[]; readonly findings: readonly Finding[] } {
  const results: LimitResult[] = [];
  const findings: Finding[] = [];
  for (const limit of chip.limits) {
    const judged = 'shear' in limit ? shearLimit(limit, chip, channels, cells, between) : notJudged(limit);
    results.push(judged.result);
    if (judged.finding) findings.push(judged.finding);
  }
  return { results, findings };
}

interface Judged {
  readonly result: LimitResult;
  readonly finding: Finding | null;
}

function notJudged(limit: Limit): Judged {
  return {
    result: { name: limit.name, limit: null, worst: null, where: '', met: null },
    finding: {
      kind: 'limit-not-judged',
      severity: 'warn',
      where: '',
      says: `The limit "${limit.name}" is not judged: it needs the exposure along every route.`,
      do: 'Judge it by hand, or give a limit on the wall shear as well.',
    },
  };
}

/**
 * A wall-shear limit against the largest peak of the channels and cells it covers. A place whose peak
 * is unbounded leaves the limit unjudged, unless another place already breaks it.
 */
function shearLimit(
  limit: Limit & { readonly shear: number },
  chip: Chip,
  channels: readonly ChannelResult[],
  cells: readonly CellResult[],
  between: Between,
): Judged {
  const covers = coverage(limit, chip, between);
  let worst: number | null = null;
  let where = '';
  let unknown = '';
  const see = (peak: number | null, name: string): void => {
    if (peak === null) unknown ||= name;
    else if (worst === null || peak > worst) {
      worst = peak;
      where = name;
    }
  };
  for (const channel of channels) {
    channel.pieces.forEach((piece, index) => {
      const name = `${channel.id}#${index + 1}`;
      if (piece.flow !== null && covers(channel.id, name)) see(piece.peakWallShear, name);
    });
  }
  for (const cell of cells) {
    if (cell.faces.some((face) => covers(face.replace(/#\d+$/, ''), face))) see(cell.peakWallShear, cell.id);
  }
  const broken = worst !== null && worst > limit.shear;
  return {
    result: {
      name: limit.name,
      limit: limit.shear,
      worst,
      where: where || unknown,
      met: broken ? false : unknown !== '' || worst === null ? null : true,
    },
    finding:
      unknown === '' || broken
        ? null
        : {
            kind: 'limit-not-judged',
            severity: 'warn',
            where: unknown,
            says: `The limit "${limit.name}" cannot be judged at ${unknown}: the wall shear has no finite peak there.`,
            do: 'Give the layer a fillet radius, so that its corners have one.',
          },
  };
}

/** Whether a channel, or a piece of it, is within the limit's place. */
function coverage(limit: Limit, chip: Chip, between: Between): (channel: string, piece: string) => boolean {
  const { where } = limit;
  if (where === undefined) return () => true;
  if (typeof where !== 'string') {
    const pieces = between(where[0], where[1]);
    return (_channel, piece) => pieces.has(piece);
  }
  if (chip.layers.some((layer) => layer.id === where)) {
    const onLayer = new Set(chip.channels.filter((channel) => channel.layer === where).map(({ id }) => id));
    return (channel) => onLayer.has(channel);
  }
  return (channel, piece) => channel === where || piece === where;
}
