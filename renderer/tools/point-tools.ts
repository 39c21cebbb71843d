import type { Port, Via } from '../../solver/chip/chip.ts';
import { add, times, whole, type Xy } from '../geometry/vector.ts';
import { lengthFigure } from '../words/figure.ts';
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
import { noTyping, readPlace, rubOut, type Typing, typeInto } from './typing.ts';

/** Ports and vias: one click, or a typed place, each. */
export interface PointState {
  readonly at: Xy;
  readonly by: Snapped['by'];
  readonly typing: Typing;
  readonly keyed: boolean;
}

const start = (scope: Scope): PointState => ({
  at: scope.centre,
  by: 'free',
  typing: noTyping(1),
  keyed: false,
});

function tool(
  name: 'port' | 'via',
  make: (at: readonly [number, number], scope: Scope) => PartValue | string,
): Tool<PointState> {
  const set = (state: PointState, scope: Scope): Outcome<PointState> => {
    const part = make(whole(state.at), scope);
    const fresh = { ...state, typing: noTyping(1), keyed: false };
    if (typeof part === 'string') return { state: fresh, says: part };
    return {
      state: fresh,
      alter: { label: `set a ${name}`, put: [part] },
      select: [`${name}:${part.value.id}`],
    };
  };
  const on = (state: PointState, event: ToolEvent, scope: Scope): Outcome<PointState> => {
    switch (event.kind) {
      case 'type':
        return { state: { ...state, typing: typeInto(state.typing, event.text) } };
      case 'rub':
        return { state: { ...state, typing: rubOut(state.typing) } };
      case 'arrow': {
        const by = times(event.direction, scope.grid * (event.far ? 10 : 1));
        return { state: { ...state, at: whole(add(state.at, by)), keyed: true } };
      }
      case 'accept': {
        const [text] = state.typing.texts;
        if (text === '') return state.keyed ? set(state, scope) : { state };
        const at = readPlace(text!);
        if (!at) return { state, says: 'A place takes two lengths, such as "5 mm, 13 mm".' };
        return set({ ...state, at: whole(at) }, scope);
      }
      case 'leave':
        return state.typing.texts[0] === ''
          ? { state, goes: 'select' }
          : { state: { ...state, typing: noTyping(1) } };
      case 'move':
      case 'down': {
        const snapped = snap(event.at, scope.spatial, {
          reach: scope.reach,
          grid: scope.grid,
          ...(event.free && { free: true }),
        });
        const aimed = { ...state, at: whole(snapped.at), by: snapped.by, keyed: false };
        return event.kind === 'move' ? { state: aimed } : set(aimed, scope);
      }
      default:
        return { state };
    }
  };
  const preview = (state: PointState, scope: Scope): Preview => {
    const part = make(whole(state.at), scope);
    return {
      parts: typeof part === 'string' ? [] : [part],
      cursor: state.at,
      readout: [
        {
          name: 'place',
          figure: `${lengthFigure(state.at[0])}, ${lengthFigure(state.at[1])}`,
          ...(state.typing.texts[0] && { typing: state.typing.texts[0] }),
        },
      ],
      hint:
        state.by === 'end' ? 'On the end of a channel.' : `Click where the ${name} goes, or type a place.`,
    };
  };
  return { name, start, on, preview };
}

/** The first port is fed by a flow, the others are open: the commonest start; the card changes it. */
export const portTool = tool('port', (at, scope) => {
  if (
    scope.chip.ports.some(
      (port) => port.at[0] === at[0] && port.at[1] === at[1] && port.layer === scope.layer,
    )
  )
    return 'A port is there already.';
  const fed = scope.chip.ports.some((port) => port.drive.kind !== 'pressure' || port.drive.pressure > 0);
  const value: Port = {
    id: freshId(scope.chip, fed ? 'out' : 'in'),
    at,
    layer: scope.layer,
    diameter: scope.habits.portDiameter,
    drive: fed ? { kind: 'pressure', pressure: 0 } : { kind: 'flow', flow: 1e-8 / 60 },
    tubing: [],
  };
  return { kind: 'port', value };
});

export const viaTool = tool('via', (at, scope) => {
  const other = scope.chip.layers.find((layer) => layer.id !== scope.layer);
  if (!other) return 'A via leads to a second layer; add one first.';
  const value: Via = {
    id: freshId(scope.chip, 'via'),
    at,
    layers: [scope.layer, other.id],
    diameter: scope.habits.viaDiameter,
  };
  return { kind: 'via', value };
});
