import type { Chip, Point } from '../../../solver/chip/chip.ts';
import type { Graph } from '../../../solver/chip/graph.ts';
import { planCavities } from '../../../solver/chip/plan.ts';
import { readGraph } from '../../../solver/chip/read-graph.ts';
import type { Shape } from '../../../solver/mesh/mesh.ts';
import { Problem } from '../../../solver/problem/problem.ts';
import { onWafer } from './array.ts';
import { compensated } from './compensate.ts';
import { MARK_GAP, MARK_HEIGHT, MARK_WIDTH, markHalf } from './marks.ts';
import { keyOf } from './names.ts';
import { commonNotes, layerNotes } from './notes.ts';
import type { LayerSettings, MaskSettings } from './settings.ts';
import {
  type Box,
  boxOf,
  circle,
  type Placing,
  placed,
  rectangle,
  reversed,
  tidied,
  united,
} from './shapes.ts';
import type { WaferLayout } from './wafer.ts';

/**
 * What is drawn, whatever the format: one drawing per layer and one of the holes, as shapes of lines and
 * true arcs, nm, y upward. One chip has its lower left corner at (0, 0), before it is scaled about its
 * centre; on a wafer the wafer's centre is (0, 0) and chips are copies of it.
 */
export interface MaskModel {
  readonly title: string;
  readonly version: string;
  readonly made: Date;
  readonly settings: MaskSettings;
  readonly planes: readonly MaskPlane[];
  /** The point of a chip that is set on each place of a wafer. */
  readonly centre: readonly [number, number];
  /** All that is drawn of one chip, text aside. */
  readonly field: Box;
  readonly wafer: WaferLayout | null;
  /** What holds of every drawing, in sentences. */
  readonly notes: readonly string[];
}

/** The name of a port or via, at its place. */
export interface Label {
  readonly text: string;
  readonly x: number;
  readonly y: number;
  /** Whether a drawing that sets names ends this one at its place, so that it stays on the chip. */
  readonly ends: boolean;
}

export interface MaskPlane {
  /** Id of the layer, or HOLES. */
  readonly name: string;
  /** The same in letters that every format takes, and unlike any other. */
  readonly key: string;
  readonly kind: 'layer' | 'holes';
  /** GDSII layer. */
  readonly number: number;
  /** Connected cavities, none overlapping another; outer boundary counter-clockwise, holes clockwise. */
  readonly cavities: readonly Shape[];
  readonly marks: readonly Shape[];
  /** None or one. */
  readonly outline: readonly Shape[];
  /** None or one, a frame round the outline. */
  readonly lane: readonly Shape[];
  /** Names at their places: to be read, never part of what is exposed. */
  readonly labels: readonly Label[];
  /** What holds of this drawing, in sentences. */
  readonly notes: readonly string[];
  readonly undercut: number;
  readonly scale: number;
}

export const HOLES = 'ports and vias';

export function maskModel(
  chip: Chip,
  settings: MaskSettings,
  program: { readonly version: string; readonly made: Date },
): MaskModel {
  const graph = readGraph(chip);
  const centre = [chip.outline.width / 2, chip.outline.height / 2] as const;
  const circles = holesOf(chip, settings);
  const drawings = settings.layers.length + (circles.length > 0 ? 1 : 0);
  const common = { chip, settings, drawings };
  const planes: MaskPlane[] = settings.layers.map((entry, i) => {
    const number = chip.layers.indexOf(entry.layer) + 1;
    const placing = { mirror: settings.mirror, scale: entry.scale, about: centre };
    return {
      name: entry.layer.id,
      key: keyOf(number, entry.layer.id),
      kind: 'layer',
      number,
      cavities: cavitiesOf(chip, graph, entry, settings).map((shape) => placed(shape, placing)),
      ...frame(common, i, placing),
      labels: circles.length > 0 ? [] : portLabels(chip, [entry.layer.id], placing),
      notes: layerNotes(entry),
      undercut: entry.undercut,
      scale: entry.scale,
    };
  });
  if (circles.length > 0) {
    // made in the part, which has shrunk to its true size
    const placing = { mirror: settings.mirror, scale: 1, about: centre };
    planes.push({
      name: HOLES,
      key: 'HOLES',
      kind: 'holes',
      number: chip.layers.length + 1,
      cavities: circles.map((shape) => placed(shape, placing)),
      ...frame(common, drawings - 1, placing),
      labels: portLabels(
        chip,
        settings.layers.map(({ layer }) => layer.id),
        placing,
      ),
      notes: ['At the size of the finished part.'],
      undercut: 0,
      scale: 1,
    });
  }
  const boxes = planes.flatMap((plane) => {
    const box = boxOf([...plane.cavities, ...plane.marks, ...plane.outline, ...plane.lane]);
    return box ? [box] : [];
  });
  if (planes.every(({ cavities }) => cavities.length === 0)) {
    throw new Problem(
      'shape',
      'There is nothing to draw: the layers hold no cavity.',
      'layers',
      'Draw a channel first.',
    );
  }
  const set = settings.wafer
    ? onWafer(planes, chip.outline, settings, settings.wafer)
    : { planes, field: united(boxes), wafer: null, shared: { marks: false, lane: false } };
  const { wafer, shared } = set;
  const notes = commonNotes(settings, { drawings, wafer, shared });
  return {
    title: chip.name,
    ...program,
    settings,
    planes: set.planes,
    centre,
    field: set.field,
    wafer,
    notes,
  };
}

