import type { Channel, Chip, Nm } from '../../solver/chip/chip.ts';
import type { Box } from '../geometry/path.ts';
import { boxOf } from '../geometry/path.ts';
import { lengthFigure } from '../words/figure.ts';
import { family, type Made, type Maker, type Making, sameShape } from './made.ts';

/**
 * A row of posts across the flow, drawn as the fluid sees it: a space before, the slits between the posts,
 * a space behind. Flow goes from left to right.
 */
export interface PostWishes {
  readonly layer: string;
  readonly box: Box;
  /** Between two posts, nm: what a particle must be smaller than to pass. */
  readonly gap: Nm;
  /** Of one post, across the flow, nm. */
  readonly post: Nm;
  /** Of one post, along the flow, nm. */
  readonly along: Nm;
}

export const MOST_SLITS = 2000;

const slits = (wishes: PostWishes): number =>
  Math.floor((wishes.box.top - wishes.box.bottom + wishes.post) / (wishes.gap + wishes.post));

function build(name: string, wishes: PostWishes): Made {
  const { box, gap, post, along, layer } = wishes;
  const n = slits(wishes);
  const left = Math.round((box.left + box.right) / 2 - along / 2);
  const right = left + along;
  const used = n * gap + (n - 1) * post;
  const lowest = (box.bottom + box.top) / 2 - used / 2 + gap / 2;
  const channels: Channel[] = Array.from({ length: n }, (_, i) => {
    const y = Math.round(lowest + i * (gap + post));
    return {
      id: `${name}-${i + 1}`,
      layer,
      path: [
        [left, y],
        [right, y],
      ] as const,
      width: [gap, gap] as const,
      bendRadius: 0,
    };
  });
  const space = (id: string, from: number, to: number) => ({
    id,
    layer,
    outline: [
      [from, box.bottom],
      [to, box.bottom],
      [to, box.top],
      [from, box.top],
    ] as const,
  });
  return {
    channels,
    chambers: [space(`${name}-before`, box.left, left), space(`${name}-behind`, right, box.right)],
    ports: [],
    targets: [],
  };
}

function make(name: string, wishes: PostWishes): Making {
  const { box, gap, post, along } = wishes;
  if (!(box.right > box.left && box.top > box.bottom))
    return { refusal: 'The box has no size; draw it from one corner to the other.' };
  if (!(gap > 0 && post > 0 && along > 0))
    return { refusal: 'Gap, post and length must each be above zero.' };
  if (along >= box.right - box.left)
    return {
      refusal: `The posts are ${lengthFigure(along)} long; the box must leave room before and behind.`,
    };
  const n = slits(wishes);
  if (n < 1) return { refusal: 'Not one gap fits across this box; make it higher or the gap smaller.' };
  if (n > MOST_SLITS) return { refusal: `That would be ${n} gaps; at most ${MOST_SLITS} are made at once.` };
  return { made: build(name, wishes) };
}

function read(chip: Chip, name: string): PostWishes | null {
  const there = family(chip, name);
  const before = there.chambers.find((part) => part.id === `${name}-before`);
  const behind = there.chambers.find((part) => part.id === `${name}-behind`);
  const [first, second] = there.channels;
  const a = before && boxOf(before.outline);
  const b = behind && boxOf(behind.outline);
  if (!first || !a || !b) return null;
  const gap = first.width[0];
  const wishes: PostWishes = {
    layer: first.layer,
    box: { left: a.left, right: b.right, bottom: a.bottom, top: a.top },
    gap,
    post: second ? second.path[0]![1] - first.path[0]![1] - gap : Math.max(1, a.top - a.bottom - gap),
    along: b.left - a.right,
  };
  return sameShape(there, build(name, wishes)) ? wishes : null;
}

export const posts: Maker<PostWishes> = { kind: 'posts', make, read };
