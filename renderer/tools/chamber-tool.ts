import type { Point } from '../../solver/chip/chip.ts';
import { area, boxBetween } from '../geometry/path.ts';
import { add, distance, same, times, whole, type Xy } from '../geometry/vector.ts';
import { lengthFigure } from '../words/figure.ts';
import { circle } from './round.ts';
import { type Snapped, snap } from './snap.ts';
import {
  freshId,
  type Outcome,
  type PartValue,
  type Preview,
  type Scope,
  type Tool,
  type ToolEvent,
} from './tool.ts';
import {
  lengthFault,
  nextField,
  noTyping,
  readLength,
  readPlace,
  rubOut,
  sizedCorner,
  type Typing,
  typeInto,
} from './typing.ts';

/**
 * Chambers and keep-outs: a rectangle between two corners, a circle about its middle, or a polygon point by
 * point.
 */
const FORMS = ['rectangle', 'round', 'polygon'] as const;
export type ChamberForm = (typeof FORMS)[number];

export interface ChamberState {
  readonly makes: Makes;
  readonly form: ChamberForm;
  readonly points: readonly Xy[];
  readonly at: Xy;
  readonly by: Snapped['by'];
  readonly typing: Typing;
  readonly keyed: boolean;
  readonly pressed: Xy | null;
}

type Makes = 'chamber' | 'keep-out';

/** What is drawn within an outline; a keep-out is one of every layer until its card says otherwise. */
const made = (makes: Makes, id: string, outline: readonly Point[], scope: Scope): PartValue =>
  makes === 'chamber'
    ? { kind: makes, value: { id, layer: scope.layer, outline } }
    : { kind: makes, value: { id, outline, clearance: 0 } };

const start = (makes: Makes, scope: Scope): ChamberState => ({
  makes,
  form: 'rectangle',
  points: [],
  at: scope.centre,
  by: 'free',
  typing: noTyping(1),
  keyed: false,
  pressed: null,
});

const begun = (state: ChamberState): ChamberState => ({
  ...state,
  points: [],
  typing: noTyping(1),
  keyed: false,
  pressed: null,
});

/** The far corner, or a place on the rim, under typed sizes and where the hand points; null where none is typed. */
function sized(state: ChamberState): Xy | null {
  const first = state.points[0];
  if (!first || state.form === 'polygon') return null;
  if (state.form === 'rectangle') return sizedCorner(first, state.at, state.typing.texts);
  const radius = readLength(state.typing.texts[0] ?? '', 'mm');
  return radius !== null && radius > 0 ? add(first, [radius, 0]) : null;
}

/** Why typed sizes cannot be used, '' where they can. */
const typedFault = ({ form, points, typing }: ChamberState): string =>
  points.length === 0 || form === 'polygon'
    ? ''
    : (typing.texts.map((text) => lengthFault(text, 'mm')).find(Boolean) ?? '');

function outlineOf(state: ChamberState, to: Xy): readonly Point[] | null {
  const first = state.points[0];
  if (!first) return null;
  if (state.form === 'polygon') {
    const drawn = same(state.points.at(-1)!, to) || same(first, to);
    const points = drawn ? state.points : [...state.points, to];
    return points.length > 2 ? points.map(whole) : null;
  }
  if (state.form === 'round') {
    const radius = distance(first, to);
    return radius > 0 ? circle(first, radius) : null;
  }
  const box = boxBetween(first, to);
  if (box.right === box.left || box.top === box.bottom) return null;
  return [
    [box.left, box.bottom],
    [box.right, box.bottom],
    [box.right, box.top],
    [box.left, box.top],
  ].map((p) => whole(p as unknown as Xy));
}

function finish(state: ChamberState, to: Xy, scope: Scope): Outcome<ChamberState> {
  const outline = outlineOf(state, to);
  if (!outline || Math.abs(area(outline)) === 0)
    return { state: begun(state), says: `A ${state.makes} encloses an area; give it a width and a height.` };
  const id = freshId(scope.chip, state.makes);
  return {
    state: begun({ ...state, at: to }),
    alter: { label: `draw a ${state.makes}`, put: [made(state.makes, id, outline, scope)] },
    select: [`${state.makes}:${id}`],
  };
}

function place(state: ChamberState, scope: Scope): Outcome<ChamberState> {
  const first = state.points[0];
  if (!first)
    return {
      state: {
        ...state,
        points: [state.at],
        typing: noTyping(state.form === 'rectangle' ? 2 : 1),
        keyed: false,
      },
    };
  if (state.form !== 'polygon') {
    const fault = typedFault(state);
    return fault ? { state, says: fault } : finish(state, sized(state) ?? state.at, scope);
  }
  if (same(first, state.at) || same(state.points.at(-1)!, state.at)) return finish(state, first, scope);
  return { state: { ...state, points: [...state.points, state.at], keyed: false } };
}

