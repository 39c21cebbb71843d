import { Clipper, FillRule, type Paths64 } from 'clipper2-ts';
import type { Channel, Chip, Layer, Point, Port } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import type { Graph } from '../../solver/chip/graph.ts';
import { planPolygons } from '../../solver/chip/plan.ts';
import { readGraph } from '../../solver/chip/read-graph.ts';
import { outlineFault } from '../../solver/chip/schema-outline.ts';
import { metres, NM_PER_M } from '../../solver/chip/units.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type {
  BringInPicture,
  BringInReport,
  ChipLayerReport,
  Deviation,
  Note,
  Role,
  BringInSettings as Settings,
} from '../contract/bring-in.ts';
import { compare } from './compare.ts';
import type { Drawing, DrawnLayer } from './drawing.ts';
import { placed } from './frame.ts';
import { endPorts, holePorts, roundsOf } from './ports.ts';
import { readDrawing } from './read-drawing.ts';
import { type Found, recognise, trackCourses } from './recognise/layer.ts';
import { type Frame, layerAreas, pathsOf, unitedAreas } from './recognise/plane.ts';
import { roomsIn, withoutHoles } from './recognise/rooms.ts';
import { type Drawn, discPath, freeEnds, type RoundEnd, roundEnds } from './recognise/round-ends.ts';
import { suggestedRole } from './settings.ts';
import { LIMITS, type Work } from './work.ts';

export interface BroughtIn {
  readonly chip: Chip;
  readonly report: BringInReport;
  readonly picture: BringInPicture;
}

/** Vertices of both pictures together beyond which there is none. */
const MOST_PICTURED = 150_000;

/** Furthest that chords of a curve lie off it where areas are compared, nm. */
const CHORD_ERROR = 20;
/** Where walls lie no further off than this, m, channels are all there is. */
const EDGES = metres(100);

interface ChipLayer {
  readonly layer: Layer;
  readonly drawn: DrawnLayer[];
}

/** A drawing file as a chip, and what became of it. Throws `Problem`. */
export function bringIn(bytes: Uint8Array, file: string, settings: Settings, work: Work): BroughtIn {
  return fromDrawing(readDrawing(bytes, work), file, settings, work);
}

