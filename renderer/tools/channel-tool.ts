import type { Channel } from '../../solver/chip/chip.ts';
import { pathLength, tidy } from '../geometry/path.ts';
import { add, distance, same, sub, times, whole, type Xy } from '../geometry/vector.ts';
import { lengthFigure, number } from '../words/figure.ts';
import { type Snapped, snap } from './snap.ts';
import {
  freshId,
  type Outcome,
  type PlaceEvent,
  type Preview,
  type Scope,
  type Tool,
  type ToolEvent,
} from './tool.ts';
import {
  isTyping,
  lengthFault,
  nextField,
  noTyping,
  readAngle,
  readLength,
  readPlace,
  rubOut,
  type Typing,
  typeInto,
} from './typing.ts';

/**
 * Channels drawn point by point. Before the first point a place can be typed; after it length, angle and
 * width. A point on an end, a port or another channel finishes; so does Enter, or the last point again.
 */
export interface ChannelState {
  readonly points: readonly Xy[];
  readonly at: Xy;
  readonly by: Snapped['by'];
  readonly guide: Snapped['guide'];
  readonly width: number;
  readonly typing: Typing;
  /** The cursor was moved by keys since the last point, so that Enter sets a point there. */
  readonly keyed: boolean;
  /** Where the button went down; a line can be dragged as well as clicked. */
  readonly pressed: Xy | null;
}

const FIELDS = 3;
const LENGTH = 0;
const ANGLE = 1;
const WIDTH = 2;

function start(scope: Scope): ChannelState {
  return {
    points: [],
    at: scope.centre,
    by: 'free',
    guide: null,
    width: scope.habits.channelWidth,
    typing: noTyping(1),
    keyed: false,
    pressed: null,
  };
}

/** The next point under what was typed and where the hand points. */
function aim(state: ChannelState, raw: Xy, scope: Scope, free: boolean | undefined): ChannelState {
  const from = state.points.at(-1);
  const snapped = snap(raw, scope.spatial, {
    reach: scope.reach,
    grid: scope.grid,
    ...(from && { from }),
    ...(free && { free }),
  });
  if (!from) return { ...state, at: whole(snapped.at), by: snapped.by, guide: snapped.guide };
  const length = readLength(state.typing.texts[LENGTH] ?? '', 'mm');
  const angle = readAngle(state.typing.texts[ANGLE] ?? '');
  if (!usable(length) && !usable(angle))
    return { ...state, at: whole(snapped.at), by: snapped.by, guide: snapped.guide };
  const toward = sub(usable(angle) ? raw : snapped.at, from);
  const unit = usable(angle) ? unitAt(angle) : straightened(toward);
  const along = usable(length) ? length : Math.max(0, toward[0] * unit[0] + toward[1] * unit[1]);
  const at = whole(add(from, times(unit, along)));
  return { ...state, at, by: 'free', guide: [from, at] };
}

const usable = (value: number | null): value is number => value !== null && Number.isFinite(value);

function unitAt(degrees: number): Xy {
  const quarter = ((degrees % 360) + 360) % 360;
  if (quarter % 90 === 0)
    return (
      [
        [1, 0],
        [0, 1],
        [-1, 0],
        [0, -1],
      ] as const
    )[quarter / 90]!;
  return [Math.cos((degrees * Math.PI) / 180), Math.sin((degrees * Math.PI) / 180)];
}

function straightened(v: Xy): Xy {
  const length = Math.hypot(v[0], v[1]);
  return length === 0 ? [1, 0] : [v[0] / length, v[1] / length];
}

/** Adds the aimed point; a point on something else ends the channel unless `extend` goes on through it. */
function place(state: ChannelState, scope: Scope, extend: boolean | undefined): Outcome<ChannelState> {
  const last = state.points.at(-1);
  if (last && same(last, state.at)) return finish(state, scope);
  const points = [...state.points, state.at];
  const next: ChannelState = {
    ...state,
    points,
    typing: points.length === 1 ? noTyping(FIELDS) : { ...noTyping(FIELDS), field: LENGTH },
    keyed: false,
    guide: null,
  };
  const met = state.by === 'end' || state.by === 'port' || state.by === 'via' || state.by === 'centreline';
  return points.length > 1 && met && !extend ? finish(next, scope) : { state: next };
}

function finish(state: ChannelState, scope: Scope): Outcome<ChannelState> {
  const path = tidy(state.points);
  if (path.length < 2) return { state: { ...start(scope), at: state.at } };
  const id = freshId(scope.chip, 'channel');
  const value: Channel = {
    id,
    layer: scope.layer,
    path: path as Channel['path'],
    width: [state.width, state.width],
    bendRadius: 0,
  };
  return {
    state: { ...start(scope), at: state.at, width: state.width },
    alter: { label: 'draw a channel', put: [{ kind: 'channel', value }] },
    select: [`channel:${id}`],
    habits: { channelWidth: state.width },
  };
}

