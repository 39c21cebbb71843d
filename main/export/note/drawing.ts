import type { Chip, Point } from '../../../solver/chip/chip.ts';
import type { Graph } from '../../../solver/chip/graph.ts';
import { planPolygons } from '../../../solver/chip/plan.ts';
import { inUnit, metres } from '../../../solver/chip/units.ts';
import { keepOutItems } from './keep-outs.ts';
import { channelLabels, holeLabels, type Labels } from './labels.ts';
import type { At, Item, Mm, Picture } from './picture.ts';

/**
 * The plan of the chip as a drawing to scale: outline with its own graduated edge, dimensions over all,
 * the fluid of its layers, ports with their numbers, the marked corner, a scale bar.
 */

/** Enlargements and reductions as drawings use them: 1, 2, 5 times tens (ISO 5455), largest first. */
export const SCALES = [100, 50, 20, 10, 5, 2, 1, 0.5, 0.2, 0.1, 0.05, 0.02, 0.01] as const;

/** Room around the outline for dimensions and the graduated edge, mm of paper. */
const ROOM = { left: 12, right: 6, top: 11, bottom: 19 } as const;
/** Furthest that a chord may lie off its arc, mm of paper: finer than a printer's dot. */
const CHORD: Mm = 0.01;

export interface Paper {
  /** What a drawing may take, mm. */
  readonly width: Mm;
  readonly height: Mm;
}

const mm = (nm: number): Mm => inUnit(metres(nm), 'mm');

/** The largest usual scale at which the chip and what stands around it fit. */
export function scaleFor({ outline }: Chip, { width, height }: Paper): number {
  const wide = width - ROOM.left - ROOM.right;
  const high = height - ROOM.top - ROOM.bottom;
  const fits = (scale: number): boolean =>
    mm(outline.width) * scale <= wide && mm(outline.height) * scale <= high;
  return SCALES.find(fits) ?? Math.min(wide / mm(outline.width), high / mm(outline.height));
}

export const scaleWords = (scale: number): string => {
  const plain = (value: number): string => String(Number(value.toPrecision(6)));
  return scale >= 1 ? `${plain(scale)} : 1` : `1 : ${plain(1 / scale)}`;
};

export interface PlanOptions {
  /** Ids of the layers shown; the first is drawn darkest. */
  readonly layers: readonly string[];
  readonly paper: Paper;
  readonly caption: string;
  /** Whether channels bear their numbers. */
  readonly numbers: boolean;
}

/** A drawing of some layers. */
export function planPicture(chip: Chip, graph: Graph, options: PlanOptions): Picture {
  const scale = scaleFor(chip, options.paper);
  const wide = mm(chip.outline.width) * scale;
  const high = mm(chip.outline.height) * scale;
  const place = ([x, y]: Point): At => [ROOM.left + mm(x) * scale, ROOM.top + high - mm(y) * scale];
  const frame = { left: ROOM.left, top: ROOM.top, right: ROOM.left + wide, bottom: ROOM.top + high };
  const items: Item[] = [];
  const corners: At[] = [
    [frame.left, frame.top],
    [frame.right, frame.top],
    [frame.right, frame.bottom],
    [frame.left, frame.bottom],
  ];
  items.push({ kind: 'shape', loops: [corners], closed: true, stroke: 'ink', weight: 0.25 });
  const clear = keepOutItems(chip, options.layers, place);
  items.push(...clear);
  const chordError = Math.max(1, CHORD / (scale * mm(1)));
  for (const layer of [...options.layers].reverse()) {
    for (const { outer, holes } of planPolygons(chip, graph, layer, {
      chordError,
      fillets: true,
      holes: false,
    })) {
      const loops = [outer, ...holes].map((loop) => loop.map(place));
      const under = layer !== options.layers[0];
      items.push({
        kind: 'shape',
        loops,
        closed: true,
        ...(!under && { fill: 'body' as const }),
        stroke: 'ink',
        weight: 0.09,
        ...(under && { dashed: true }),
      });
    }
  }
  const shown = new Set(options.layers);
  const vias = chip.vias.filter(({ layers }) => layers.some((layer) => shown.has(layer)));
  const ports = chip.ports.flatMap((port, i) =>
    shown.has(port.layer) ? [{ ...port, name: port.id, number: String(i + 1) }] : [],
  );
  for (const { at, diameter } of vias) items.push(...via(place(at), (mm(diameter) * scale) / 2));
  for (const { at, diameter } of ports) items.push(...hole(place(at), (mm(diameter) * scale) / 2));
  const labels: Labels = { chip, frame, place, scale, taken: [] };
  const named = vias.map(({ id, at, diameter }) => ({ at, diameter, name: id, number: '' }));
  items.push(...holeLabels(labels, [...ports, ...named]));
  if (options.numbers) items.push(...channelLabels(labels, shown));
  items.push(...edge(chip, frame, scale), ...over(chip, frame), ...cornerMark(frame), ...bar(frame, scale));
  return {
    width: ROOM.left + wide + ROOM.right,
    height: ROOM.top + high + ROOM.bottom,
    items,
    caption: `${options.caption}${clear.length > 0 ? ' Hatched: to stay clear, no part of any mask.' : ''} Scale ${scaleWords(scale)} on paper printed at 100 %.`,
    alt: `Plan of ${options.layers.length === 1 ? `layer ${options.layers[0]}` : `${options.layers.length} layers`}, ${size(chip)}, ${chip.channels.length} channels, ports ${chip.ports.map(({ id }) => id).join(', ')}.`.slice(
      0,
      400,
    ),
  };
}

