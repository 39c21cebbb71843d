import type { Chip } from '../chip/chip.ts';
import type { ChannelResult, PortResult, TargetResult } from '../chip/result.ts';

/**
 * Each target against what flows. A port's flow is taken as the designer means it: what leaves by an
 * outlet or enters by an inlet, as a magnitude; a channel's along its path, as a magnitude, and where
 * the channel is tapped on its way the piece farthest from the wanted value decides.
 */
export function targetResults(
  chip: Chip,
  ports: readonly PortResult[],
  channels: readonly ChannelResult[],
  total: number,
): TargetResult[] {
  const portFlow = new Map(ports.map((port) => [port.id, port.flow]));
  const channelFlows = new Map(
    channels.map((channel) => [channel.id, channel.pieces.map((piece) => piece.flow)]),
  );
  return chip.targets.map((target) => {
    const wanted = 'share' in target ? target.share : target.flow;
    const flows =
      'port' in target ? [portFlow.get(target.port) ?? null] : (channelFlows.get(target.channel) ?? []);
    let got: number | null = null;
    for (const flow of flows) {
      const size = Math.abs(flow ?? 0);
      const value = 'share' in target ? (total > 0 ? size / total : null) : size;
      if (value === null) continue;
      if (got === null || Math.abs(value - Math.abs(wanted)) > Math.abs(got - Math.abs(wanted))) got = value;
    }
    const met = got !== null && Math.abs(got - Math.abs(wanted)) <= target.within * Math.abs(wanted);
    return 'port' in target
      ? { port: target.port, wanted, got, met }
      : { channel: target.channel, wanted, got, met };
  });
}