export function fromDrawing(drawing: Drawing, file: string, settings: Settings, work: Work): BroughtIn {
  const unit = settings.unit ?? drawing.unit;
  if (unit === null) {
    throw new Problem(
      'missing',
      `The file does not say what its numbers are in. ${drawing.unitSays}`,
      '',
      'Give the unit of the drawing, such as um or mm.',
    );
  }
  const roles = rolesOf(drawing, settings);
  const { frame, width, height, says } = placed(drawing, roles, unit * NM_PER_M);
  const notes = new Notes(drawing.notUnderstood);
  const assumed = [...drawing.assumed, says];
  const chipLayers = chipLayersOf(drawing, roles);
  const empty: Chip = {
    name: file.replace(/\.[^.]*$/, '').slice(0, 200) || 'drawing',
    note: '',
    lengthUnit: 'um',
    outline: { width, height },
    layers: chipLayers.map(({ layer }) => layer),
    channels: [],
    chambers: [],
    vias: [],
    ports: [],
    fluid: { name: 'water', temperature: 298.15 },
    targets: [],
    limits: [],
  };
  const made = chipLayers.map((chipLayer, i) =>
    makeLayer(empty, chipLayer, {
      frame,
      settings,
      notes,
      assumed,
      work,
      told: (share) => work.at((i + share) / chipLayers.length),
    }),
  );
  work.stage('comparing');
  const chip = withIds(empty, made);
  const holes = drawing.layers.filter(({ name }) => roles.get(name)?.kind === 'holes');
  const grounds = made.map(({ ground }) => ground);
  const rounds = holes.flatMap((layer) => roundsOf(layer, frame, notes));
  let ports: Port[] = holePorts(rounds, chip.layers, grounds, notes);
  let pads: Set<string> = new Set();
  if (holes.length === 0 && settings.portsAtEnds) ({ ports, pads } = endPorts(chip));
  const whole: Chip = { ...chip, ports, chambers: chip.chambers.filter(({ id }) => !pads.has(id)) };
  assumed.push(
    'A drawing has no drives: every port is open to the air (pressure 0) until it is given one.',
    'The fluid is water at 25 °C until another is chosen; walls are upright and corners sharp.',
  );
  // Read back as any description is: what comes out is one by its own rules.
  const sound = readDescription(writeDescription(whole), whole.name);
  let known: Graph | null = null;
  const graph = (): Graph => {
    known ??= readGraph(sound);
    return known;
  };
  const picture: BringInPicture = [];
  let pictured = 0;
  const reports: ChipLayerReport[] = made.map((layer, i) => {
    const id = chip.layers[i].id;
    const options = { chordError: CHORD_ERROR, fillets: false, holes: pads.size > 0 };
    const covered = layer.covered ?? planPolygons(sound, graph(), id, options).flatMap(pathsOfPolygon);
    pictured += [...layer.ground, ...covered].reduce((sum, path) => sum + path.length, 0);
    if (pictured <= MOST_PICTURED) {
      picture.push({ layer: id, drawn: pathData(layer.ground), made: pathData(covered) });
    }
    return {
      id,
      channelsFromPaths: layer.fromPaths,
      channelsFromRegions: layer.found.length - layer.fromPaths,
      tapered: layer.found.filter(
        ({
          course: {
            width: [a, b],
          },
        }) => a !== b,
      ).length,
      chambers: sound.chambers.filter((chamber) => chamber.layer === id).length,
      deviation:
        layer.ground.length > 0
          ? (layer.fit ?? compare(layer.ground, covered, Infinity, (share) => work.at(share)).deviation)
          : null,
    };
  });
  return {
    chip: sound,
    picture: pictured > MOST_PICTURED ? [] : picture,
    report: {
      format: 'channelwright-bring-in',
      version: 1,
      file,
      drawing: drawing.format,
      unit: { metres: unit, says: settings.unit === null ? drawing.unitSays : 'The unit was given.' },
      entities: drawing.entities,
      layers: drawing.layers.map(({ name, regions, tracks, lines }) => {
        const role = roles.get(name)!;
        const on = role.kind === 'cavity' ? role.layer : null;
        return {
          name,
          role: role.kind,
          on,
          regions: regions.length,
          paths: tracks.length,
          lines: lines.length,
        };
      }),
      chipLayers: reports,
      ports: sound.ports.length,
      assumed,
      notUnderstood: notes.all,
    },
  };
}

/** Gathers what was not understood after reading. */
export class Notes {
  readonly #notes: Map<string, { count: number; where: string }>;

  constructor(from: readonly Note[]) {
    this.#notes = new Map(from.map(({ what, count, where }) => [what, { count, where }]));
  }