export const size = ({ outline }: Chip): string =>
  `${Number(mm(outline.width).toFixed(6))} × ${Number(mm(outline.height).toFixed(6))} mm`;

const line = (from: At, to: At, weight: Mm): Item => ({
  kind: 'shape',
  loops: [[from, to]],
  closed: false,
  stroke: 'ink',
  weight,
});

/** A hole to drill: its rim, its centre marked by a cross. */
function hole([x, y]: At, radius: Mm): Item[] {
  const arm = Math.max(0.9, radius * 0.55);
  return [
    ...(radius > 0
      ? [{ kind: 'disc', at: [x, y], radius, fill: 'paper', stroke: 'ink', weight: 0.2 } as const]
      : []),
    line([x - arm, y], [x + arm, y], 0.12),
    line([x, y - arm], [x, y + arm], 0.12),
  ];
}

/** A way from layer to layer: two rings. */
function via(at: At, radius: Mm): Item[] {
  return [
    { kind: 'disc', at, radius, fill: 'paper', stroke: 'ink', weight: 0.2 },
    { kind: 'disc', at, radius: radius * 0.55, stroke: 'ink', weight: 0.12 },
  ];
}

interface Frame {
  readonly left: Mm;
  readonly right: Mm;
  readonly top: Mm;
  readonly bottom: Mm;
}

/** A step of 1, 2 or 5 tens that is at least `least` long. */
export function roundStep(least: number): number {
  const power = 10 ** Math.floor(Math.log10(least));
  return power * ([1, 2, 5, 10].find((factor) => factor * power >= least * (1 - 1e-9)) ?? 10);
}

/** The chip carries its own ruler: ticks along its lower and left edge, in mm of the chip. */
function edge(chip: Chip, frame: Frame, scale: number): Item[] {
  const step = roundStep(1.4 / scale);
  const per = step >= 1 || step * 10 <= 1 ? 10 : 5;
  const every = roundStep(Math.max(step * per, 9 / scale));
  const items: Item[] = [];
  const ticks = (
    length: Mm,
    at: (value: number, reach: Mm) => [At, At, At],
    anchor: 'middle' | 'end',
  ): void => {
    for (let i = 0; i * step <= length * (1 + 1e-9); i += 1) {
      const value = i * step;
      const named = Math.abs(value / every - Math.round(value / every)) < 1e-6;
      const half = Math.abs(value / (every / 2) - Math.round(value / (every / 2))) < 1e-6;
      const [from, to, label] = at(value, named ? 1.8 : half ? 1.3 : 0.8);
      items.push(line(from, to, named ? 0.15 : 0.09));
      // the corner itself is marked, not numbered
      if (named && i > 0)
        items.push({
          kind: 'label',
          at: label,
          text: String(Number(value.toPrecision(6))),
          size: 2.2,
          anchor,
          tone: 'soft',
        });
    }
  };
  ticks(
    mm(chip.outline.width),
    (value, reach) => {
      const x = frame.left + value * scale;
      return [
        [x, frame.bottom],
        [x, frame.bottom + reach],
        [x, frame.bottom + 4.4],
      ];
    },
    'middle',
  );
  ticks(
    mm(chip.outline.height),
    (value, reach) => {
      const y = frame.bottom - value * scale;
      return [
        [frame.left, y],
        [frame.left - reach, y],
        [frame.left - 2.6, y + 0.8],
      ];
    },
    'end',
  );
  items.push({
    kind: 'label',
    at: [frame.right + 2.2, frame.bottom + 4.4],
    text: 'mm',
    size: 2.2,
    anchor: 'start',
    tone: 'soft',
  });
  return items;
}

