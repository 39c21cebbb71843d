import { pathLength, tidy } from '../geometry/path.ts';
import { add, distance, same, sub, times, whole, type Xy } from '../geometry/vector.ts';
import { counted, lengthFigure, number } from '../words/figure.ts';
import { channelsOf, type Widths } from './channel-runs.ts';
import { type Snapped, snap } from './snap.ts';
import type { Outcome, PlaceEvent, Preview, Scope, Tool, ToolEvent } from './tool.ts';
import {
  isTyping,
  lengthFault,
  nextField,
  noTyping,
  readAngle,
  readLength,
  readPlace,
  readWidths,
  rubOut,
  type Typing,
  typeInto,
  widthsFault,
} from './typing.ts';

/**
 * Channels drawn point by point. Before the first point a place can be typed; after it length, angle, width
 * and the radius of bends. A width counts from where it was typed on; where it changes, one channel ends and
 * the next begins. A point on an end, a port or another channel finishes; so does Enter, or the last point
 * again.
 */
export interface ChannelState {
  readonly points: readonly Xy[];
  /** Of each stretch between two points. */
  readonly widths: readonly Widths[];
  readonly at: Xy;
  readonly by: Snapped['by'];
  readonly guide: Snapped['guide'];
  /** Of the stretch that comes next, where nothing else is typed. */
  readonly width: number;
  readonly bendRadius: number;
  readonly typing: Typing;
  /** The cursor was moved by keys since the last point, so that Enter sets a point there. */
  readonly keyed: boolean;
  /** Where the hand was as the button went down; a line can be dragged as well as clicked. */
  readonly pressed: Xy | null;
}

const FIELDS = 4;
const LENGTH = 0;
const ANGLE = 1;
const WIDTH = 2;
const BENDS = 3;

