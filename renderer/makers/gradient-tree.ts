import type { Channel, Chip, Nm, Port } from '../../solver/chip/chip.ts';
import type { Box } from '../geometry/path.ts';
import { pathLength } from '../geometry/path.ts';
import { lengthFigure } from '../words/figure.ts';
import { commonHole, family, type Made, type Maker, type Making, NOTHING, sameShape } from './made.ts';
import { serpentine } from './serpentine.ts';

/**
 * A tree that makes a row of graded mixtures from its inlets: each stage has one mixing channel more than
 * the one before, and a cross channel between stages lets neighbours share. Left to right in a box.
 */
export interface GradientTreeWishes {
  readonly layer: string;
  readonly box: Box;
  /** 2 to 20. */
  readonly inlets: number;
  /** 1 to 20; outlets = inlets + stages. */
  readonly stages: number;
  readonly width: Nm;
  /** Length of each mixing channel, nm. */
  readonly mixing: Nm;
  readonly portDiameter: Nm | null;
}

function build(name: string, wishes: GradientTreeWishes): Made | string {
  const { box, inlets, stages, width, layer, portDiameter } = wishes;
  const outlets = inlets + stages;
  const pitch = (box.top - box.bottom) / outlets;
  const run = (box.right - box.left) / (stages + 1);
  const middle = (box.bottom + box.top) / 2;
  const height = (count: number, i: number): number => Math.round(middle + ((count - 1) / 2 - i) * pitch);
  const x = (stage: number): number => Math.round(box.left + stage * run);
  const channels: Channel[] = [];
  const ports: Port[] = [];
  const straight = (id: string, path: Channel['path']): Channel => ({
    id,
    layer,
    path,
    width: [width, width],
    bendRadius: 0,
  });
  const port = (id: string, at: readonly [number, number], drive: Port['drive']): void => {
    if (portDiameter !== null) ports.push({ id, at, layer, diameter: portDiameter, drive, tubing: [] });
  };
  for (let stage = 0; stage <= stages; stage += 1) {
    const many = inlets + stage;
    for (let i = 0; i < many; i += 1) {
      const y = height(many, i);
      const id = `${name}-${stage}-${i + 1}`;
      if (stage === 0) {
        channels.push(
          straight(id, [
            [x(0), y],
            [x(1), y],
          ]),
        );
        port(`${name}-in${i + 1}`, [x(0), y], { kind: 'flow', flow: 5e-9 / 60 });
        continue;
      }
      const room: Box = {
        left: x(stage),
        right: x(stage + 1),
        bottom: y - Math.floor((pitch - width) / 2),
        top: y + Math.floor((pitch - width) / 2),
      };
      const made = serpentine.make(id, {
        layer,
        length: Math.max(wishes.mixing, room.right - room.left),
        box: { ...room, bottom: Math.max(room.bottom, y - (room.top - y)) },
        width,
        gap: width,
        bendRadius: 0,
        upright: false,
      });
      if ('refusal' in made) return made.refusal;
      channels.push(made.made.channels[0]!);
      if (stage === stages) port(`${name}-out${i + 1}`, [x(stage + 1), y], { kind: 'pressure', pressure: 0 });
    }
    if (stage < stages) {
      // as wide as the larger of its two sides: the next stage has one channel more
      const top = height(many + 1, 0);
      const low = height(many + 1, many);
      channels.push(
        straight(`${name}-${stage}-x`, [
          [x(stage + 1), top],
          [x(stage + 1), low],
        ]),
      );
    }
  }
  return { ...NOTHING, channels, ports };
}

function make(name: string, wishes: GradientTreeWishes): Making {
  const { inlets, stages, box, width } = wishes;
  if (!Number.isInteger(inlets) || inlets < 2 || inlets > 20)
    return { refusal: 'A gradient tree has from 2 to 20 inlets.' };
  if (!Number.isInteger(stages) || stages < 1 || stages > 20)
    return { refusal: 'A gradient tree has from 1 to 20 stages.' };
  const pitch = (box.top - box.bottom) / (inlets + stages);
  if (!(box.right > box.left) || pitch <= 2 * width)
    return {
      refusal: `The outlets would lie ${lengthFigure(Math.max(0, pitch))} apart, too close for this width; make the box higher.`,
    };
  const made = build(name, wishes);
  return typeof made === 'string' ? { refusal: made } : { made };
}

function read(chip: Chip, name: string): GradientTreeWishes | null {
  const there = family(chip, name);
  const count = (stage: number): number =>
    there.channels.filter((part) => new RegExp(`-${stage}-\\d+$`).test(part.id)).length;
  const inlets = count(0);
  const first = there.channels.find((part) => part.id === `${name}-0-1`);
  if (inlets < 2 || !first) return null;
  let stages = 0;
  while (count(stages + 1) > 0) stages += 1;
  const outlets = inlets + stages;
  const top = there.channels.find((part) => part.id === `${name}-${stages}-1`);
  const low = there.channels.find((part) => part.id === `${name}-${stages}-${outlets}`);
  if (!top || !low || stages < 1) return null;
  const pitch = (top.path[0]![1] - low.path[0]![1]) / (outlets - 1);
  const wishes: GradientTreeWishes = {
    layer: first.layer,
    box: {
      left: first.path[0]![0],
      right: top.path.at(-1)![0],
      top: Math.round(top.path[0]![1] + pitch / 2),
      bottom: Math.round(low.path[0]![1] - pitch / 2),
    },
    inlets,
    stages,
    width: first.width[0],
    mixing: Math.round(pathLength(top.path)),
    portDiameter: commonHole(there.ports),
  };
  const again = build(name, wishes);
  return typeof again !== 'string' && sameShape(there, again) ? wishes : null;
}

export const gradientTree: Maker<GradientTreeWishes> = { kind: 'gradient tree', make, read };