function accept(state: ChamberState, scope: Scope): Outcome<ChamberState> {
  const [text] = state.typing.texts;
  if (state.points.length === 0) {
    if (text === '') return state.keyed ? place(state, scope) : { state };
    const at = readPlace(text!);
    if (!at) return { state, says: 'A place takes two lengths, such as "5 mm, 13 mm".' };
    return place({ ...state, at: whole(at) }, scope);
  }
  if (state.form === 'polygon' && text !== '') {
    const at = readPlace(text!);
    if (!at) return { state, says: 'A place takes two lengths, such as "5 mm, 13 mm".' };
    return place({ ...state, at: whole(at), typing: noTyping(1) }, scope);
  }
  const fault = typedFault(state);
  if (fault) return { state, says: fault };
  const to = sized(state);
  if (to) return finish(state, to, scope);
  return state.keyed ? place(state, scope) : finish(state, state.points[0]!, scope);
}

function on(state: ChamberState, event: ToolEvent, scope: Scope): Outcome<ChamberState> {
  switch (event.kind) {
    case 'again': {
      const next = FORMS[(FORMS.indexOf(state.form) + 1) % FORMS.length]!;
      return { state: { ...begun(state), form: next } };
    }
    case 'type':
      return { state: { ...state, typing: typeInto(state.typing, event.text) } };
    case 'rub':
      if (state.typing.texts[state.typing.field] !== '')
        return { state: { ...state, typing: rubOut(state.typing) } };
      return { state: { ...state, points: state.points.slice(0, -1) } };
    case 'next':
      return { state: { ...state, typing: nextField(state.typing) } };
    case 'arrow': {
      const by = times(event.direction, scope.grid * (event.far ? 10 : 1));
      return { state: { ...state, at: whole(add(state.at, by)), keyed: true } };
    }
    case 'accept':
      return accept(state, scope);
    case 'leave':
      return state.points.length > 0 ? { state: begun(state) } : { state, goes: 'select' };
    default: {
      const from = state.points.at(-1);
      const snapped = snap(event.at, scope.spatial, {
        reach: scope.reach,
        grid: scope.grid,
        ...(state.form === 'polygon' && from && { from }),
        ...(event.free && { free: true }),
      });
      const aimed: ChamberState = { ...state, at: whole(snapped.at), by: snapped.by, keyed: false };
      if (event.kind === 'move') return { state: aimed };
      if (event.kind === 'down') {
        const placed = place(aimed, scope);
        return {
          ...placed,
          state: { ...placed.state, pressed: placed.alter || placed.says ? null : aimed.at },
        };
      }
      const dragged = state.pressed && distance(state.pressed, aimed.at) > 3 * scope.reach;
      return dragged && state.form !== 'polygon'
        ? finish({ ...aimed, pressed: null }, aimed.at, scope)
        : { state: { ...state, pressed: null } };
    }
  }
}

function preview(state: ChamberState, scope: Scope): Preview {
  const to = sized(state) ?? state.at;
  const outline = outlineOf(state, to);
  const first = state.points[0];
  const { texts, field } = state.typing;
  const typing = (i: number) => {
    const fault = lengthFault(texts[i] ?? '', 'mm');
    return field === i || texts[i] ? { typing: texts[i] ?? '', ...(fault && { fault }) } : {};
  };
  const readout = !first
    ? [
        {
          name: state.form,
          figure: `${lengthFigure(state.at[0])}, ${lengthFigure(state.at[1])}`,
          ...(texts[0] && { typing: texts[0] }),
        },
      ]
    : state.form === 'round'
      ? [{ name: 'radius', figure: lengthFigure(distance(first, to)), ...typing(0) }]
      : state.form === 'polygon'
        ? [
            {
              name: 'place',
              figure: `${lengthFigure(to[0])}, ${lengthFigure(to[1])}`,
              ...(texts[0] && { typing: texts[0] }),
            },
          ]
        : [
            { name: 'width', figure: lengthFigure(Math.abs(to[0] - first[0])), ...typing(0) },
            { name: 'height', figure: lengthFigure(Math.abs(to[1] - first[1])), ...typing(1) },
          ];
  return {
    parts: outline ? [made(state.makes, freshId(scope.chip, state.makes), outline, scope)] : [],
    guide: first && !outline ? [state.points.at(-1)!, state.at] : null,
    cursor: state.at,
    readout,
    hint: first
      ? state.form === 'polygon'
        ? 'Click each corner; the first again, or Enter, closes it.'
        : 'Click the far corner, or type its size.'
      : `A ${state.form === 'round' ? 'round one' : state.form}; the same key again changes that. Click, or type a place.`,
  };
}

const toolOf = (makes: Makes): Tool<ChamberState> => ({
  name: makes,
  start: (scope) => start(makes, scope),
  on,
  preview,
});
export const chamberTool = toolOf('chamber');
export const keepOutTool = toolOf('keep-out');
