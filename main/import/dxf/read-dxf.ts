import { unitSize } from '../../../solver/chip/units.ts';
import { unitInPrint } from '../../../solver/chip/units-format.ts';
import { Problem } from '../../../solver/problem/problem.ts';
import { type Affine, compose, moved, movedTrack, SAME, scaling, shift, turning } from '../affine.ts';
import { chainLines } from '../chain.ts';
import { type Drawing, Gathering } from '../drawing.ts';
import { LIMITS, type Work } from '../work.ts';
import { hatch } from './hatch.ts';
import { type Entity, needed, numberOf, Pairs, readEntity, textOf } from './pairs.ts';
import { type Drawn, drawn, polyline } from './shapes.ts';

/** $INSUNITS, by the values of the format's reference; 13 is micrometres. */
const UNITS: Readonly<Record<number, string>> = {
  1: 'in',
  4: 'mm',
  5: 'cm',
  6: 'm',
  9: 'mil',
  12: 'nm',
  13: 'um',
  14: 'dm',
};

interface Block {
  readonly x: number;
  readonly y: number;
  readonly entities: Entity[];
}

/** Entities with those that belong to them: the vertices of a POLYLINE. */
interface Listed {
  readonly entities: Entity[];
  readonly blocks: Map<string, Block>;
  /** Layers that the file does not show: off, or frozen. */
  readonly unseen: Set<string>;
  insunits: number | null;
}

/** An ASCII DXF file as a drawing. Throws `Problem`. */
export function readDxf(bytes: Uint8Array, work: Work): Drawing {
  if (new TextDecoder('latin1').decode(bytes.subarray(0, 22)).startsWith('AutoCAD Binary DXF')) {
    throw new Problem(
      'format',
      'This is a binary DXF file; the ASCII form is read.',
      'byte 0',
      'Save the drawing as ASCII DXF.',
    );
  }
  const listed = listEntities(new Pairs(decodeText(bytes)), work);
  const gathering = new Gathering(work);
  const placer = new Placer(gathering, listed.blocks);
  placer.place(listed.entities, SAME, '0', []);
  for (const layer of gathering.layers.values()) {
    chainLines(layer, gathering);
    if (listed.unseen.has(layer.name.toUpperCase())) {
      gathering.assume(
        `The layer "${layer.name}" is off or frozen in the file; it was taken like the others.`,
      );
    }
  }
  const name = listed.insunits === null ? undefined : UNITS[listed.insunits];
  return gathering.done({
    format: 'DXF',
    unit: name === undefined ? null : unitSize(name),
    unitSays:
      name !== undefined
        ? `$INSUNITS ${listed.insunits} is ${unitInPrint(name)}.`
        : listed.insunits === null
          ? 'The file has no $INSUNITS.'
          : `$INSUNITS ${listed.insunits} names no unit.`,
    page: null,
  });
}

/** Code pages beyond the Windows ones of one byte, as the encoding standard names them. */
const WIDE_PAGES: Readonly<Record<string, string>> = {
  '932': 'shift_jis',
  '936': 'gbk',
  '949': 'euc-kr',
  '950': 'big5',
};

/** UTF-8 where the bytes are that, else by the code page that the header names. */
function decodeText(bytes: Uint8Array): string {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    const head = new TextDecoder('latin1').decode(bytes.subarray(0, 20_000));
    const page = /\$DWGCODEPAGE\s+3\s+ANSI_(\d{3,4})\s/i.exec(head)?.[1] ?? '';
    const known = WIDE_PAGES[page] ?? (/^125[0-8]$/.test(page) ? `windows-${page}` : 'latin1');
    return new TextDecoder(known).decode(bytes);
  }
}

/** A name with the escapes that stand for signs beyond the file's code page. */
const named = (text: string): string =>
  text.replaceAll(/\\U\+([0-9a-f]{4})/gi, (_, code: string) =>
    String.fromCharCode(Number.parseInt(code, 16)),
  );

function listEntities(pairs: Pairs, work: Work): Listed {
  const listed: Listed = { entities: [], blocks: new Map(), unseen: new Set(), insunits: null };
  let sections = 0;
  let more = pairs.next();
  while (more) {
    const mark = pairs.value.trim();
    if (pairs.code !== 0) {
      more = pairs.next();
      continue;
    }
    if (mark === 'EOF') break;
    if (mark !== 'SECTION') {
      more = pairs.next();
      continue;
    }
    if (!pairs.next()) break;
    if ((pairs.code as number) !== 2) continue;
    sections += 1;
    const name = pairs.value.trim();
    if (name === 'HEADER') more = readHeader(pairs, listed);
    else if (name === 'TABLES') more = readTables(pairs, listed, work);
    else if (name === 'BLOCKS') more = readBlocks(pairs, listed, work);
    else if (name === 'ENTITIES') {
      more = pairs.next();
      while (more && !(pairs.code === 0 && pairs.value.trim() === 'ENDSEC')) {
        more = takeEntity(pairs, listed.entities, work);
      }
    } else more = pairs.next();
  }
  if (sections === 0) {
    throw new Problem(
      'format',
      'This is not a DXF file: it has no sections.',
      'line 1',
      'Check that it is the right file.',
    );
  }
  return listed;
}

