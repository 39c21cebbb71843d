import {
  drawAlong,
  findPart,
  findParts,
  movedBy,
  moveJoined,
  nameParts,
  placesOf,
  refOfPart,
} from '../edits/parts.ts';
import { boxBetween, tidy } from '../geometry/path.ts';
import { add, direction, distance, dot, same, sub, times, whole, type Xy } from '../geometry/vector.ts';
import type { Hit } from '../sheet/spatial.ts';
import { type Ref, refTo } from '../state/ref.ts';
import { counted, lengthFigure } from '../words/figure.ts';
import { snap } from './snap.ts';
import type { Alteration, Outcome, PartValue, PlaceEvent, Preview, Scope, Tool, ToolEvent } from './tool.ts';

/**
 * Choosing and moving. A press on a corner of what is selected moves the corner and what is joined there;
 * on a side of the one selected channel or chamber, that side; on anything else, all that is selected. A
 * press on nothing draws a box.
 */
export type SelectState =
  | { readonly kind: 'idle' }
  /** The button is down and has not moved far enough to be a drag. */
  | { readonly kind: 'pressed'; readonly from: Xy; readonly hit: Hit | null; readonly extend: boolean }
  | { readonly kind: 'box'; readonly from: Xy; readonly to: Xy; readonly extend: boolean }
  | {
      readonly kind: 'moving';
      readonly from: Xy;
      /** The place that snaps: a corner or a centre; of a side, where it was taken. */
      readonly grip: Xy;
      readonly hit: Hit;
      readonly refs: readonly Ref[];
      readonly what: 'corner' | 'side' | 'parts';
      readonly by: readonly [number, number];
    };

const IDLE: SelectState = { kind: 'idle' };

/** What a drag from a hit takes along. */
function grab(hit: Hit, refs: readonly Ref[], from: Xy, scope: Scope): SelectState {
  const ref = refTo(hit.kind, hit.id);
  const part = findPart(scope.chip, ref)!;
  const alone = refs.length === 1 && refs[0] === ref && scope.selection.includes(ref);
  if (hit.vertex >= 0 && alone)
    return { kind: 'moving', from, grip: placesOf(part)[hit.vertex]!, hit, refs, what: 'corner', by: [0, 0] };
  if (hit.segment >= 0 && alone)
    return { kind: 'moving', from, grip: hit.at, hit, refs, what: 'side', by: [0, 0] };
  // the nearest corner of what was taken: that it comes to lie on the grid is what is wanted
  const grip = placesOf(part).reduce((best, p) => (distance(p, from) < distance(best, from) ? p : best));
  return { kind: 'moving', from, grip, hit, refs, what: 'parts', by: [0, 0] };
}

/** The parts as a drag leaves them. */
export function dragged(state: Extract<SelectState, { kind: 'moving' }>, scope: Scope): PartValue[] {
  const { chip } = scope;
  const { by, hit, what, refs } = state;
  if (by[0] === 0 && by[1] === 0) return [];
  if (what === 'parts') return moveJoined(chip, findParts(chip, refs), by);
  const part = findPart(chip, refTo(hit.kind, hit.id));
  if (!part) return [];
  const places = placesOf(part);
  const indices = what === 'corner' ? [hit.vertex] : [hit.segment, (hit.segment + 1) % places.length];
  const taken = new Set(indices.map((i) => `${places[i]![0]} ${places[i]![1]}`));
  const moved = movedBy(part, (p) => (taken.has(`${p[0]} ${p[1]}`) ? add(p, by) : p));
  return [moved, ...drawAlong(chip, new Set([refOfPart(part)]), taken, by)];
}

