import type { Chip, Layer } from '../../../solver/chip/chip.ts';
import { metres } from '../../../solver/chip/units.ts';
import { plain } from './blocks.ts';
import { measure, roundStep } from './drawing.ts';
import type { At, Item, Mm, Picture } from './picture.ts';

/** A layer's cross-section at the width that most of its channels have, with its dimensions. */

const WIDE: Mm = 52;
const BODY = { width: 34, height: 15 } as const;
const ARC_STEPS = 24;

/** The width that most channels of a layer have, nm; null where it has none. */
export function usualWidth(chip: Chip, layer: string): number | null {
  const counts = new Map<number, number>();
  for (const channel of chip.channels) {
    if (channel.layer !== layer) continue;
    for (const width of channel.width) counts.set(width, (counts.get(width) ?? 0) + 1);
  }
  let best: number | null = null;
  for (const [width, count] of counts) if (best === null || count > counts.get(best)!) best = width;
  return best;
}

const arc = (x: number, y: number, rx: number, ry: number, from: number, to: number): At[] =>
  Array.from({ length: ARC_STEPS + 1 }, (_, i) => {
    const angle = from + ((to - from) * i) / ARC_STEPS;
    return [x + rx * Math.cos(angle), y + ry * Math.sin(angle)];
  });

/** Outline in metres, floor at y = 0, mask side up, and its width and depth over all. */
function outline(layer: Layer, width: number): readonly At[] {
  const depth = metres(layer.depth);
  const half = width / 2;
  const { profile } = layer;
  switch (profile.kind) {
    case 'rectangle':
      return [
        [-half, 0],
        [half, 0],
        [half, depth],
        [-half, depth],
      ];
    case 'trapezoid': {
      const slope = Math.tan((profile.wallAngle * Math.PI) / 180);
      const floor = half - depth / slope;
      // walls that meet above the floor leave a groove
      return floor > 0
        ? [
            [-floor, 0],
            [floor, 0],
            [half, depth],
            [-half, depth],
          ]
        : [
            [0, depth - half * slope],
            [half, depth],
            [-half, depth],
          ];
    }
    case 'rounded':
      return [
        ...arc(half, depth, depth, depth, -Math.PI / 2, 0),
        ...arc(-half, depth, depth, depth, Math.PI, 1.5 * Math.PI),
      ];
    case 'triangle':
      return [
        [0, 0],
        [half, depth],
        [-half, depth],
      ];
    case 'polygon':
      return profile.points;
    default:
      return arc(0, depth / 2, half, depth / 2, 0, 2 * Math.PI);
  }
}

export function sectionPicture(chip: Chip, layer: Layer): Picture | null {
  const nm = usualWidth(chip, layer.id);
  if (nm === null) return null;
  const points = outline(layer, metres(nm));
  const xs = points.map(([x]) => x);
  const ys = points.map(([, y]) => y);
  const [left, right] = [Math.min(...xs), Math.max(...xs)];
  const [low, high] = [Math.min(...ys), Math.max(...ys)];
  const scale = Math.min(BODY.width / (right - left), BODY.height / (high - low));
  const wide = (right - left) * scale;
  const tall = (high - low) * scale;
  const x0 = (WIDE - 12 - wide) / 2;
  const top = 8;
  const place = ([x, y]: At): At => [x0 + (x - left) * scale, top + (high - y) * scale];
  const measured = layer.profile.kind === 'polygon';
  const width = measured ? right - left : metres(nm);
  // the mask width of an etched channel is that of its flat: what it opens to at the lid is wider
  const [from, to] = [x0 + (wide - width * scale) / 2, x0 + (wide + width * scale) / 2];
  const depth = measured ? high - low : metres(layer.depth);
  const bar = roundStep((right - left) / 4);
  const barLeft = x0;
  const below = top + tall + 4.5;
  const items: Item[] = [
    { kind: 'shape', loops: [points.map(place)], closed: true, fill: 'body', stroke: 'ink', weight: 0.2 },
    ...measure([from, top - 3], [to, top - 3]),
    {
      kind: 'label',
      at: [(from + to) / 2, top - 4.7],
      text: `${measured ? 'width' : 'mask width'} ${plain(width, 'length')}`,
      size: 2.5,
      anchor: 'middle',
    },
    ...measure([x0 + wide + 3, top], [x0 + wide + 3, top + tall]),
    {
      kind: 'label',
      at: [x0 + wide + 4.6, top + tall / 2 + 0.9],
      text: plain(depth, 'length'),
      size: 2.5,
      anchor: 'start',
    },
    {
      kind: 'shape',
      loops: [
        [
          [barLeft, below],
          [barLeft + bar * scale, below],
        ],
      ],
      closed: false,
      stroke: 'ink',
      weight: 0.5,
    },
    {
      kind: 'label',
      at: [barLeft + bar * scale + 1.5, below + 0.8],
      text: plain(bar, 'length'),
      size: 2.2,
      anchor: 'start',
      tone: 'soft',
    },
  ];
  return {
    width: WIDE,
    height: below + 3,
    items,
    caption: `Layer ${layer.id}, the width that most channels have; lid at the top.`,
    alt: `Cross-section of layer ${layer.id}: ${layer.profile.kind}, ${plain(width, 'length')} wide, ${plain(depth, 'length')} deep.`,
  };
}
