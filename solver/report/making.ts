import type { Making, Result, TargetResult } from '../chip/result.ts';
import type { Gradient, Target } from '../network/sensitivity.ts';
import type { Net } from '../spread/effects.ts';
import { hasTolerances } from '../spread/sources.ts';
import { spreadOf } from '../spread/spread.ts';

/**
 * The result with what the tolerances of making do to it; the same where none are given.
 *
 * @param depends as `gradients`, of laws too
 */
export function withMaking(
  result: Result,
  net: Net,
  depends: (targets: readonly Target[]) => Gradient[] | null,
): Result {
  const { chip, lumped } = net;
  if (!hasTolerances(chip)) return result;
  const asked = new Set(chip.targets.flatMap((target) => ('channel' in target ? [target.channel] : [])));
  const pieceAt = placesOf(result, lumped.names);
  const pieces = pieceAt.map(({ channel, piece }) => result.channels[channel].pieces[piece]);
  const spread = spreadOf(
    {
      ...net,
      portFlow: result.ports.map(({ flow }) => flow),
      portPressure: result.ports.map(({ pressure }) => pressure),
      peakWallShear: pieces.map(({ peakWallShear }) => peakWallShear),
      wanted: new Set(pieceAt.flatMap(({ channel }, e) => (asked.has(chip.channels[channel].id) ? [e] : []))),
    },
    depends,
  );
  if (!spread) return result;
  const channels = result.channels.map((one) => ({ id: one.id, pieces: [...one.pieces] }));
  pieceAt.forEach(({ channel, piece }, e) => {
    const making = spread.stretches[e];
    if (making) channels[channel].pieces[piece] = { ...channels[channel].pieces[piece], making };
  });
  const ports = result.ports.map((port, i) => {
    const making = spread.ports[i];
    return making ? { ...port, making } : port;
  });
  return {
    ...result,
    ports,
    channels,
    cells: result.cells.map((cell, i) => {
      const making = spread.cells[i];
      return making && cell.peakWallShear !== null ? { ...cell, making } : cell;
    }),
    targets: result.targets.map((target, i) => {
      const making = makingOfTarget(target, 'share' in chip.targets[i], { ...result, ports, channels });
      return making ? { ...target, making } : target;
    }),
    making: spread.chip,
  };
}

/** Channel and piece of every stretch of the network, in its order. */
function placesOf(
  result: Result,
  names: readonly string[],
): { readonly channel: number; readonly piece: number }[] {
  const index = new Map(result.channels.map(({ id }, i) => [id, i]));
  return names.map((name) => {
    const cut = name.lastIndexOf('#');
    return { channel: index.get(name.slice(0, cut))!, piece: Number(name.slice(cut + 1)) - 1 };
  });
}

function makingOfTarget(
  { port, channel, got }: TargetResult,
  share: boolean,
  { ports, channels }: Pick<Result, 'ports' | 'channels'>,
): Making | null {
  if (port !== undefined) {
    const making = ports.find(({ id }) => id === port)?.making;
    return making ? (share ? making.share : making.flow) : null;
  }
  const pieces = channels.find(({ id }) => id === channel)?.pieces ?? [];
  const found = pieces.flatMap((piece) => (piece.making && piece.flow !== null ? [piece] : []));
  if (got === null || found.length === 0) return null;
  const widest = found.reduce((a, b) => (b.making!.flow.likely > a.making!.flow.likely ? b : a)).making!;
  return share ? widest.share : widest.flow;
}
