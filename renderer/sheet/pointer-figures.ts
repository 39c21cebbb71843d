import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { ductFigures } from '../card/duct-figures.ts';
import { pathLength } from '../geometry/path.ts';
import { type Answer, partId } from '../state/live.ts';
import type { PartValue, ReadoutLine } from '../tools/tool.ts';
import { placeName } from '../verdict/answer.ts';
import { bandOf, plusMinus } from '../words/band.ts';
import { figure } from '../words/figure.ts';
import { spoken } from '../words/spoken.ts';

/** A flow that tells how much shear a width costs, where nothing flows yet: 1 µL/min. */
const TELLING_FLOW = 1e-9 / 60;

/**
 * Resistance, flow and running wall shear of the channel that is drawn or dragged: from the answer to the
 * chip as it would be; resistance by the section's own figures where that is still on its way.
 */
export function pointerFigures(chip: Chip, parts: readonly PartValue[], answer: Answer): ReadoutLine[] {
  const part = parts.find((found) => found.kind === 'channel');
  if (part?.kind !== 'channel' || parts.length > 12) return [];
  const { value } = part;
  const out: ReadoutLine[] = [];
  const pieces = answer.preview ? piecesOf(answer.result, partId(chip, part)) : [];
  const duct = value.width[0] === value.width[1] ? ductFigures(chip, value.layer, value.width[0]) : null;
  const solved = pieces.reduce((sum, piece) => sum + piece.resistance, 0);
  const resistance = duct
    ? (duct.resistance * pathLength(value.path, value.bendRadius)) / 1e9
    : solved > 0
      ? solved
      : null;
  if (resistance !== null)
    out.push({ name: 'resistance', figure: figure(resistance, 'resistance', { digits: 3 }) });
  const last = pieces.at(-1);
  const flow = last?.flow ?? 0;
  if (last && flow !== 0) {
    const total = answer.result!.ports.reduce((sum, port) => sum + Math.max(0, port.flow ?? 0), 0);
    out.push({
      name: 'flow',
      figure: `${figure(Math.abs(flow), 'flow', { digits: 3 })}${total > 0 ? `, ${figure(Math.abs(flow) / total, 'share', { digits: 3, unit: '%' })}${plusMinus(bandOf(answer.result, 'share', last))}` : ''}`,
    });
    out.push({
      name: 'wall shear',
      figure: `${figure(last.peakWallShear, 'stress', { digits: 3 })}${plusMinus(bandOf(answer.result, 'shear', last))}`,
    });
  } else if (duct?.shear != null) {
    out.push({
      name: `shear at ${figure(TELLING_FLOW, 'flow', { digits: 1, unit: 'uL/min' })}`,
      figure: figure(duct.shear * TELLING_FLOW, 'stress', { digits: 3 }),
    });
  }
  return out;
}

const piecesOf = (result: Result | null, id: string) =>
  result?.channels.find((channel) => channel.id === id)?.pieces ?? [];

/** Kinds of findings about what lies beside what. */
const NEAR: ReadonlySet<string> = new Set(['near-miss', 'least-gap', 'etch-merge', 'wall-leans', 'keep-out']);
const MOST = 3;

/** Joins and near misses that arise where the hand is: those that the chip as it stands does not have. */
export function pointerSays(
  parts: readonly PartValue[],
  answer: Answer,
  before: Pick<Answer, 'result' | 'graph'>,
): string[] {
  if (parts.length === 0 || !answer.chip) return [];
  const { chip } = answer;
  const mine = new Set(parts.map((part) => partId(chip, part)));
  // a part that is drawn bears the newest id
  if (parts.some((part) => part.value.id === '')) mine.add(chip.channels.at(-1)?.id ?? '');
  const out: string[] = [];
  const had = new Set(before.result?.findings.map((finding) => finding.says));
  for (const finding of answer.result?.findings ?? [])
    if (NEAR.has(finding.kind) && !had.has(finding.says)) out.push(spoken(finding.says));
  const joined = new Set(joins(before.graph, mine));
  const fresh = joins(answer.graph, mine).filter((name) => !joined.has(name));
  if (fresh.length > 0)
    out.push(`Joins ${fresh.slice(0, 3).map(placeName).join(', ')}${fresh.length > 3 ? ' and others' : ''}.`);
  return out.slice(0, MOST);
}

/** What shares a place with some channels: other channels, ports, chambers and vias. */
function joins(graph: Answer['graph'], mine: ReadonlySet<string>): string[] {
  const found = new Set<string>();
  for (const site of graph?.sites ?? []) {
    const channels = site.arms.map((arm) => graph!.pieces[arm.piece]!.channel);
    if (!channels.some((id) => mine.has(id))) continue;
    for (const id of channels) if (!mine.has(id)) found.add(`channel:${id}`);
    for (const id of site.ports) if (!mine.has(id)) found.add(`port:${id}`);
    for (const id of site.chambers) found.add(`chamber:${id}`);
    for (const id of site.vias) found.add(`via:${id}`);
  }
  return [...found];
}
