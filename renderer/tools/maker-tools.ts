import { type Box, boxBetween } from '../geometry/path.ts';
import { add, distance, times, whole, type Xy } from '../geometry/vector.ts';
import { type ChamberRowWishes, chamberRow } from '../makers/chambers.ts';
import { type GradientTreeWishes, gradientTree } from '../makers/gradient-tree.ts';
import type { Made, Making } from '../makers/made.ts';
import { type PostWishes, posts } from '../makers/posts.ts';
import { type SerpentineWishes, serpentine, serpentineReach } from '../makers/serpentine.ts';
import { type SplitTreeWishes, splitTree } from '../makers/split-tree.ts';
import type { Ref } from '../state/ref.ts';
import { lengthFigure } from '../words/figure.ts';
import { snap } from './snap.ts';
import {
  freshId,
  type Outcome,
  type PartValue,
  type Preview,
  type Scope,
  type Tool,
  type ToolEvent,
  type ToolName,
  takenIds,
} from './tool.ts';
import {
  isTyping,
  lengthFault,
  nextField,
  noTyping,
  readPlace,
  rubOut,
  sizedCorner,
  type Typing,
  typeInto,
} from './typing.ts';

/** Makers are drawn as a box, corner to corner; what they are made of is then set on the card. */
export interface BoxState {
  readonly from: Xy | null;
  readonly at: Xy;
  readonly typing: Typing;
  readonly keyed: boolean;
  readonly pressed: boolean;
}

export const partsOfMade = (made: Made): PartValue[] => [
  ...made.channels.map((value) => ({ kind: 'channel', value }) as const),
  ...made.chambers.map((value) => ({ kind: 'chamber', value }) as const),
  ...made.ports.map((value) => ({ kind: 'port', value }) as const),
];

interface BoxMaker {
  readonly name: ToolName;
  /** First word of the ids of what is made. */
  readonly stem: string;
  readonly label: string;
  make(name: string, box: Box, scope: Scope): Making;
}

/** "tree 2": a stem under which neither a part nor a family is known. */
function freshFamily(scope: Scope, stem: string): string {
  const taken = takenIds(scope.chip);
  for (const id of [...taken]) taken.add(id.replace(/(-[0-9a-z]+)+$/, ''));
  return freshId(scope.chip, stem, taken);
}

/** The other corner, under what was typed and where the hand points. */
const farCorner = ({ from, at, typing }: BoxState): Xy => (from && sizedCorner(from, at, typing.texts)) ?? at;

/** The same, for a box that the chip could hold: one far larger would be filled with far too much. */
function making(maker: BoxMaker, name: string, box: Box, scope: Scope): Making {
  const { width, height } = scope.chip.outline;
  const most = 2 * Math.max(width, height);
  const size = Math.max(box.right - box.left, box.top - box.bottom);
  return size > most
    ? {
        refusal: `That box is ${lengthFigure(size)} long; the chip is ${lengthFigure(Math.max(width, height))}.`,
      }
    : maker.make(name, box, scope);
}

