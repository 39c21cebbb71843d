import type { Channel, Chip } from '../../solver/chip/chip.ts';
import type { PieceResult, Result } from '../../solver/chip/result.ts';
import { metres } from '../../solver/chip/units.ts';
import { ductFigures } from '../card/duct-figures.ts';
import { refOfPart } from '../edits/parts.ts';
import { pathLength } from '../geometry/path.ts';
import type { Answer } from '../state/live.ts';
import type { Ref } from '../state/ref.ts';
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
  const ours = parts.flatMap((part) => (part.kind === 'channel' ? [part] : []));
  const fresh = ours.filter((part) => !chip.channels.some(({ id }) => id === part.value.id));
  // what is drawn goes on through all that is new; of what is dragged the first says how it goes
  const line = fresh.length > 0 ? fresh : ours.slice(0, 1);
  const part = line.at(-1);
  if (!part || parts.length > 12) return [];
  const { value } = part;
  const out: ReadoutLine[] = [];
  const piecesOfPart = (one: PartValue) => (answer.preview ? piecesOf(answer.result, one.value.id) : []);
  const pieces = piecesOfPart(part);
  const duct = ductFigures(chip, value.layer, Math.min(...value.width));
  const resistance = line.reduce<number | null>((sum, one) => {
    const own = sum === null ? null : resistanceOf(chip, one.value, piecesOfPart(one));
    return own === null ? null : sum! + own;
  }, 0);
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

/** By the section's own figures; of a taper by the answer, and until it comes by steps along it. */
function resistanceOf(chip: Chip, channel: Channel, pieces: readonly PieceResult[]): number | null {
  const { layer, width, path, bendRadius } = channel;
  const length = metres(pathLength(path, bendRadius));
  if (width[0] === width[1]) {
    const duct = ductFigures(chip, layer, width[0]);
    return duct && duct.resistance * length;
  }
  const solved = pieces.reduce((sum, piece) => sum + piece.resistance, 0);
  if (solved > 0) return solved;
  let sum = 0;
  for (let i = 0; i < TAPER_STEPS; i += 1) {
    const duct = ductFigures(
      chip,
      layer,
      Math.round(width[0] + ((width[1] - width[0]) * (i + 0.5)) / TAPER_STEPS),
    );
    if (!duct) return null;
    sum += (duct.resistance * length) / TAPER_STEPS;
  }
  return sum;
}
const TAPER_STEPS = 8;

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
  const mine = new Set(parts.map(refOfPart));
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

/** What shares a place with some parts: channels, ports, chambers and vias. */
function joins(graph: Answer['graph'], mine: ReadonlySet<Ref>): string[] {
  const found = new Set<string>();
  for (const site of graph?.sites ?? []) {
    const there = [
      ...site.arms.map((arm) => `channel:${graph!.pieces[arm.piece]!.channel}`),
      ...site.ports.map((id) => `port:${id}`),
      ...site.chambers.map((id) => `chamber:${id}`),
      ...site.vias.map((id) => `via:${id}`),
    ];
    if (!there.some((ref) => mine.has(ref))) continue;
    for (const ref of there) if (!mine.has(ref)) found.add(ref);
  }
  return [...found];
}
