import type { Channel, Chip, Point } from '../chip/chip.ts';
import type { Profile } from '../section/profile.ts';
import type { Drawn } from './evidence.ts';
import type { Gathered } from './gather.ts';
import type { ProcessRules } from './process.ts';
import { span } from './span.ts';
import { digits, length, METRE, placeOf } from './words.ts';

/** arctan √2: the angle of the {111} planes against the (100) face of silicon, degrees. */
const KOH_ANGLE = (180 / Math.PI) * Math.atan(Math.SQRT2);
const ANGLE_TOLERANCE = 1;
const AXIS_TOLERANCE = 0.5;

/** Shapes that the process does not leave: cross-sections, corners, directions; and ends that trap air. */
export function checkShapes(drawn: Drawn, found: Gathered): void {
  const { chip, rules } = drawn;
  deadEnds(drawn, found);
  tubing(chip, found);
  if (!rules) return;
  profiles(chip, rules, found);
  if (rules.crystal) for (const channel of chip.channels) offAxis(channel, found);
  if (!rules.toolRadius) return;
  const tool = rules.toolRadius;
  const says = (name: string): string =>
    `${name} has sharp corners; ${rules.name} leaves them with a radius of ${length(tool.number)} (${tool.source}).`;
  for (const chamber of chip.chambers) {
    if (!chamber.outline.some((_, i) => outward(chamber.outline, i))) continue;
    const small = 2 * tool.number > span(chamber).diameter;
    found.add({
      kind: 'tool-corner',
      severity: small ? 'stop' : 'note',
      where: `chamber:${chamber.id}`,
      says: small
        ? `The tool, ${length(2 * tool.number)} wide (${tool.source}), does not fit into ${chamber.id}, ${length(span(chamber).diameter)} wide.`
        : says(chamber.id),
      do: small
        ? 'Widen the chamber, or take a finer tool.'
        : 'Reckon with round corners, or give the outline corners of that radius.',
      at: placeOf(...span(chamber).at),
      value: 0,
      threshold: tool.number / METRE,
      off: small ? (2 * tool.number) / span(chamber).diameter : 0.5,
    });
  }
  for (const channel of chip.channels) {
    const { path, bendRadius, id } = channel;
    if (bendRadius > 0 || path.length < 3) continue;
    const width = Math.max(...channel.width);
    found.add({
      kind: 'tool-corner',
      severity: 'note',
      where: id,
      says: says(id),
      do: `Give its bends a radius of ${length(width)}.`,
      at: placeOf(...path[1]!),
      value: 0,
      threshold: tool.number / METRE,
      remedy: {
        label: `round the bends of ${id}`.slice(0, 200),
        changes: [{ kind: 'put', list: 'channels', id, part: { ...channel, bendRadius: width } }],
      },
      off: 0.1,
    });
  }
}

/** Whether the outline turns so at point i that the chamber has an outward corner there, by 10° or more. */
function outward(outline: readonly Point[], i: number): boolean {
  const n = outline.length;
  const [a, b, c] = [outline[(i + n - 1) % n]!, outline[i]!, outline[(i + 1) % n]!];
  const cross = (b[0] - a[0]) * (c[1] - b[1]) - (b[1] - a[1]) * (c[0] - b[0]);
  const dot = (b[0] - a[0]) * (c[0] - b[0]) + (b[1] - a[1]) * (c[1] - b[1]);
  let area = 0;
  for (let k = 0; k < n; k += 1) {
    const [p, q] = [outline[k]!, outline[(k + 1) % n]!];
    area += p[0] * q[1] - p[1] * q[0];
  }
  return Math.atan2(Math.sign(area) * cross, dot) > Math.PI / 18;
}

function profiles(chip: Chip, rules: ProcessRules, found: Gathered): void {
  for (const layer of chip.layers) {
    const { profile } = layer;
    const angle = profile.kind === 'trapezoid' ? profile.wallAngle : null;
    const lean = rules.crystal && angle !== null ? Math.abs(angle - KOH_ANGLE) : 0;
    if ((!rules.profiles || rules.profiles.includes(profile.kind)) && lean <= ANGLE_TOLERANCE) continue;
    const better: Profile = rules.crystal
      ? { kind: 'trapezoid', wallAngle: Number(KOH_ANGLE.toFixed(2)) }
      : { kind: rules.profiles![0] as 'rectangle' | 'rounded' };
    found.add({
      kind: 'process-profile',
      severity: 'warn',
      where: `layer:${layer.id}`,
      says:
        lean > ANGLE_TOLERANCE
          ? `The walls of layer ${layer.id} stand at ${digits(angle!, 4)}°; ${rules.name} leaves them at 54.74°.`
          : `Layer ${layer.id} is drawn with the profile "${profile.kind}", which ${rules.name} does not leave.`,
      do: `Give the layer the profile "${better.kind}"${rules.crystal ? ' at 54.74°' : ''}, or a measured one.`,
      ...(angle !== null && rules.crystal && { value: angle, threshold: KOH_ANGLE }),
      remedy: {
        label: `give layer ${layer.id} the profile that the process leaves`,
        changes: [{ kind: 'put', list: 'layers', id: layer.id, part: { ...layer, profile: better } }],
      },
      off: 1 + lean,
    });
  }
}

