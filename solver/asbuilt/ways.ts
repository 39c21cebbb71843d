import type { Chip } from '../chip/chip.ts';
import type { Result, TargetResult } from '../chip/result.ts';

/**
 * The way that the flow of every target runs in a result: 1 into the chip or along the channel's path, -1 against
 * it, 0 where it runs both ways or is not known.
 */
export function waysOf(chip: Chip, result: Result): number[] {
  return chip.targets.map((_, i) => {
    const signs = new Set(flowsOf(chip, result, i).map(Math.sign));
    const [way] = signs;
    return signs.size === 1 ? way! : 0;
  });
}

/**
 * The result with its targets held to the ways they are meant: what runs the other way is got as less than nothing, and
 * is never met.
 *
 * @param ways as `waysOf` gives them
 */
export function heldToWays(chip: Chip, result: Result, ways: readonly number[]): Result {
  const entering = result.ports.reduce((sum, { flow }) => sum + Math.max(0, flow ?? 0), 0);
  const targets = result.targets.map((target, i): TargetResult => {
    const back = flowsOf(chip, result, i).filter((flow) => flow * ways[i]! < 0);
    if (back.length === 0) return target;
    const most = Math.max(...back.map(Math.abs));
    return { ...target, got: 'share' in chip.targets[i]! ? -most / entering : -most, met: false };
  });
  return { ...result, targets };
}

function flowsOf(chip: Chip, { ports, channels }: Result, index: number): number[] {
  const target = chip.targets[index]!;
  const flows =
    'port' in target
      ? ports.filter(({ id }) => id === target.port).map(({ flow }) => flow)
      : channels
          .filter(({ id }) => id === target.channel)
          .flatMap(({ pieces }) => pieces.map(({ flow }) => flow));
  return flows.filter((flow) => flow !== null);
}