  add(what: string, where: string, count = 1): void {
    const known = this.#notes.get(what);
    if (known) known.count += count;
    else if (this.#notes.size < 2 * LIMITS.notes) this.#notes.set(what, { count, where });
  }

  get all(): Note[] {
    return [...this.#notes].map(([what, { count, where }]) => ({ what, count, where }));
  }
}

function rolesOf(drawing: Drawing, { roles, depth }: Settings): Map<string, Role> {
  const names = new Set(drawing.layers.map(({ name }) => name));
  for (const name of Object.keys(roles)) {
    if (names.has(name)) continue;
    throw new Problem(
      'reference',
      `The drawing has no layer "${name}".`,
      '',
      `Its layers are ${
        [...names]
          .slice(0, 20)
          .map((known) => `"${known}"`)
          .join(', ') || 'none'
      }.`,
    );
  }
  return new Map(
    [...names].map((name) => [name, Object.hasOwn(roles, name) ? roles[name] : suggestedRole(name, depth)]),
  );
}

function chipLayersOf(drawing: Drawing, roles: ReadonlyMap<string, Role>): ChipLayer[] {
  const byId = new Map<string, ChipLayer>();
  for (const drawn of drawing.layers) {
    const role = roles.get(drawn.name);
    if (role?.kind !== 'cavity') continue;
    const id = role.layer.slice(0, 64);
    const known = byId.get(id);
    if (known && known.layer.depth !== role.depth) {
      throw new Problem(
        'quantity',
        `Layer "${id}" of the chip is given two depths.`,
        `layer "${drawn.name}" of the drawing`,
        'Give one depth, or another layer of the chip.',
      );
    }
    if (known) known.drawn.push(drawn);
    else
      byId.set(id, {
        layer: { id, depth: role.depth, profile: { kind: 'rectangle' }, fillet: 0 },
        drawn: [drawn],
      });
  }
  return [...byId.values()];
}

interface Made {
  readonly found: readonly Found[];
  readonly fromPaths: number;
  readonly chambers: Paths64;
  /** What is fluid by the drawing. */
  readonly ground: Paths64;
  readonly layer: string;
  /** What the channels cover, where nothing else does. */
  readonly covered: Paths64 | null;
  /** How far they lie off, where that is known. */
  readonly fit: Deviation | null;
}

interface Making {
  readonly frame: Frame;
  readonly settings: Settings;
  readonly notes: Notes;
  readonly assumed: string[];
  readonly work: Work;
  readonly told: (share: number) => void;
}

function makeLayer(empty: Chip, { layer, drawn }: ChipLayer, making: Making): Made {
  const { frame, settings, notes, assumed, work, told } = making;
  const found: Found[] = [];
  const paths: Drawn[] = [];
  const ends: RoundEnd[] = [];
  let count = 0;
  for (const { name, tracks, lines } of drawn) {
    const widened = settings.lineWidth === null ? [] : lines;
    if (settings.lineWidth === null && lines.length > 0) {
      notes.add('open lines without a width (give one to make them channels)', `layer ${name}`, lines.length);
    }
    for (const track of tracks) {
      for (const course of trackCourses(track, frame)) {
        found.push({ course, into: [0, 0], area: -1 });
        paths.push({ course, track: count });
      }
      if (track.round && !track.closed) ends.push(...roundEnds(track, frame, count));
      count += 1;
    }
    for (const line of widened) {
      const width = settings.lineWidth! / frame.scale;
      const widths = new Float64Array(2 * (line.vertices.length / 3)).fill(width);
      for (const course of trackCourses({ ...line, widths }, frame))
        found.push({ course, into: [0, 0], area: -1 });
    }
  }
  const fromPaths = found.length;
  const strips = chipPaths(empty, layer.id, found);
  work.stage('uniting');
  const layers = drawn.map((one) => layerAreas(one, frame, work));
  const posts = layers.reduce((sum, one) => sum + one.posts, 0);
  if (posts > 0) {
    assumed.push(
      `${posts} outline${posts === 1 ? '' : 's'} inside others on layer "${layer.id}" ${posts === 1 ? 'is a post' : 'are posts'} (wall) in them.`,
    );
  }
  let areas = layers.flatMap((one) => one.areas);
  if (layers.length > 1) areas = unitedAreas(areas);
  const regions = pathsOf(areas);
  work.stage('recognising');
  const ofRegions = recognise(areas, work, (share) => told(0.7 * share));
  const discs = freeEnds(ends, paths, regions).map((end) => discPath(end, CHORD_ERROR));
  const bodies = discs.length > 0 ? Clipper.union([...strips, ...discs], FillRule.NonZero) : strips;
  const ground = bodies.length > 0 ? Clipper.union(regions, bodies, FillRule.NonZero) : regions;
  if (regions.length === 0) {
    const whole = discs.length > 0 ? null : bodies;
    return { found, fromPaths, chambers: discs, ground, layer: layer.id, covered: whole, fit: null };
  }
  const covered = chipPaths(empty, layer.id, ofRegions);
  const { deviation: fit, off } = compare(regions, covered, EDGES, (share) => told(0.7 + 0.2 * share));
  const rooms = roomsIn({ areas, regions, covered, off, found: ofRegions, tracks: found }, (some) =>
    chipPaths(empty, layer.id, some),
  );
  const chambers: Paths64 = [...discs];
  rooms.left.forEach((area, i) => {
    told(0.9 + (0.1 * i) / rooms.left.length);
    const outlines = withoutHoles(area);
    if (!outlines) notes.add('areas with too many holes to draw as chambers', `layer ${layer.id}`);
    for (const outline of outlines ?? []) {
      if (outlineFault(outline.map(({ x, y }): Point => [x, y])) === null) chambers.push(outline);
      else
        notes.add(
          'areas whose outline touches itself',
          `layer ${layer.id}, near x ${outline[0].x} nm, y ${outline[0].y} nm`,
        );
    }
  });
  const all = [...found, ...rooms.kept];
  // Where nothing is added to the channels, what they cover is known already.
  const exact =
    chambers.length === 0 &&
    found.length === 0 &&
    rooms.kept.length === ofRegions.length &&
    all.every(({ into }) => into[0] === 0 && into[1] === 0);
  return {
    found: all,
    fromPaths,
    chambers,
    ground,
    layer: layer.id,
    covered: exact ? covered : null,
    fit: exact ? fit : null,
  };
}

/** The chip with named channels led into the chambers, and named chambers. */
function withIds(empty: Chip, made: readonly Made[]): Chip {
  const channels: Channel[] = [];
  const chambers: Chip['chambers'][number][] = [];
  for (const { found, layer, chambers: outlines } of made) {
    for (const one of found) channels.push(channelOf(one, `channel ${channels.length + 1}`, layer, true));
    for (const outline of outlines) {
      const points = outline.map(({ x, y }): Point => [x, y]);
      chambers.push({ id: `chamber ${chambers.length + 1}`, layer, outline: points });
    }
  }
  return { ...empty, channels, chambers };
}

function channelOf({ course, into }: Found, id: string, layer: string, led: boolean): Channel {
  const path = [...course.path];
  if (led && into[0] > 0) path[0] = ledOn(path[1], path[0], into[0]);
  const last = path.length - 1;
  if (led && into[1] > 0) path[last] = ledOn(path[last - 1], path[last], into[1]);
  return { id, layer, path, width: course.width, bendRadius: course.bendRadius };
}

function ledOn([ax, ay]: Point, [bx, by]: Point, far: number): Point {
  const length = Math.hypot(bx - ax, by - ay);
  return [Math.round(bx + ((bx - ax) / length) * far), Math.round(by + ((by - ay) / length) * far)];
}

/** What channels cover on their layer, as they are drawn before they are led into chambers. */
function chipPaths(empty: Chip, layer: string, found: readonly Found[]): Paths64 {
  if (found.length === 0) return [];
  const channels = found.map((one, i) => channelOf(one, `c${i}`, layer, false));
  const chip: Chip = { ...empty, channels };
  const options = { chordError: CHORD_ERROR, fillets: false, holes: false };
  return planPolygons(chip, readGraph(chip), layer, options).flatMap(pathsOfPolygon);
}

function pathsOfPolygon({
  outer,
  holes,
}: {
  outer: readonly Point[];
  holes: readonly (readonly Point[])[];
}): Paths64 {
  return [outer, ...holes].map((loop) => loop.map(([x, y]) => ({ x, y })));
}

function pathData(paths: Paths64): string {
  return paths.map((path) => `M${path.map(({ x, y }) => `${x} ${y}`).join('L')}Z`).join('');
}