function boxTool(maker: BoxMaker): Tool<BoxState> {
  const start = (scope: Scope): BoxState => ({
    from: null,
    at: scope.centre,
    typing: noTyping(1),
    keyed: false,
    pressed: false,
  });
  const finish = (state: BoxState, scope: Scope): Outcome<BoxState> => {
    const name = freshFamily(scope, maker.stem);
    const made = making(maker, name, boxBetween(state.from!, state.at), scope);
    const fresh = { ...start(scope), at: state.at };
    if ('refusal' in made) return { state: fresh, says: made.refusal };
    const put = partsOfMade(made.made);
    const { targets } = made.made;
    const [first] = put;
    return {
      state: fresh,
      alter: {
        label: maker.label,
        put,
        ...(targets.length > 0 && { set: { targets: [...scope.chip.targets, ...targets] } }),
      },
      select: first ? [`${first.kind}:${first.value.id}` as Ref] : [],
      goes: 'card',
    };
  };
  const place = (state: BoxState, scope: Scope): Outcome<BoxState> => {
    if (!state.from) return { state: { ...state, from: state.at, typing: noTyping(2), keyed: false } };
    const fault = state.typing.texts.map((text) => lengthFault(text, 'mm')).find(Boolean);
    return fault ? { state, says: fault } : finish({ ...state, at: farCorner(state) }, scope);
  };
  const on = (state: BoxState, event: ToolEvent, scope: Scope): Outcome<BoxState> => {
    switch (event.kind) {
      case 'type':
        return { state: { ...state, typing: typeInto(state.typing, event.text) } };
      case 'rub':
        return { state: { ...state, typing: rubOut(state.typing) } };
      case 'next':
        return { state: { ...state, typing: nextField(state.typing) } };
      case 'arrow': {
        const by = times(event.direction, scope.grid * (event.far ? 10 : 1));
        return { state: { ...state, at: whole(add(state.at, by)), keyed: true } };
      }
      case 'accept': {
        const { texts } = state.typing;
        if (!isTyping(state.typing)) return state.keyed ? place(state, scope) : { state };
        // the other corner can be typed as a place, too
        const at = readPlace(texts[0]!);
        if (at) return place({ ...state, at: whole(at), typing: noTyping(texts.length) }, scope);
        return state.from
          ? place(state, scope)
          : { state, says: 'A corner takes two lengths, such as "10 mm, 3 mm".' };
      }
      case 'leave':
        return state.from ? { state: { ...start(scope), at: state.at } } : { state, goes: 'select' };
      case 'move':
      case 'down':
      case 'up': {
        const snapped = snap(event.at, scope.spatial, {
          reach: scope.reach,
          grid: scope.grid,
          ...(event.free && { free: true }),
        });
        const aimed = { ...state, at: whole(snapped.at), keyed: false };
        if (event.kind === 'move') return { state: aimed };
        if (event.kind === 'down') {
          const placed = place(aimed, scope);
          return {
            ...placed,
            state: { ...placed.state, pressed: !placed.alter && placed.state.from !== null },
          };
        }
        const dragged = state.pressed && state.from && distance(state.from, aimed.at) > 3 * scope.reach;
        return dragged ? place({ ...aimed, pressed: false }, scope) : { state: { ...state, pressed: false } };
      }
      default:
        return { state };
    }
  };
  const preview = (state: BoxState, scope: Scope): Preview => {
    const { texts, field } = state.typing;
    const typing = (i: number) => {
      const fault = state.from && !readPlace(texts[i] ?? '') ? lengthFault(texts[i] ?? '', 'mm') : '';
      return field === i || texts[i] ? { typing: texts[i] ?? '', ...(fault && { fault }) } : {};
    };
    if (!state.from)
      return {
        cursor: state.at,
        readout: [
          {
            name: 'corner',
            figure: `${lengthFigure(state.at[0])}, ${lengthFigure(state.at[1])}`,
            ...typing(0),
          },
        ],
        hint: 'Click one corner of its box, or type a place such as 10 mm, 3 mm.',
      };
    const corner = farCorner(state);
    const box = boxBetween(state.from, corner);
    const made = making(maker, 'preview', box, scope);
    return {
      parts: 'made' in made ? partsOfMade(made.made) : [],
      box: [state.from, corner],
      cursor: corner,
      readout: [
        { name: 'width', figure: lengthFigure(box.right - box.left), ...typing(0) },
        { name: 'height', figure: lengthFigure(box.top - box.bottom), ...typing(1) },
      ],
      hint:
        'made' in made
          ? 'Click the other corner; the card then sets the rest.'
          : box.right === box.left && box.top === box.bottom
            ? 'Click the other corner, or type its width and height.'
            : made.refusal,
    };
  };
  return { name: maker.name, start, on, preview };
}

/** nm: what is proposed is a round figure. */
const ROUND = 100_000;

/** Half of what fits: a serpentine one sees as such. */
export function firstSerpentine(box: Box, scope: Scope): SerpentineWishes {
  const width = scope.habits.channelWidth;
  const asked = { layer: scope.layer, box, width, gap: width, bendRadius: 0, upright: false };
  const { least, most } = serpentineReach(asked);
  const half = Math.round((least + (most - least) / 2) / ROUND) * ROUND;
  return { ...asked, length: half > least && half < most ? half : Math.round((least + most) / 2) };
}

export function firstSplitTree(box: Box, scope: Scope): SplitTreeWishes {
  const width = scope.habits.channelWidth;
  return {
    layer: scope.layer,
    levels: 2,
    box,
    trunkWidth: width,
    leafWidth: Math.round(width / 2),
    joining: false,
    portDiameter: scope.habits.portDiameter,
  };
}

export const serpentineTool = boxTool({
  name: 'serpentine',
  stem: 'serpentine',
  label: 'make a serpentine',
  make: (name, box, scope) => serpentine.make(name, firstSerpentine(box, scope)),
});

export const splitTreeTool = boxTool({
  name: 'split tree',
  stem: 'tree',
  label: 'make a splitting tree',
  make: (name, box, scope) => splitTree.make(name, firstSplitTree(box, scope)),
});

export const gradientTreeTool = boxTool({
  name: 'gradient tree',
  stem: 'gradient',
  label: 'make a gradient tree',
  make: (name, box, scope) => {
    const wishes: GradientTreeWishes = {
      layer: scope.layer,
      box,
      inlets: 2,
      stages: 3,
      width: Math.round(scope.habits.channelWidth / 2),
      mixing: Math.round(((box.right - box.left) / 4) * 2),
      portDiameter: scope.habits.portDiameter,
    };
    return gradientTree.make(name, wishes);
  },
});

export const chamberRowTool = boxTool({
  name: 'row of chambers',
  stem: 'row',
  label: 'make a row of chambers',
  make: (name, box, scope) => {
    const count = 5;
    const wishes: ChamberRowWishes = {
      layer: scope.layer,
      box,
      count,
      chamberLength: Math.round(((box.right - box.left) / count) * 0.6),
      channelWidth: Math.min(scope.habits.channelWidth, Math.round((box.top - box.bottom) / 3)),
    };
    return chamberRow.make(name, wishes);
  },
});

export const postsTool = boxTool({
  name: 'posts',
  stem: 'posts',
  label: 'make a row of posts',
  make: (name, box, scope) => {
    const gap = Math.max(20_000, Math.round((box.top - box.bottom) / 40 / 1000) * 1000);
    const wishes: PostWishes = {
      layer: scope.layer,
      box,
      gap,
      post: gap,
      along: Math.min(2 * gap, Math.round((box.right - box.left) / 3)),
    };
    return posts.make(name, wishes);
  },
});
