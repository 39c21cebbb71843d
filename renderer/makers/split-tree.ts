import type { Channel, Chip, Nm, Port, Target } from '../../solver/chip/chip.ts';
import type { Box } from '../geometry/path.ts';
import { tidy } from '../geometry/path.ts';
import { lengthFigure } from '../words/figure.ts';
import { commonHole, family, type Made, type Maker, type Making, sameShape } from './made.ts';

/**
 * A tree from one trunk to 2^n equal paths, left to right in a box: at each level a branch goes to the
 * side and on. `joining` turns it round, from 2^n to one.
 */
export interface SplitTreeWishes {
  readonly layer: string;
  /** 1 to 10. */
  readonly levels: number;
  readonly box: Box;
  readonly trunkWidth: Nm;
  readonly leafWidth: Nm;
  readonly joining: boolean;
  /** Hole of the ports at trunk and leaves; null for none. */
  readonly portDiameter: Nm | null;
}

export const MOST_LEVELS = 10;
/** nm, left between the holes of neighbouring outlets. */
const LEAST_WALL = 100_000;

function widthAt(wishes: SplitTreeWishes, level: number): Nm {
  const share = level / wishes.levels;
  return Math.round(wishes.trunkWidth * (wishes.leafWidth / wishes.trunkWidth) ** share);
}

function build(name: string, wishes: SplitTreeWishes): Made {
  const { box, levels, layer, joining, portDiameter } = wishes;
  const run = (box.right - box.left) / (levels + 1);
  const at = (level: number): number => {
    const x = Math.round(level * run);
    return joining ? box.right - x : box.left + x;
  };
  const height = box.top - box.bottom;
  // the leaves of a level stand at equal pitch; level 0 has one, in the middle
  const heightOf = (level: number, index: number): number =>
    Math.round(box.top - ((index + 0.5) * height) / 2 ** level);
  const channels: Channel[] = [];
  const ports: Port[] = [];
  const targets: Target[] = [];
  const port = (id: string, p: readonly [number, number], drive: Port['drive']): void => {
    if (portDiameter !== null) ports.push({ id, at: p, layer, diameter: portDiameter, drive, tubing: [] });
  };
  // first, so that it stays so when leaves are added
  port(
    `${name}-${joining ? 'out' : 'in'}`,
    [at(0), heightOf(0, 0)],
    joining ? { kind: 'pressure', pressure: 0 } : { kind: 'flow', flow: 1e-8 / 60 },
  );
  for (let level = 0; level <= levels; level += 1) {
    const width = widthAt(wishes, level);
    for (let index = 0; index < 2 ** level; index += 1) {
      const y = heightOf(level, index);
      const from = level === 0 ? y : heightOf(level - 1, index >> 1);
      const path = tidy([
        [at(level), from],
        [at(level), y],
        [at(level + 1), y],
      ]);
      channels.push({
        id: `${name}-${level}-${index + 1}`,
        layer,
        path: (joining ? path.reverse() : path) as Channel['path'],
        width: [width, width],
        bendRadius: 0,
      });
      const leaf = `${name}-${joining ? 'in' : 'out'}${index + 1}`;
      if (level === levels) {
        port(
          leaf,
          [at(level + 1), y],
          joining ? { kind: 'flow', flow: 1e-9 / 60 } : { kind: 'pressure', pressure: 0 },
        );
        if (portDiameter !== null && !joining)
          targets.push({ port: leaf, share: 1 / 2 ** levels, within: 0.02 });
      }
    }
  }
  return { channels, chambers: [], ports, targets };
}

function make(name: string, wishes: SplitTreeWishes): Making {
  const { levels, box, leafWidth, trunkWidth } = wishes;
  if (!Number.isInteger(levels) || levels < 1 || levels > MOST_LEVELS)
    return { refusal: `A tree has from 1 to ${MOST_LEVELS} levels; each doubles its outlets.` };
  const pitch = (box.top - box.bottom) / 2 ** levels;
  if (!(box.right > box.left && pitch > 0))
    return { refusal: 'The box has no size; draw it from one corner to the other.' };
  if (pitch <= leafWidth)
    return {
      refusal: `The outlets would lie ${lengthFigure(pitch)} apart, closer than they are wide; make the box higher.`,
    };
  const { portDiameter } = wishes;
  if (portDiameter !== null && pitch <= portDiameter + LEAST_WALL)
    return {
      refusal: `The holes of the outlets, ${lengthFigure(portDiameter)} wide, would run into one another at ${lengthFigure(pitch)} apart; make the box ${lengthFigure(Math.ceil((portDiameter + LEAST_WALL) * 2 ** levels))} high or more, or the holes smaller.`,
    };
  if ((box.right - box.left) / (levels + 1) <= trunkWidth)
    return { refusal: 'The levels would run into one another; make the box longer.' };
  return { made: build(name, wishes) };
}

function read(chip: Chip, name: string): SplitTreeWishes | null {
  const there = family(chip, name);
  const levels = Math.log2(there.channels.length + 1) - 1;
  const trunk = there.channels.find((part) => part.id === `${name}-0-1`);
  const leaf = there.channels.find((part) => part.id === `${name}-${levels}-1`);
  const last = there.channels.find((part) => part.id === `${name}-${levels}-${2 ** levels}`);
  if (!Number.isInteger(levels) || levels < 1 || !trunk || !leaf || !last) return null;
  const outer = (channel: Channel, joining: boolean): readonly [number, number] =>
    joining ? channel.path[0]! : channel.path.at(-1)!;
  for (const joining of [false, true]) {
    const root = joining ? trunk.path.at(-1)! : trunk.path[0]!;
    const top = outer(leaf, joining);
    const low = outer(last, joining);
    const half = (top[1] - low[1]) / (2 ** levels - 1) / 2;
    const wishes: SplitTreeWishes = {
      layer: trunk.layer,
      levels,
      box: {
        left: Math.min(root[0], top[0]),
        right: Math.max(root[0], top[0]),
        top: Math.round(top[1] + half),
        bottom: Math.round(low[1] - half),
      },
      trunkWidth: trunk.width[0],
      leafWidth: leaf.width[0],
      joining,
      portDiameter: commonHole(there.ports),
    };
    if (sameShape(there, build(name, wishes))) return wishes;
  }
  return null;
}

export const splitTree: Maker<SplitTreeWishes> = { kind: 'split tree', make, read };