/** Dimensions over all, above and at the left of the outline. */
function over(chip: Chip, frame: Frame): Item[] {
  const y = frame.top - 4.5;
  const x = frame.left - 8.6;
  const width = `${Number(mm(chip.outline.width).toFixed(6))}`;
  const height = `${Number(mm(chip.outline.height).toFixed(6))}`;
  const text = (at: At, label: string, upward: boolean): Item => ({
    kind: 'label',
    at,
    text: label,
    size: 2.8,
    anchor: 'middle',
    strong: true,
    cleared: true,
    ...(upward && { upward }),
  });
  return [
    line([frame.left, frame.top - 1], [frame.left, y - 1.2], 0.09),
    line([frame.right, frame.top - 1], [frame.right, y - 1.2], 0.09),
    ...measure([frame.left, y], [frame.right, y]),
    text([(frame.left + frame.right) / 2, y + 1], `${width} mm`, false),
    line([frame.left - 6.6, frame.top], [x - 1.2, frame.top], 0.09),
    line([frame.left - 6.6, frame.bottom], [x - 1.2, frame.bottom], 0.09),
    ...measure([x, frame.top], [x, frame.bottom]),
    text([x + 1, (frame.top + frame.bottom) / 2], `${height} mm`, true),
  ];
}

/** A dimension line with slim heads at both ends. */
export function measure(from: At, to: At): Item[] {
  const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
  const [ux, uy] = [(to[0] - from[0]) / length, (to[1] - from[1]) / length];
  const long = Math.min(2, length / 3);
  const head = ([x, y]: At, sign: number): Item => ({
    kind: 'shape',
    loops: [
      [
        [x, y],
        [x + sign * ux * long - uy * 0.35, y + sign * uy * long + ux * 0.35],
        [x + sign * ux * long + uy * 0.35, y + sign * uy * long - ux * 0.35],
      ],
    ],
    closed: true,
    fill: 'ink',
  });
  return [line(from, to, 0.12), head(from, 1), head(to, -1)];
}

/** The corner that positions are counted from: a filled wedge outside of it. */
function cornerMark({ left, bottom }: Frame): Item[] {
  return [
    {
      kind: 'shape',
      loops: [
        [
          [left, bottom],
          [left - 3.6, bottom + 1.2],
          [left - 1.2, bottom + 3.6],
        ],
      ],
      closed: true,
      fill: 'ink',
    },
  ];
}

/** The scale bar under the drawing, between 20 and 50 mm of paper long. */
function bar(frame: Frame, scale: number): Item[] {
  const length = roundStep(20 / scale);
  const y = frame.bottom + 10.5;
  const right = frame.left + length * scale;
  return [
    {
      kind: 'shape',
      loops: [
        [
          [frame.left, y - 0.5],
          [right, y - 0.5],
          [right, y + 0.5],
          [frame.left, y + 0.5],
        ],
      ],
      closed: true,
      fill: 'ink',
    },
    {
      kind: 'shape',
      loops: [
        [
          [frame.left + (right - frame.left) / 2, y - 0.3],
          [right - 0.2, y - 0.3],
          [right - 0.2, y + 0.3],
          [frame.left + (right - frame.left) / 2, y + 0.3],
        ],
      ],
      closed: true,
      fill: 'paper',
    },
    {
      kind: 'label',
      at: [right + 2.5, y + 0.9],
      text: `${barWords(length)} of the chip, ${Number((length * scale).toPrecision(6))} mm of paper`,
      size: 2.6,
      anchor: 'start',
    },
    {
      kind: 'label',
      at: [frame.left, y + 5.4],
      text: 'Seen from the mask side, x to the right, y upward, both from the corner marked by the wedge.',
      size: 2.4,
      anchor: 'start',
      tone: 'soft',
    },
  ];
}

const barWords = (length: number): string =>
  length >= 1 ? `${Number(length.toPrecision(6))} mm` : `${Number((length * 1000).toPrecision(6))} µm`;