/** Reads one entity to a list; pairs that are none are stepped over. */
function takeEntity(pairs: Pairs, into: Entity[], work: Work): boolean {
  if (pairs.code !== 0) return pairs.next();
  const { entity, more } = readEntity(pairs);
  work.entity(`line ${entity.line}`);
  work.group(entity.count, `line ${entity.line}`);
  work.at(pairs.share * 0.6);
  into.push(entity);
  return more;
}

function readHeader(pairs: Pairs, listed: Listed): boolean {
  let variable = '';
  while (pairs.next()) {
    if (pairs.code === 0) return true;
    if (pairs.code === 9) variable = pairs.value.trim();
    else if (variable === '$INSUNITS' && pairs.code === 70) {
      const value = Number(pairs.value);
      listed.insunits = Number.isInteger(value) ? value : null;
    }
  }
  return false;
}

/** Which layers the file does not show; nothing else of the tables bears on a shape. */
function readTables(pairs: Pairs, listed: Listed, work: Work): boolean {
  let more = pairs.next();
  while (more) {
    const mark = pairs.code === 0 ? pairs.value.trim() : '';
    if (mark === 'ENDSEC') return true;
    if (mark !== 'LAYER') {
      more = pairs.next();
      continue;
    }
    const read = readEntity(pairs);
    more = read.more;
    const { entity } = read;
    work.group(entity.count, `line ${entity.line}`);
    // a colour below zero is one that is switched off, the flag 1 is frozen
    const unseen = numberOf(entity, 62, 7) < 0 || (numberOf(entity, 70, 0) & 1) === 1;
    if (unseen) listed.unseen.add(named(textOf(entity, 2) ?? '').toUpperCase());
  }
  return false;
}

function readBlocks(pairs: Pairs, listed: Listed, work: Work): boolean {
  let open: Block | null = null;
  let more = pairs.next();
  while (more) {
    const mark = pairs.code === 0 ? pairs.value.trim() : '';
    if (mark === 'ENDSEC') return true;
    if (mark === 'BLOCK') {
      const head = readEntity(pairs);
      more = head.more;
      open = { x: numberOf(head.entity, 10, 0), y: numberOf(head.entity, 20, 0), entities: [] };
      listed.blocks.set((textOf(head.entity, 2) ?? '').toUpperCase(), open);
    } else if (mark === 'ENDBLK') {
      open = null;
      more = readEntity(pairs).more;
    } else if (open) more = takeEntity(pairs, open.entities, work);
    else more = pairs.next();
  }
  return false;
}

/** What belongs to the entity at `i`: the vertices of a POLYLINE, the attributes of an INSERT, and their end. */
function partsOf(entities: readonly Entity[], i: number): Entity[] {
  const { type } = entities[i];
  const part = type === 'POLYLINE' ? 'VERTEX' : type === 'INSERT' ? 'ATTRIB' : '';
  const parts: Entity[] = [];
  if (part === '') return parts;
  let k = i + 1;
  for (; k < entities.length && entities[k].type === part; k += 1) parts.push(entities[k]);
  if (k < entities.length && entities[k].type === 'SEQEND') parts.push(entities[k]);
  return parts;
}

/** Puts entities where they belong, references with all they hold. */
class Placer {
  readonly #to: Gathering;
  readonly #blocks: ReadonlyMap<string, Block>;
  readonly #shapes = new Map<Entity, Drawn | null>();

  constructor(to: Gathering, blocks: ReadonlyMap<string, Block>) {
    this.#to = to;
    this.#blocks = blocks;
  }

  place(entities: readonly Entity[], by: Affine, inherited: string, stack: readonly string[]): void {
    for (let i = 0; i < entities.length; i += 1) {
      const entity = entities[i];
      const where = `line ${entity.line}`;
      if (stack.length > 0) this.#to.work.entity(where);
      else this.#to.work.at(0.6 + (0.4 * i) / entities.length);
      const parts = partsOf(entities, i);
      i += parts.length;
      if (parts.at(-1)?.type === 'SEQEND') parts.pop();
      if (entity.type === 'INSERT') for (const part of parts) this.#to.note(part.type, `line ${part.line}`);
      if (textOf(entity, 67) === '1') {
        this.#to.note(`${entity.type} on paper space`, where);
        continue;
      }
      if (textOf(entity, 60) === '1') {
        this.#to.note(`${entity.type} that the file does not show`, where);
        continue;
      }
      // What lies on layer 0 of a block takes the layer that the block is placed on.
      const own = named(textOf(entity, 8) ?? '0');
      const layer = own === '0' && stack.length > 0 ? inherited : own;
      const ocs = this.#ocs(entity, where);
      if (!ocs) continue;
      const at = ocs === SAME ? by : compose(by, ocs);
      if (entity.type === 'INSERT') this.#insert(entity, at, layer, stack);
      else if (entity.type === 'POLYLINE') this.#draw(this.#polyline(entity, parts), at, layer, where);
      else this.#draw(this.#shape(entity), at, layer, where, entity.type);
    }
  }

