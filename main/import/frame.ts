import { Problem } from '../../solver/problem/problem.ts';
import type { Role } from '../contract/bring-in.ts';
import type { Drawing, DrawnLayer, Vertices } from './drawing.ts';
import type { Frame } from './recognise/plane.ts';

/** Kept free around a drawing that has no edge of its own, nm. */
const MARGIN = 2_000_000;
/** Furthest that a chip may reach, nm. */
const WIDEST = 1_000_000_000;

export interface Placed {
  readonly frame: Frame;
  /** nm */
  readonly width: number;
  readonly height: number;
  /** How the edge was found, in a sentence. */
  readonly says: string;
}

interface Box {
  x0: number;
  y0: number;
  x1: number;
  y1: number;
}

/** Where the drawing lies on the chip: its edge from (0, 0). `scale` is nm per drawing unit. */
export function placed(drawing: Drawing, roles: ReadonlyMap<string, Role>, scale: number): Placed {
  const of = (kind: Role['kind']): DrawnLayer[] =>
    drawing.layers.filter(({ name }) => roles.get(name)?.kind === kind);
  const edge = boxOf(of('outline'));
  const fluid = boxOf([...of('cavity'), ...of('holes')]);
  if (!fluid) {
    throw new Problem(
      'missing',
      'Nothing in the drawing is fluid: no layer that counts as cavity holds a closed region or a path with a width.',
      '',
      'Say which layer is the fluid, or give lines a width.',
    );
  }
  const page = drawing.page && { x0: 0, y0: 0, x1: drawing.page.width, y1: drawing.page.height };
  const within = (box: Box): boolean =>
    fluid.x0 >= box.x0 && fluid.y0 >= box.y0 && fluid.x1 <= box.x1 && fluid.y1 <= box.y1;
  let box: Box;
  let says: string;
  if (edge) {
    [box, says] = [edge, 'The edge of the chip is the box around the layer of the outline.'];
  } else if (page && within(page)) {
    [box, says] = [page, 'The edge of the chip is the page.'];
  } else if (fluid.x0 > 0 && fluid.y0 > 0) {
    // Places stay as they are drawn; the far margins are made like the near ones.
    box = { x0: 0, y0: 0, x1: fluid.x1 + fluid.x0, y1: fluid.y1 + fluid.y0 };
    says = 'The drawing has no edge: the chip was given the same margin on opposite sides.';
  } else {
    const free = MARGIN / scale;
    box = { x0: fluid.x0 - free, y0: fluid.y0 - free, x1: fluid.x1 + free, y1: fluid.y1 + free };
    says = 'The drawing has no edge: the chip was given a margin of 2 mm, and the drawing moved to fit.';
  }
  const [width, height] = [(box.x1 - box.x0) * scale, (box.y1 - box.y0) * scale];
  if (!(Math.max(width, height) <= WIDEST) || Math.round(width) < 1 || Math.round(height) < 1) {
    throw new Problem(
      'range',
      'In this unit the drawing is larger than a metre, or smaller than a nanometre.',
      '',
      'Check the unit of the drawing.',
    );
  }
  return {
    frame: { scale, x: -box.x0 * scale, y: -box.y0 * scale },
    width: Math.round(width),
    height: Math.round(height),
    says,
  };
}

export function boxOf(layers: readonly DrawnLayer[]): Box | null {
  const box: Box = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity };
  const add = (vertices: Vertices): void => {
    const count = vertices.length / 3;
    for (let i = 0; i < count; i += 1) {
      const [x, y, bulge] = [vertices[3 * i], vertices[3 * i + 1], vertices[3 * i + 2]];
      grow(box, x, y);
      if (bulge === 0) continue;
      // The crown of the arc: enough for the circles and rounded ends that edges have.
      const next = 3 * ((i + 1) % count);
      const [dx, dy] = [vertices[next] - x, vertices[next + 1] - y];
      grow(box, x + dx / 2 + (bulge * dy) / 2, y + dy / 2 - (bulge * dx) / 2);
    }
  };
  for (const { regions, tracks, lines } of layers) {
    for (const { loops } of regions) loops.forEach(add);
    for (const { vertices } of [...tracks, ...lines]) add(vertices);
  }
  return box.x1 >= box.x0 ? box : null;
}

function grow(box: Box, x: number, y: number): void {
  box.x0 = Math.min(box.x0, x);
  box.y0 = Math.min(box.y0, y);
  box.x1 = Math.max(box.x1, x);
  box.y1 = Math.max(box.y1, y);
}