function cavitiesOf(
  chip: Chip,
  graph: Graph,
  { layer, undercut }: LayerSettings,
  settings: MaskSettings,
): Shape[] {
  return planCavities(chip, graph, layer.id, { fillets: false, holes: settings.pads }).flatMap(
    ({ shape }) => {
      const openings = compensated(shape, undercut).flatMap(tidied);
      if (openings.length > 0) return openings;
      const box = boxOf([shape])!;
      const at = [box.x0, box.y0].map((nm) => Math.round(nm / 1000)).join(', ');
      throw new Problem(
        'range',
        `The etch takes ${undercut / 1000} µm off on each side: the mask of a cavity would be closed.`,
        `layer ${layer.id}, near ${at} µm`,
        'Widen the cavity, make it less deep, or give the undercut of this layer (0 for none).',
      );
    },
  );
}

function holesOf(chip: Chip, { layers }: MaskSettings): Shape[] {
  const drawn = new Set(layers.map(({ layer }) => layer.id));
  const shapes: Shape[] = [];
  const hole = ([x, y]: Point, diameter: number): void => {
    if (diameter > 0) shapes.push([circle(x, y, diameter / 2)]);
  };
  for (const port of chip.ports) if (drawn.has(port.layer)) hole(port.at, port.diameter);
  for (const via of chip.vias) if (via.layers.some((id) => drawn.has(id))) hole(via.at, via.diameter);
  return shapes;
}

/** Outline, lane and marks of the drawing that is number `index` of all. */
function frame(
  { chip, settings, drawings }: { chip: Chip; settings: MaskSettings; drawings: number },
  index: number,
  placing: Placing,
): Pick<MaskPlane, 'outline' | 'lane' | 'marks'> {
  const { width, height } = chip.outline;
  const { lane } = settings;
  const edge = rectangle(0, 0, width, height);
  const marks: Shape[] = [];
  if (settings.marks) {
    // the first drawing holds the first half of every pair, each further one the second half of its own
    const unit = settings.markUnit;
    for (let pair = 0; pair < drawings - 1; pair++) {
      if (index !== 0 && index !== pair + 1) continue;
      const side = index === 0 ? 'first' : 'second';
      const y = height / 2 + ((drawings - 2) / 2 - pair) * MARK_HEIGHT * unit;
      const out = lane + (MARK_GAP + MARK_WIDTH / 2) * unit;
      for (const x of [-out, width + out]) marks.push(...markHalf(side, x, y, unit));
    }
  }
  return {
    outline: settings.outline ? [placed([edge], placing)] : [],
    lane:
      lane > 0
        ? [placed([rectangle(-lane, -lane, width + lane, height + lane), reversed(edge)], placing)]
        : [],
    marks: marks.map((shape) => placed(shape, placing)),
  };
}

function portLabels(
  chip: Chip,
  layers: readonly string[],
  { mirror, scale, about }: Placing,
): MaskPlane['labels'] {
  const drawn = new Set(layers);
  const named = [
    ...chip.ports.filter(({ layer }) => drawn.has(layer)),
    ...chip.vias.filter((via) => via.layers.some((id) => drawn.has(id))),
  ];
  return named.map(({ id, at }) => {
    const x = about[0] + (mirror ? about[0] - at[0] : at[0] - about[0]) * scale;
    return { text: id, x, y: about[1] + (at[1] - about[1]) * scale, ends: x > about[0] };
  });
}
