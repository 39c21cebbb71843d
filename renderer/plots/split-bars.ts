import type { Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { bandOf } from '../words/band.ts';

/** One bar of how the flow divides: what an outlet, or a channel with a target, gets of what. */
export interface SplitBar {
  readonly name: string;
  /** A share of all that enters, or m³/s; null where it is not known. */
  readonly got: number | null;
  /** Relative. */
  readonly band: number | null;
  /** In the same measure as `got`; null where nothing is asked of it. */
  readonly wanted: number | null;
  /** Relative to `wanted`. */
  readonly within: number;
  readonly met: boolean;
}

export interface SplitBars {
  /** Flows where a flow is asked for anywhere, else shares. */
  readonly kind: 'share' | 'flow';
  readonly bars: readonly SplitBar[];
}

/** How the flow divides among the outlets and what has a target, in the order of ports and channels. */
export function splitBars(chip: Chip, result: Result): SplitBars {
  const total = result.ports.reduce((sum, port) => sum + Math.max(0, port.flow ?? 0), 0);
  const kind = chip.targets.some((target) => 'flow' in target) ? 'flow' : 'share';
  const measured = (flow: number | null): number | null =>
    flow === null ? null : kind === 'flow' ? Math.abs(flow) : total > 0 ? Math.abs(flow) / total : null;
  const bar = (of: 'port' | 'channel', id: string, flow: number | null, band: number | null): SplitBar => {
    const target = chip.targets.find((one) =>
      of === 'port' ? 'port' in one && one.port === id : 'channel' in one && one.channel === id,
    );
    const judged = result.targets.find((one) => (of === 'port' ? one.port : one.channel) === id);
    const wanted =
      target === undefined
        ? null
        : 'flow' in target
          ? Math.abs(target.flow)
          : kind === 'flow'
            ? target.share * total
            : target.share;
    return {
      name: id,
      got: measured(flow),
      band,
      wanted,
      within: target?.within ?? 0,
      met: judged?.met ?? true,
    };
  };
  const targeted = (of: 'port' | 'channel', id: string): boolean =>
    chip.targets.some((one) =>
      of === 'port' ? 'port' in one && one.port === id : 'channel' in one && one.channel === id,
    );
  const ports = result.ports
    .filter((port) => (port.flow ?? 0) < 0 || targeted('port', port.id))
    .map((port) => bar('port', port.id, port.flow, bandOf(result, kind === 'flow' ? 'flow' : 'share', port)));
  const channels = result.channels
    .filter(({ id }) => targeted('channel', id))
    .map(({ id, pieces }) => {
      const most = pieces.reduce<(typeof pieces)[number] | null>(
        (best, piece) =>
          best === null || Math.abs(piece.flow ?? 0) > Math.abs(best.flow ?? 0) ? piece : best,
        null,
      );
      return bar(
        'channel',
        id,
        most?.flow ?? null,
        most && bandOf(result, kind === 'flow' ? 'flow' : 'share', most),
      );
    });
  return { kind, bars: [...ports, ...channels] };
}
