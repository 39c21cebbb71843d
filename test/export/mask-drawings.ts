import type { Path64, Paths64 } from 'clipper2-ts';
import { area, FillRule, union, xor } from 'clipper2-ts';
import type { MaskFormat, MaskOptions } from '../../main/contract/mask.ts';
import { FORMATS } from '../../main/export/mask/formats.ts';
import { type MaskModel, maskModel } from '../../main/export/mask/model.ts';
import { maskSettings } from '../../main/export/mask/settings.ts';
import { flatPaths } from '../../main/export/mask/shapes.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { flatten } from '../../solver/chip/plan.ts';
import type { Edge, Shape } from '../../solver/mesh/mesh.ts';
import { channel, chipOf, layer } from '../chip/drawings.ts';

export const MADE = new Date('2026-12-01T12:34:56Z');

/** Nothing but the cavities. */
export const BARE: MaskOptions = { marks: false, labels: false, outline: false, lane: 0 };

export const modelOf = (chip: Chip, options: MaskOptions = {}): MaskModel =>
  maskModel(chip, maskSettings(chip, options), { version: '0', made: MADE });

/** A quarter bend: from (10, 10) right, up to (30, 30), 4 µm wide, turned with a radius of 10 µm. */
export const bend = (): Chip =>
  chipOf({
    name: 'bend',
    outline: { width: 40_000, height: 40_000 },
    layers: [layer('a')],
    channels: [
      channel(
        'c',
        [
          [10, 10],
          [30, 10],
          [30, 30],
        ],
        4,
        { layer: 'a', bendRadius: 10 },
      ),
    ],
  });

/** What a format makes of a model and reads back from it, and the file. */
export async function roundTrip(model: MaskModel, format: MaskFormat) {
  const { write, read, layer: name } = FORMATS[format];
  const bytes = await write(model);
  return { bytes, found: await read(bytes), name };
}

/** Area by which shapes and loops differ, both cut to chords within `error` nm, by the polygon library. */
export function apart(shapes: readonly Shape[], loops: readonly (readonly Edge[])[], error: number): number {
  const wanted = shapes.flatMap((shape) => flatPaths(shape, error));
  return areaBetween(
    wanted,
    loops.map((loop) => toPath(flatten(loop, error))),
  );
}

const toPath = (points: readonly (readonly [number, number])[]): Path64 => points.map(([x, y]) => ({ x, y }));

export const areaBetween = (a: Paths64, b: Paths64): number =>
  areaOfPaths(xor(union(a, FillRule.NonZero), union(b, FillRule.NonZero), FillRule.NonZero));

export const areaOfPaths = (paths: Paths64): number => paths.reduce((sum, path) => sum + area(path), 0);