function step(state: Extract<SelectState, { kind: 'moving' }>, event: PlaceEvent, scope: Scope): SelectState {
  const raw = add(state.grip, sub(event.at, state.from));
  const { hit } = state;
  if (state.what === 'side') {
    // a side goes sideways only, so that its neighbours keep their directions
    const places = placesOf(findPart(scope.chip, refTo(hit.kind, hit.id))!);
    const u = direction(places[hit.segment]!, places[(hit.segment + 1) % places.length]!);
    const normal: Xy = [-u[1], u[0]];
    const along = dot(sub(raw, state.grip), normal);
    const level = u[0] === 0 || u[1] === 0;
    const caught = level ? catchAt(add(state.grip, times(normal, along)), state, event, scope) : null;
    const even = caught
      ? dot(sub(caught, state.grip), normal)
      : event.free || scope.grid === 0
        ? along
        : Math.round(along / scope.grid) * scope.grid;
    return { ...state, by: whole(times(normal, even)) };
  }
  const from = state.what === 'corner' ? neighbours(state, scope) : state.grip;
  return { ...state, by: whole(sub(catchAt(raw, state, event, scope, from), state.grip)) };
}

/** The place that the hand means while something is moved, which does not catch itself. */
const catchAt = (
  raw: Xy,
  state: Extract<SelectState, { kind: 'moving' }>,
  event: PlaceEvent,
  scope: Scope,
  from?: Xy | readonly Xy[],
): Xy =>
  snap(raw, scope.spatial, {
    reach: scope.reach,
    grid: scope.grid,
    ...(from && { from }),
    without: new Set([...state.refs, ...joinedTo(state, scope)]),
    ...(event.free && { free: true }),
  }).at;

/** The corners beside the one at hand, which it can come to lie straight or at 45° with. */
function neighbours({ hit }: Extract<SelectState, { kind: 'moving' }>, scope: Scope): Xy[] {
  const places = placesOf(findPart(scope.chip, refTo(hit.kind, hit.id))!);
  const round = hit.kind !== 'channel';
  return [hit.vertex - 1, hit.vertex + 1].flatMap((i) => {
    const p = places[round ? (i + places.length) % places.length : i];
    return p ? [p] : [];
  });
}

/** Parts that share the place at hand: they come along and must not catch it. */
function joinedTo(state: Extract<SelectState, { kind: 'moving' }>, scope: Scope): Ref[] {
  const out: Ref[] = [];
  for (const channel of scope.chip.channels)
    if (channel.path.some((p) => same(p, state.grip))) out.push(`channel:${channel.id}`);
  for (const port of scope.chip.ports) if (same(port.at, state.grip)) out.push(`port:${port.id}`);
  for (const via of scope.chip.vias) if (same(via.at, state.grip)) out.push(`via:${via.id}`);
  return out;
}

/** Whether parts may stand as they are: a path keeps its length, an outline its area. */
const sound = (part: PartValue): boolean =>
  part.kind !== 'channel' || (tidy(part.value.path).length > 1 && !doublesBack(part.value.path));

function doublesBack(path: readonly Xy[]): boolean {
  for (let i = 1; i + 1 < path.length; i += 1) {
    const u = direction(path[i - 1]!, path[i]!);
    const v = direction(path[i]!, path[i + 1]!);
    if (dot(u, v) < -0.999999) return true;
  }
  return path.some((p, i) => i > 0 && same(p, path[i - 1]!));
}

function settle(state: Extract<SelectState, { kind: 'moving' }>, scope: Scope): Outcome<SelectState> {
  const parts = dragged(state, scope);
  if (parts.length === 0) return { state: IDLE };
  const put = parts.map((part) =>
    part.kind === 'channel'
      ? ({
          kind: 'channel',
          value: { ...part.value, path: tidy(part.value.path) as typeof part.value.path },
        } as const)
      : part,
  );
  if (!put.every(sound))
    return { state: IDLE, says: 'There it would fold onto itself; it stays where it was.' };
  const what =
    state.what === 'corner'
      ? `move a corner of ${state.hit.id}`
      : state.what === 'side'
        ? `move a side of ${state.hit.id}`
        : `move ${nameParts(findParts(scope.chip, state.refs), counted)}`;
  return { state: IDLE, alter: { label: what, put } };
}