function start(scope: Scope): ChannelState {
  return {
    points: [],
    widths: [],
    at: scope.centre,
    by: 'free',
    guide: null,
    width: scope.habits.channelWidth,
    bendRadius: scope.habits.bendRadius,
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

/** Why what was typed cannot be used, '' where all of it can. */
function typedFault({ typing, points }: ChannelState): string {
  if (points.length === 0) return '';
  const texts = typing.texts;
  if (Number.isNaN(readAngle(texts[ANGLE]!))) return 'An angle takes degrees, such as "45".';
  return lengthFault(texts[LENGTH]!, 'mm') || widthsFault(texts[WIDTH]!) || bendsFault(texts[BENDS]!);
}

/** No radius at all is one, too. */
const bendsFault = (text: string): string =>
  readLength(text, 'um') === 0 ? '' : lengthFault(text, 'um').replace('above zero', 'or 0');

/** The width of the stretch that is aimed and the radius of bends, as typed or as they were. */
function typedShape(state: ChannelState): { readonly width: Widths; readonly bendRadius: number } {
  const texts = state.points.length === 0 ? [] : state.typing.texts;
  const width = readWidths(texts[WIDTH] ?? '');
  const bends = readLength(texts[BENDS] ?? '', 'um');
  return {
    width: width?.every((own) => own > 0) ? width : [state.width, state.width],
    bendRadius: usable(bends) && bends >= 0 ? bends : state.bendRadius,
  };
}

/** Adds the aimed point; a point on something else ends the channel unless `extend` goes on through it. */
function place(state: ChannelState, scope: Scope, extend: boolean | undefined): Outcome<ChannelState> {
  const fault = typedFault(state);
  if (fault) return { state, says: fault };
  const last = state.points.at(-1);
  if (last && same(last, state.at)) return finish(state, scope);
  const { width, bendRadius } = typedShape(state);
  const next: ChannelState = {
    ...state,
    points: [...state.points, state.at],
    widths: last ? [...state.widths, width] : [],
    width: width[1],
    bendRadius,
    typing: noTyping(FIELDS),
    keyed: false,
    guide: null,
  };
  const met = state.by === 'end' || state.by === 'port' || state.by === 'via' || state.by === 'centreline';
  return next.points.length > 1 && met && !extend ? finish(next, scope) : { state: next };
}

function finish(state: ChannelState, scope: Scope): Outcome<ChannelState> {
  const { bendRadius, width } = state;
  const made = channelsOf(state.points, state.widths, bendRadius, scope);
  const fresh: ChannelState = { ...start(scope), at: state.at, width, bendRadius };
  if (made.length === 0) return { state: fresh };
  return {
    state: fresh,
    alter: {
      label: made.length === 1 ? 'draw a channel' : `draw ${counted(made.length, 'channel')}`,
      put: made.map((value) => ({ kind: 'channel', value }) as const),
    },
    select: made.map(({ id }) => `channel:${id}` as const),
    habits: { channelWidth: width, bendRadius },
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
  const fault = typedFault(state);
  if (fault) return { state, says: fault };
  if (typed[LENGTH] !== '' || typed[ANGLE] !== '')
    return place(aim(state, state.at, scope, true), scope, false);
  if (isTyping(state.typing)) {
    const { width, bendRadius } = typedShape(state);
    if (width[0] !== width[1])
      // a taper is that of a stretch: it waits for one
      return state.keyed
        ? place(state, scope, false)
        : { state: { ...state, typing: { ...state.typing, field: LENGTH } } };
    return { state: { ...state, width: width[0], bendRadius, typing: noTyping(FIELDS) } };
  }
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
    return { ...placed, state: { ...placed.state, pressed: placed.alter || placed.says ? null : event.at } };
  }
  // by the hand itself: where a typed figure or a snap led the point says nothing
  const dragged = state.pressed && distance(state.pressed, event.at) > 3 * scope.reach;
  if (!dragged) return { state: { ...state, pressed: null } };
  return place({ ...aimed, pressed: null }, scope, event.extend);
}

function on(state: ChannelState, event: ToolEvent, scope: Scope): Outcome<ChannelState> {
  switch (event.kind) {
    case 'type':
      return { state: aim({ ...state, typing: typeInto(state.typing, event.text) }, state.at, scope, true) };
    case 'rub':
      if (isTyping(state.typing)) return { state: { ...state, typing: rubOut(state.typing) } };
      return { state: { ...state, points: state.points.slice(0, -1), widths: state.widths.slice(0, -1) } };
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
  const { width, bendRadius } = typedShape(state);
  const line = (name: string, figure: string, i: number, fault: string) => ({
    name,
    figure,
    ...((field === i || texts[i] !== '') && { typing: texts[i]! }),
    ...(fault && { fault }),
  });
  const made = same(last, state.at)
    ? channelsOf(state.points, state.widths, bendRadius, scope)
    : channelsOf([...state.points, state.at], [...state.widths, width], bendRadius, scope);
  return {
    parts: made.map((value) => ({ kind: 'channel', value }) as const),
    cursor: state.at,
    guide: state.guide,
    readout: [
      line('length', lengthFigure(distance(last, state.at)), LENGTH, lengthFault(texts[LENGTH]!, 'mm')),
      line('angle', `${number(angle === -180 ? 180 : angle, 3)}°`, ANGLE, ''),
      line('width', widthFigure(width), WIDTH, widthsFault(texts[WIDTH]!)),
      ...(bendRadius > 0 || field === BENDS || texts[BENDS] !== ''
        ? [line('bends', lengthFigure(bendRadius, { digits: 3 }), BENDS, bendsFault(texts[BENDS]!))]
        : []),
      { name: 'in all', figure: lengthFigure(pathLength(path, bendRadius)) },
    ],
    hint:
      state.by === 'free' || state.by === 'grid' || state.by === 'in line'
        ? field === WIDTH
          ? 'One width, or two for a taper: 200 to 100. It counts from here on.'
          : 'Enter ends the channel; Tab goes to angle, width and bends.'
        : `On ${state.by === 'end' ? 'an end' : state.by === 'centreline' ? 'a channel' : `a ${state.by}`}: ends here.`,
  };
}

const widthFigure = ([from, to]: Widths): string =>
  from === to
    ? lengthFigure(from, { digits: 3 })
    : `${lengthFigure(from, { digits: 3 })} to ${lengthFigure(to, { digits: 3 })}`;

export const channelTool: Tool<ChannelState> = { name: 'channel', start, on, preview };
