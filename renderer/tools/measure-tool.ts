import { add, distance, times, whole, type Xy } from '../geometry/vector.ts';
import { lengthFigure, number } from '../words/figure.ts';
import { snap } from './snap.ts';
import type { Outcome, Preview, Scope, Tool, ToolEvent } from './tool.ts';

/** Distance and direction between two places; changes nothing. */
export interface MeasureState {
  readonly from: Xy | null;
  readonly to: Xy;
  /** Both ends are set; the next click begins anew. */
  readonly done: boolean;
}

function on(state: MeasureState, event: ToolEvent, scope: Scope): Outcome<MeasureState> {
  switch (event.kind) {
    case 'move':
    case 'down': {
      const snapped = snap(event.at, scope.spatial, {
        reach: scope.reach,
        grid: scope.grid,
        ...(state.from && !state.done && { from: state.from }),
        ...(event.free && { free: true }),
      });
      const at = whole(snapped.at);
      if (event.kind === 'move') return { state: state.done ? state : { ...state, to: at } };
      if (!state.from || state.done) return { state: { from: at, to: at, done: false } };
      return { state: { ...state, to: at, done: true } };
    }
    case 'arrow': {
      const to = whole(add(state.to, times(event.direction, scope.grid * (event.far ? 10 : 1))));
      return { state: { ...state, to, done: false } };
    }
    case 'accept':
      if (!state.from || state.done) return { state: { from: state.to, to: state.to, done: false } };
      return { state: { ...state, done: true } };
    case 'leave':
      return state.from ? { state: { ...state, from: null, done: false } } : { state, goes: 'select' };
    default:
      return { state };
  }
}

function preview({ from, to }: MeasureState): Preview {
  if (!from) return { cursor: to, hint: 'Click the first place.' };
  return {
    guide: [from, to],
    cursor: to,
    readout: [
      { name: 'distance', figure: lengthFigure(distance(from, to)) },
      { name: 'right', figure: lengthFigure(to[0] - from[0]) },
      { name: 'up', figure: lengthFigure(to[1] - from[1]) },
      {
        name: 'angle',
        figure: `${number((Math.atan2(to[1] - from[1], to[0] - from[0]) * 180) / Math.PI, 4)}°`,
      },
    ],
  };
}

export const measureTool: Tool<MeasureState> = {
  name: 'measure',
  start: (scope) => ({ from: null, to: scope.centre, done: false }),
  on,
  preview,
};