  /** The entity's own axes in the plan, null where they do not lie in it. */
  #ocs(entity: Entity, where: string): Affine | null {
    if (entity.find(230) < 0 || entity.type === 'LINE') return SAME;
    const [x, y, z] = [numberOf(entity, 210, 0), numberOf(entity, 220, 0), numberOf(entity, 230, 1)];
    if (Math.abs(x) < 1e-9 && Math.abs(y) < 1e-9) {
      // the points of these are those of the plan whatever their axis
      const plain = entity.type === 'ELLIPSE' || entity.type === 'SPLINE';
      return z < 0 && !plain ? scaling(-1, 1) : SAME;
    }
    this.#to.note(`${entity.type} tilted out of the plan`, where);
    return null;
  }

  #shape(entity: Entity): Drawn | null {
    let shape = this.#shapes.get(entity);
    if (shape === undefined) {
      shape = entity.type === 'HATCH' ? hatch(entity) : drawn(entity);
      this.#shapes.set(entity, shape);
    }
    return shape;
  }

  #draw(shape: Drawn | null, by: Affine, layer: string, where: string, type = ''): void {
    if (shape === null) this.#to.note(type || 'an entity without a type', where);
    else if ('not' in shape) this.#to.note(shape.not, where);
    else if ('track' in shape) {
      if (shape.assumed) this.#to.assume(shape.assumed);
      this.#to.track(layer, movedTrack(shape.track, by), where);
    } else {
      const loops = shape.loops.map((loop) => moved(loop, by, true));
      this.#to.region(layer, loops, shape.how, where);
    }
  }

  #polyline(head: Entity, vertices: readonly Entity[]): Drawn {
    const flags = numberOf(head, 70, 0);
    if (flags & (16 | 64)) return { not: 'meshes' };
    const wide = [numberOf(head, 40, 0), numberOf(head, 41, 0)];
    const points: number[] = [];
    const widths: number[] = [];
    for (const vertex of vertices) {
      // Points that only steer a spline lie off the curve.
      if (numberOf(vertex, 70, 0) & 16) continue;
      points.push(needed(vertex, 10), needed(vertex, 20), numberOf(vertex, 42, 0));
      widths.push(numberOf(vertex, 40, wide[0]), numberOf(vertex, 41, wide[1]));
    }
    return polyline(points, widths, (flags & 1) === 1);
  }

  #insert(entity: Entity, by: Affine, layer: string, stack: readonly string[]): void {
    const where = `line ${entity.line}`;
    const name = (textOf(entity, 2) ?? '').toUpperCase();
    const block = this.#blocks.get(name);
    if (!block) {
      this.#to.note(
        `references to the block "${name.slice(0, LIMITS.name)}", which the file does not hold`,
        where,
      );
      return;
    }
    if (stack.includes(name)) {
      throw new Problem(
        'reference',
        `The block "${name.slice(0, LIMITS.name)}" holds a reference to itself.`,
        where,
        'Take the reference out of the block, or explode it.',
      );
    }
    if (stack.length >= LIMITS.depth) {
      throw new Problem(
        'too-many',
        `Blocks are nested more than ${LIMITS.depth} deep.`,
        where,
        'Explode the inner blocks.',
      );
    }
    const columns = Math.max(1, numberOf(entity, 70, 1));
    const rows = Math.max(1, numberOf(entity, 71, 1));
    const [dx, dy] = [numberOf(entity, 44, 0), numberOf(entity, 45, 0)];
    const placed = compose(
      shift(needed(entity, 10), needed(entity, 20)),
      turning((numberOf(entity, 50, 0) * Math.PI) / 180),
    );
    const inner = compose(
      scaling(numberOf(entity, 41, 1), numberOf(entity, 42, 1)),
      shift(-block.x, -block.y),
    );
    if (block.entities.length === 0) return;
    for (let row = 0; row < rows; row += 1) {
      for (let column = 0; column < columns; column += 1) {
        const at = compose(compose(placed, shift(column * dx, row * dy)), inner);
        this.place(block.entities, compose(by, at), layer, [...stack, name]);
      }
    }
  }
}
