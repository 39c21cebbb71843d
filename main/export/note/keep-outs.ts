import type { Chip, Point } from '../../../solver/chip/chip.ts';
import type { At, Item, Mm } from './picture.ts';

/** Between the lines of the hatching, mm of paper. */
const PITCH: Mm = 1.6;

/** What is to stay clear on the layers shown: a broken outline, hatched, with its name. */
export function keepOutItems(chip: Chip, layers: readonly string[], place: (p: Point) => At): Item[] {
  return (chip.keepOuts ?? []).flatMap(({ id, layer, outline }): Item[] => {
    if (layer !== undefined && !layers.includes(layer)) return [];
    const corners = outline.map(place);
    const x = corners.map(([at]) => at);
    const y = corners.map(([, at]) => at);
    const [left, right, top, bottom] = [Math.min(...x), Math.max(...x), Math.min(...y), Math.max(...y)];
    const hatch = hatching(corners);
    return [
      ...(hatch.length > 0
        ? [{ kind: 'shape', loops: hatch, closed: false, stroke: 'line', weight: 0.12 } as const]
        : []),
      { kind: 'shape', loops: [corners], closed: true, stroke: 'soft', weight: 0.18, dashed: true },
      {
        kind: 'label',
        at: [(left + right) / 2, (top + bottom) / 2 + 0.7],
        text: id,
        size: 2,
        anchor: 'middle',
        tone: 'soft',
        cleared: true,
      },
    ];
  });
}

/** Lines along x + y = constant, as far as they lie inside. */
function hatching(corners: readonly At[]): [At, At][] {
  const sums = corners.map(([x, y]) => x + y);
  const step = PITCH * Math.SQRT2;
  const lines: [At, At][] = [];
  for (let sum = Math.ceil(Math.min(...sums) / step) * step; sum < Math.max(...sums); sum += step) {
    const cuts: At[] = [];
    corners.forEach(([ax, ay], i) => {
      const [bx, by] = corners[(i + 1) % corners.length]!;
      const [a, b] = [ax + ay - sum, bx + by - sum];
      if (a < 0 === b < 0) return;
      const t = a / (a - b);
      cuts.push([ax + t * (bx - ax), ay + t * (by - ay)]);
    });
    cuts.sort((p, q) => p[0] - q[0]);
    for (let i = 0; i + 1 < cuts.length; i += 2) lines.push([cuts[i]!, cuts[i + 1]!]);
  }
  return lines;
}