function nudge(event: Extract<ToolEvent, { kind: 'arrow' }>, scope: Scope): Alteration | null {
  const parts = findParts(scope.chip, scope.selection);
  if (parts.length === 0) return null;
  const by = whole(times(event.direction, scope.grid * (event.far ? 10 : 1)));
  return { label: `move ${nameParts(parts, counted)}`, put: moveJoined(scope.chip, parts, by) };
}

function toggled(selection: readonly Ref[], ref: Ref): Ref[] {
  return selection.includes(ref) ? selection.filter((other) => other !== ref) : [...selection, ref];
}

function down(event: PlaceEvent, scope: Scope): Outcome<SelectState> {
  const hit = scope.spatial.hit(event.at, scope.reach);
  return { state: { kind: 'pressed', from: event.at, hit, extend: event.extend === true } };
}

function move(state: SelectState, event: PlaceEvent, scope: Scope): Outcome<SelectState> {
  if (state.kind === 'box') return { state: { ...state, to: event.at } };
  if (state.kind === 'moving') return { state: step(state, event, scope) };
  if (state.kind !== 'pressed' || distance(state.from, event.at) <= scope.reach * 0.6) return { state };
  const { hit, from, extend } = state;
  if (!hit) return { state: { kind: 'box', from, to: event.at, extend } };
  const ref = refTo(hit.kind, hit.id);
  // what is locked is chosen by a press, and not drawn along
  if (scope.locked?.has(ref)) return { state };
  const refs = scope.selection.includes(ref) ? scope.selection : extend ? [...scope.selection, ref] : [ref];
  const grabbed = grab(hit, refs, from, scope);
  const state2 = grabbed.kind === 'moving' ? step(grabbed, event, scope) : grabbed;
  return scope.selection.includes(ref) ? { state: state2 } : { state: state2, select: refs };
}

function up(state: SelectState, scope: Scope): Outcome<SelectState> {
  if (state.kind === 'moving') return settle(state, scope);
  if (state.kind === 'box') {
    // dragged to the right: what lies wholly within; to the left: what is touched
    const box = boxBetween(state.from, state.to);
    const found = scope.spatial
      .partsIn(box, state.to[0] >= state.from[0])
      .map((part) => refTo(part.kind, part.id));
    const select = state.extend ? [...new Set([...scope.selection, ...found])] : found;
    return { state: IDLE, select };
  }
  if (state.kind !== 'pressed') return { state: IDLE };
  if (!state.hit) return { state: IDLE, select: state.extend ? scope.selection : [] };
  const ref = refTo(state.hit.kind, state.hit.id);
  return { state: IDLE, select: state.extend ? toggled(scope.selection, ref) : [ref] };
}

function on(state: SelectState, event: ToolEvent, scope: Scope): Outcome<SelectState> {
  switch (event.kind) {
    case 'down':
      return down(event, scope);
    case 'move':
      return move(state, event, scope);
    case 'up':
      return up(state, scope);
    case 'arrow': {
      const alter = nudge(event, scope);
      return alter ? { state: IDLE, alter } : { state: IDLE };
    }
    case 'accept':
      return scope.selection.length > 0 ? { state: IDLE, goes: 'card' } : { state: IDLE };
    case 'leave':
      // a drag under way is given up first
      return state.kind === 'moving' || state.kind === 'box' ? { state: IDLE } : { state: IDLE, select: [] };
    default:
      return { state };
  }
}

function preview(state: SelectState, scope: Scope): Preview {
  if (state.kind === 'box') return { box: [state.from, state.to] };
  if (state.kind !== 'moving') return {};
  const parts = dragged(state, scope);
  return {
    parts,
    hides: parts.map(refOfPart),
    readout: [
      { name: 'right', figure: lengthFigure(state.by[0]) },
      { name: 'up', figure: lengthFigure(state.by[1]) },
    ],
  };
}

export const selectTool: Tool<SelectState> = { name: 'select', start: () => IDLE, on, preview };
