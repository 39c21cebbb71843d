import { Problem } from '../../../solver/problem/problem.ts';
import { type Affine, compose, growth, isSimilar, moved, SAME, shift } from '../affine.ts';
import { ellipsePoints } from '../curves.ts';
import { circle, type Drawing, evenWidths, extend, Gathering } from '../drawing.ts';
import { LIMITS, type Work } from '../work.ts';
import { fitted, lengthOf, pixelsOf } from './length.ts';
import { type Subpath, subpaths } from './path.ts';
import { INITIAL, paintKind, readSheet, type Sheet, type Style, styleOf } from './style.ts';
import { readTransform } from './transform.ts';
import { type Element, readTree } from './tree.ts';

/** Elements that hold others, drawn in their turn. */
const HOLDERS = new Set(['svg', 'g', 'a', 'switch']);
/** Elements that draw nothing where they stand. */
const SILENT = new Set(['defs', 'symbol', 'title', 'desc', 'metadata', 'style', 'namedview', 'script']);
const SHAPES = new Set(['path', 'rect', 'circle', 'ellipse', 'line', 'polyline', 'polygon']);

/** Names that programs give by themselves. */
const GIVEN_NAMES =
  /^(path|rect|circle|ellipse|line|polyline|polygon|use|g|svg|text|image|layer|shape)?[-_]?\d/i;
/** Shapes with names of their own that are told apart; in drawings with more the groups' names say more. */
const MOST_NAMED = 60;

interface Place {
  readonly by: Affine;
  readonly style: Style;
  readonly layer: string;
  /** References followed so far. */
  readonly used: readonly string[];
}

/** An SVG as a drawing, y turned up, the page from (0, 0). Throws `Problem`. */
export function readSvg(bytes: Uint8Array, work: Work): Drawing {
  const root = readTree(bytes, work);
  const box = (root.attributes.viewBox ?? '')
    .trim()
    .split(/[\s,]+/)
    .map(Number);
  const boxed = box.length === 4 && box.every(Number.isFinite) && box[2] > 0 && box[3] > 0;
  const width = lengthOf(root.attributes.width);
  const height = lengthOf(root.attributes.height);
  // Without a box a user unit is a pixel, whatever unit the size of the page is told in.
  const [x, y, w, h] = boxed ? box : [0, 0, width?.pixels ?? 0, height?.pixels ?? 0];
  const said = width ?? height;
  let unit: number | null = null;
  if (width?.metres || height?.metres) {
    // The page is fitted to the box by the smaller of the two scales, as the standard has it.
    const scales = [
      ...(width?.metres ? [width.metres / (boxed ? w : width.pixels)] : []),
      ...(height?.metres ? [height.metres / (boxed ? h : height.pixels)] : []),
    ];
    unit = Math.min(...scales);
  }
  const walk = new Walk(new Gathering(work), root, Math.hypot(w, h) * 1e-6);
  const by = compose([1, 0, 0, -1, 0, h], shift(-x, -y));
  walk.children(root, { by, style: styleOf(root, INITIAL, walk.sheet), layer: 'drawing', used: [] });
  return walk.to.done({
    format: 'SVG',
    unit: unit !== null && unit > 0 && Number.isFinite(unit) ? unit : null,
    unitSays: said?.metres
      ? `The page is ${root.attributes.width ?? '?'} by ${root.attributes.height ?? '?'}${boxed ? '' : '; it has no viewBox, so that a unit is a pixel: 1/96 in'}.`
      : 'The page has no size in a unit of length.',
    page: w > 0 && h > 0 ? { width: w, height: h } : null,
  });
}

class Walk {
  readonly to: Gathering;
  readonly sheet: Sheet;
  readonly #byId = new Map<string, Element>();
  readonly #tolerance: number;
  readonly #named = new Set<string>();
  #done = 0;
  readonly #total: number;