/** The {111} planes lie along the edges of the chip: what is drawn otherwise widens until they bound it. */
function offAxis({ id, path, bendRadius }: Channel, found: Gathered): void {
  let worst = 0;
  let at = path[0]!;
  for (let i = 1; i < path.length; i += 1) {
    const [dx, dy] = [Math.abs(path[i]![0] - path[i - 1]![0]), Math.abs(path[i]![1] - path[i - 1]![1])];
    const angle = (180 / Math.PI) * Math.atan2(Math.min(dx, dy), Math.max(dx, dy));
    if (angle > worst) [worst, at] = [angle, path[i - 1]!];
  }
  const bends = bendRadius > 0 && path.length > 2;
  if (worst <= AXIS_TOLERANCE && !bends) return;
  const angle = bends ? 45 : worst;
  found.add({
    kind: 'off-axis',
    severity: 'warn',
    where: id,
    says: `${id} ${bends ? 'bends in an arc' : `runs ${digits(worst)}° off the edges of the chip`}; KOH widens it until its walls lie along them.`,
    do: 'Draw it along the edges of the chip, with square corners.',
    at: placeOf(...at),
    value: angle,
    threshold: AXIS_TOLERANCE,
    off: angle / AXIS_TOLERANCE,
  });
}

function deadEnds({ chip, graph }: Drawn, found: Gathered): void {
  for (const site of graph.sites) {
    if (site.kind !== 'end' || site.arms.length !== 1) continue;
    const piece = graph.pieces[site.arms[0]!.piece]!;
    const width = Math.max(...piece.width);
    if (piece.length <= width) continue;
    found.add({
      kind: 'dead-end',
      severity: 'warn',
      where: chip.channels[piece.channelIndex]!.id,
      says: `${piece.channel} ends ${length(piece.length)} beyond the last place where anything flows, with no port: air stays in it when the chip is filled.`,
      do: 'Put a port at its end, lead it on, or take it away.',
      at: placeOf(...site.at),
      value: piece.length / METRE,
      threshold: width / METRE,
      off: piece.length / width,
    });
  }
}

/** Times the chip's own volume. */
const MUCH_TUBING = 10;

function tubing(chip: Chip, found: Gathered): void {
  const outside = chip.ports.reduce(
    (sum, port) =>
      sum + port.tubing.reduce((own, { bore, length: l }) => own + (Math.PI / 4) * bore ** 2 * l, 0),
    0,
  );
  if (outside === 0) return;
  const inside = volume(chip);
  const ratio = outside / inside;
  if (!(ratio > MUCH_TUBING)) return;
  const microlitres = (cubic: number): string => `${digits(cubic * 1e9)} µL`;
  found.add({
    kind: 'tubing-volume',
    severity: 'note',
    where: '',
    says: `The tubing holds ${microlitres(outside)}, ${digits(ratio)} times the chip’s own ${microlitres(inside)}: most of what is pumped never reaches it.`,
    do: 'Take shorter or narrower tubing where reagent or time is dear.',
    value: ratio,
    threshold: MUCH_TUBING,
    off: ratio / MUCH_TUBING,
  });
}

/** Channels as mean width × depth × length and chambers as area × depth, m³. */
function volume(chip: Chip): number {
  const depths = new Map(chip.layers.map(({ id, depth }) => [id, depth / METRE]));
  let sum = 0;
  for (const { layer, path, width } of chip.channels) {
    let run = 0;
    for (let i = 1; i < path.length; i += 1) {
      run += Math.hypot(path[i]![0] - path[i - 1]![0], path[i]![1] - path[i - 1]![1]);
    }
    sum += (((width[0] + width[1]) / 2) * run * depths.get(layer)!) / METRE ** 2;
  }
  for (const { layer, outline } of chip.chambers) {
    let area = 0;
    outline.forEach(([x, y], i) => {
      const [p, q] = outline[(i + 1) % outline.length]!;
      area += x * q - y * p;
    });
    sum += (Math.abs(area) / 2 / METRE ** 2) * depths.get(layer)!;
  }
  return sum;
}