function accept(state: ChannelState, scope: Scope): Outcome<ChannelState> {
  const typed = state.typing.texts;
  if (state.points.length === 0) {
    if (typed[0] === '') return state.keyed ? place(state, scope, false) : { state };
    const at = readPlace(typed[0]!);
    if (!at) return { state, says: 'A place takes two lengths, such as "5 mm, 13 mm".' };
    return place({ ...state, at: whole(at), by: 'free' }, scope, true);
  }
  const width = readLength(typed[WIDTH]!, 'um');
  for (const [text, unit] of [
    [typed[LENGTH]!, 'mm'],
    [typed[WIDTH]!, 'um'],
  ] as const) {
    const fault = lengthFault(text, unit);
    if (fault) return { state, says: fault };
  }
  if (Number.isNaN(readAngle(typed[ANGLE]!))) return { state, says: 'An angle takes degrees, such as "45".' };
  const wide = usable(width) ? { ...state, width } : state;
  if (typed[LENGTH] !== '' || typed[ANGLE] !== '')
    return place(aim(wide, wide.at, scope, true), scope, false);
  if (isTyping(state.typing)) return { state: { ...wide, typing: noTyping(FIELDS) } };
  return state.keyed ? place(state, scope, false) : finish(state, scope);
}

function arrow(
  state: ChannelState,
  event: Extract<ToolEvent, { kind: 'arrow' }>,
  scope: Scope,
): Outcome<ChannelState> {
  const from = state.points.at(-1);
  const length = readLength(state.typing.texts[LENGTH] ?? '', 'mm');
  if (from && usable(length)) {
    if (length <= 0) return { state, says: 'Takes a length above zero.' };
    const at = whole(add(from, times(event.direction, length)));
    const here = snap(at, scope.spatial, { reach: 1, grid: 0 });
    return place({ ...state, at, by: here.by }, scope, false);
  }
  const stepBy = scope.grid * (event.far ? 10 : 1);
  const at = whole(add(state.keyed || !from ? state.at : from, times(event.direction, stepBy)));
  const here = snap(at, scope.spatial, { reach: 1, grid: 0 });
  return { state: { ...state, at, by: here.by, keyed: true, guide: null } };
}

function pointer(state: ChannelState, event: PlaceEvent, scope: Scope): Outcome<ChannelState> {
  const aimed = { ...aim(state, event.at, scope, event.free), keyed: false };
  if (event.kind === 'move') return { state: aimed };
  if (event.kind === 'down') {
    const placed = place(aimed, scope, event.extend);
    return { ...placed, state: { ...placed.state, pressed: placed.alter ? null : aimed.at } };
  }
  const dragged = state.pressed && distance(state.pressed, aimed.at) > 3 * scope.reach;
  if (!dragged) return { state: { ...state, pressed: null } };
  return place({ ...aimed, pressed: null }, scope, event.extend);
}

function on(state: ChannelState, event: ToolEvent, scope: Scope): Outcome<ChannelState> {
  switch (event.kind) {
    case 'type':
      return { state: aim({ ...state, typing: typeInto(state.typing, event.text) }, state.at, scope, true) };
    case 'rub':
      if (isTyping(state.typing)) return { state: { ...state, typing: rubOut(state.typing) } };
      return { state: { ...state, points: state.points.slice(0, -1) } };
    case 'again':
      return { state };
    case 'next':
      return { state: { ...state, typing: nextField(state.typing) } };
    case 'arrow':
      return arrow(state, event, scope);
    case 'accept':
      return accept(state, scope);
    case 'leave':
      if (isTyping(state.typing)) return { state: { ...state, typing: noTyping(state.typing.texts.length) } };
      return state.points.length > 0
        ? { state: { ...start(scope), at: state.at } }
        : { state, goes: 'select' };
    default:
      return pointer(state, event, scope);
  }
}

function preview(state: ChannelState, scope: Scope): Preview {
  const last = state.points.at(-1);
  const path = tidy([...state.points, state.at]);
  if (!last)
    return {
      cursor: state.at,
      readout: [
        {
          name: 'place',
          figure: `${lengthFigure(state.at[0])}, ${lengthFigure(state.at[1])}`,
          ...(state.typing.texts[0] !== '' && { typing: state.typing.texts[0]! }),
        },
      ],
      hint: 'Click where the channel begins, or type a place such as 5 mm, 13 mm.',
    };
  const angle = (Math.atan2(state.at[1] - last[1], state.at[0] - last[0]) * 180) / Math.PI;
  const { field, texts } = state.typing;
  const line = (name: string, figure: string, i: number, unit: string) => ({
    name,
    figure,
    ...((field === i || texts[i] !== '') && { typing: texts[i]! }),
    ...(texts[i] !== '' &&
      unit !== '' &&
      lengthFault(texts[i]!, unit) && { fault: lengthFault(texts[i]!, unit) }),
  });
  return {
    parts:
      path.length > 1
        ? [
            {
              kind: 'channel',
              value: {
                id: '',
                layer: scope.layer,
                path: path as Channel['path'],
                width: [state.width, state.width],
                bendRadius: 0,
              },
            },
          ]
        : [],
    cursor: state.at,
    guide: state.guide,
    readout: [
      line('length', lengthFigure(distance(last, state.at)), LENGTH, 'mm'),
      line('angle', `${number(angle === -180 ? 180 : angle, 3)}°`, ANGLE, ''),
      line('width', lengthFigure(state.width, { digits: 3 }), WIDTH, 'um'),
      { name: 'in all', figure: lengthFigure(pathLength(path)) },
    ],
    hint:
      state.by === 'free' || state.by === 'grid' || state.by === 'in line'
        ? 'Enter ends the channel; Tab goes to angle and width.'
        : `On ${state.by === 'end' ? 'an end' : state.by === 'centreline' ? 'a channel' : `a ${state.by}`}: ends here.`,
  };
}

export const channelTool: Tool<ChannelState> = { name: 'channel', start, on, preview };