  constructor(to: Gathering, root: Element, tolerance: number) {
    this.to = to;
    this.#total = to.work.entities;
    this.#tolerance = tolerance;
    const sheet = new Map<string, string>();
    const stack = [root];
    while (stack.length > 0) {
      const element = stack.pop()!;
      const { id } = element.attributes;
      if (id && !this.#byId.has(id)) this.#byId.set(id, element);
      if (element.name === 'style' && !readSheet(element.text, sheet)) {
        this.to.note('style sheet rules beyond plain selectors', `line ${element.line}`);
      }
      stack.push(...element.children.toReversed());
    }
    this.sheet = sheet;
  }

  children(element: Element, place: Place): void {
    for (const child of element.children) this.#element(child, place);
  }

  #element(element: Element, around: Place): void {
    const where = `line ${element.line}`;
    this.#done += 1;
    this.to.work.at(0.6 + (0.4 * this.#done) / Math.max(this.#total, this.#done));
    if (around.used.length > 0) this.to.work.entity(where);
    const { name, attributes } = element;
    if (SILENT.has(name)) return;
    const style = styleOf(element, around.style, this.sheet);
    if (style.display === 'none') {
      this.to.note('elements that are not displayed', where);
      return;
    }
    const own = attributes.transform === undefined ? SAME : readTransform(attributes.transform);
    if (!own) {
      this.to.note('transforms that cannot be read', where);
      return;
    }
    for (const effect of ['clip-path', 'mask', 'filter']) {
      if (attributes[effect] && attributes[effect] !== 'none')
        this.to.note(`${effect} (drawn without it)`, where);
    }
    const place: Place = { ...around, style, by: own === SAME ? around.by : compose(around.by, own) };
    if (name === 'use') this.#use(element, place, where);
    else if (SHAPES.has(name)) this.#shape(element, place, where);
    else if (HOLDERS.has(name)) {
      const label = attributes['inkscape:label'] ?? attributes.id;
      const inner = name === 'svg' ? this.#viewport(element, place, attributes) : place.by;
      this.children(element, {
        ...place,
        by: inner,
        layer: name === 'g' && label && around.layer === 'drawing' ? label : around.layer,
      });
    } else this.to.note(`<${name.slice(0, LIMITS.name)}>`, where);
  }

  /** An inner page or a symbol, fitted to its box where it has one. */
  #viewport(element: Element, place: Place, size: Element['attributes']): Affine {
    const { line, attributes } = element;
    const at = compose(place.by, shift(pixelsOf(size.x) ?? 0, pixelsOf(size.y) ?? 0));
    if (attributes.viewBox === undefined) return at;
    const by = fitted(attributes, size);
    if (by) return compose(at, by);
    this.to.note('inner pages whose size is not told (not scaled)', `line ${line}`);
    return at;
  }

  #use({ attributes }: Element, place: Place, where: string): void {
    const link = attributes.href ?? attributes['xlink:href'] ?? '';
    const target = link.startsWith('#') ? this.#byId.get(link.slice(1)) : undefined;
    if (!target) {
      this.to.note(link.startsWith('#') ? 'references to nothing' : 'references out of the file', where);
      return;
    }
    const id = link.slice(1);
    if (place.used.includes(id)) {
      throw new Problem(
        'reference',
        `The element "${id.slice(0, LIMITS.name)}" holds a reference to itself.`,
        where,
        'Take the reference out of it.',
      );
    }
    if (place.used.length >= LIMITS.depth) {
      throw new Problem(
        'too-many',
        `References are nested more than ${LIMITS.depth} deep.`,
        where,
        'Unlink the inner ones.',
      );
    }
    const used = [...place.used, id];
    if (target.name === 'symbol') {
      // what the reference says of the size goes before what the symbol says
      const size = { ...target.attributes, ...attributes };
      const style = styleOf(target, place.style, this.sheet);
      this.children(target, { ...place, style, by: this.#viewport(target, place, size), used });
    } else {
      const at = shift(pixelsOf(attributes.x) ?? 0, pixelsOf(attributes.y) ?? 0);
      this.#element(target, { ...place, by: compose(place.by, at), used });
    }
  }

  /** The layer that a shape's own name makes, where it was given one by hand and they are not too many. */
  #layerOf({ attributes: { id } }: Element, around: string): string {
    if (!id || GIVEN_NAMES.test(id) || this.#named.size >= MOST_NAMED) return around;
    this.#named.add(id);
    return id;
  }

  #shape(element: Element, { by, style, layer: around }: Place, where: string): void {
    const layer = this.#layerOf(element, around);
    if (style.visibility !== 'visible') {
      this.to.note('elements that are hidden', where);
      return;
    }
    const parts = this.#outline(element, where);
    if (!parts || parts.length === 0) return;
    const fill = element.name === 'line' ? 'none' : paintKind(style.fill);
    const stroke = paintKind(style.stroke);
    // What is painted white may be the page, or the channels of a dark plate: a layer of its own, to be told.
    if (fill !== 'none' && !(fill === 'white' && stroke === 'paint')) {
      const loops = parts.map(({ vertices }) => moved(Float64Array.from(vertices), by, true));
      this.to.region(
        fill === 'white' ? `${layer} (white)` : layer,
        loops,
        { fill: style.fillRule === 'evenodd' ? 'even-odd' : 'non-zero', nests: false },
        where,
      );
      if (stroke === 'paint') this.to.note('strokes of filled shapes (the fill alone is taken)', where);
      return;
    }
    if (stroke === 'paint') this.#strokes(parts, by, style, layer, where);
    else if (stroke === 'white') this.to.note('strokes painted white', where);
    else this.to.note('shapes with neither fill nor stroke', where);
  }

  #strokes(parts: readonly Subpath[], by: Affine, style: Style, layer: string, where: string): void {
    const width = pixelsOf(style.strokeWidth);
    if (width === null) {
      this.to.note('strokes whose width is in another unit', where);
      return;
    }
    if (style.dashes !== 'none' && /[1-9]/.test(style.dashes))
      this.to.note('dashed strokes (taken without gaps)', where);
    if (style.effect === 'non-scaling-stroke')
      this.to.note('strokes that do not scale (taken as scaled)', where);
    if (style.linejoin === 'round' && parts.some(({ vertices }) => vertices.length > 6))
      this.to.assume('Corners of strokes were taken as mitred also where the file has them round.');
    if (!isSimilar(by)) this.to.note('strokes stretched unevenly (taken with their mean width)', where);
    for (const { vertices, closed } of parts) {
      const own = moved(Float64Array.from(vertices), by, closed);
      const full = width * growth(by);
      if (style.linecap === 'square' && !closed) {
        if (own[2] === 0 && own[own.length - 4] === 0) extend(own, full / 2, full / 2);
        else this.to.note('square ends of round strokes (cut at the last point)', where);
      }
      const round = style.linecap === 'round' && !closed;
      this.to.track(
        layer,
        { vertices: own, closed, widths: evenWidths(own, closed, full), ...(round && { round }) },
        where,
      );
    }
  }

  #outline({ name, attributes }: Element, where: string): Subpath[] | null {
    const numbers: Record<string, number> = {};
    for (const key of ['x', 'y', 'width', 'height', 'rx', 'ry', 'r', 'cx', 'cy', 'x1', 'y1', 'x2', 'y2']) {
      const text = attributes[key];
      if (text === undefined) continue;
      const value = pixelsOf(text);
      if (value === null) {
        this.to.note('shapes with lengths in other units', where);
        return null;
      }
      numbers[key] = value;
    }
    const { x = 0, y = 0, width = 0, height = 0, cx = 0, cy = 0 } = numbers;
    switch (name) {
      case 'path': {
        const data = attributes.d ?? '';
        const found = subpaths(data, this.#tolerance, this.to.work, where);
        if (found) return found.filter(({ vertices }) => vertices.length > 3);
        this.to.note('paths whose data breaks off', where);
        return null;
      }
      case 'rect': {
        if (!(width > 0 && height > 0)) return null;
        const rx = Math.min(numbers.rx ?? numbers.ry ?? 0, width / 2);
        const ry = Math.min(numbers.ry ?? numbers.rx ?? 0, height / 2);
        if (!(rx > 0 && ry > 0)) {
          const corners = [x, y, 0, x + width, y, 0, x + width, y + height, 0, x, y + height, 0];
          return [{ vertices: corners, closed: true }];
        }
        const d =
          `M${x + rx} ${y}h${width - 2 * rx}a${rx} ${ry} 0 0 1 ${rx} ${ry}v${height - 2 * ry}` +
          `a${rx} ${ry} 0 0 1 ${-rx} ${ry}h${2 * rx - width}a${rx} ${ry} 0 0 1 ${-rx} ${-ry}v${2 * ry - height}` +
          `a${rx} ${ry} 0 0 1 ${rx} ${-ry}z`;
        return subpaths(d, this.#tolerance, this.to.work, where);
      }
      case 'circle':
        return numbers.r > 0 ? [{ vertices: [...circle(cx, cy, numbers.r)], closed: true }] : null;
      case 'ellipse': {
        const { rx = 0, ry = 0 } = numbers;
        if (!(rx > 0 && ry > 0)) return null;
        if (rx === ry) return [{ vertices: [...circle(cx, cy, rx)], closed: true }];
        const tolerance = Math.max(this.#tolerance, rx * 1e-6);
        const points = ellipsePoints(cx, cy, rx, 0, ry / rx, 0, 2 * Math.PI, tolerance);
        return [{ vertices: points.slice(0, -3), closed: true }];
      }
      case 'line': {
        const { x1 = 0, y1 = 0, x2 = 0, y2 = 0 } = numbers;
        return [{ vertices: [x1, y1, 0, x2, y2, 0], closed: false }];
      }
      default: {
        const list = (attributes.points ?? '')
          .trim()
          .split(/[\s,]+/)
          .filter((part) => part !== '');
        const vertices: number[] = [];
        for (let k = 0; k + 1 < list.length; k += 2) vertices.push(Number(list[k]), Number(list[k + 1]), 0);
        if (vertices.some(Number.isNaN)) {
          this.to.note('points that are no numbers', where);
          return null;
        }
        return vertices.length > 3 ? [{ vertices, closed: name === 'polygon' }] : null;
      }
    }
  }
}
