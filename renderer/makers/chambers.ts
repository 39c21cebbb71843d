import type { Chamber, Channel, Chip, Nm } from '../../solver/chip/chip.ts';
import type { Box } from '../geometry/path.ts';
import { boxOf } from '../geometry/path.ts';
import { lengthFigure } from '../words/figure.ts';
import { family, type Made, type Maker, type Making, sameShape } from './made.ts';

/** Equal rectangular chambers in a row, joined by channels through their middles. */
export interface ChamberRowWishes {
  readonly layer: string;
  readonly box: Box;
  /** 1 to 500. */
  readonly count: number;
  /** Along the row, nm; the chambers are as high as the box. */
  readonly chamberLength: Nm;
  readonly channelWidth: Nm;
}

export const MOST_CHAMBERS = 500;

function build(name: string, wishes: ChamberRowWishes): Made {
  const { box, count, chamberLength, layer } = wishes;
  const pitch = (box.right - box.left) / count;
  const middle = Math.round((box.bottom + box.top) / 2);
  const chambers: Chamber[] = [];
  const channels: Channel[] = [];
  let from = box.left;
  for (let i = 0; i <= count; i += 1) {
    const left = Math.round(box.left + (i + 0.5) * pitch - chamberLength / 2);
    const right = left + chamberLength;
    channels.push({
      id: `${name}-${i}`,
      layer,
      path: [
        [from, middle],
        [i === count ? box.right : left, middle],
      ],
      width: [wishes.channelWidth, wishes.channelWidth],
      bendRadius: 0,
    });
    from = right;
    if (i === count) break;
    chambers.push({
      id: `${name}-c${i + 1}`,
      layer,
      outline: [
        [left, box.bottom],
        [right, box.bottom],
        [right, box.top],
        [left, box.top],
      ],
    });
  }
  return { channels, chambers, ports: [], targets: [] };
}

function make(name: string, wishes: ChamberRowWishes): Making {
  const { box, count, chamberLength, channelWidth } = wishes;
  if (!Number.isInteger(count) || count < 1 || count > MOST_CHAMBERS)
    return { refusal: `A row has from 1 to ${MOST_CHAMBERS} chambers.` };
  if (!(box.right > box.left && box.top > box.bottom))
    return { refusal: 'The box has no size; draw it from one corner to the other.' };
  const pitch = (box.right - box.left) / count;
  if (chamberLength >= pitch)
    return { refusal: `At this number each chamber has ${lengthFigure(pitch)}; make it shorter than that.` };
  if (channelWidth >= box.top - box.bottom)
    return { refusal: 'The channel between is wider than the chambers are; make the box higher.' };
  return { made: build(name, wishes) };
}

function read(chip: Chip, name: string): ChamberRowWishes | null {
  const there = family(chip, name);
  const first = there.chambers[0];
  const start = there.channels.find((part) => part.id === `${name}-0`);
  const end = there.channels.find((part) => part.id === `${name}-${there.chambers.length}`);
  const around = first && boxOf(first.outline);
  if (!start || !end || !around) return null;
  const wishes: ChamberRowWishes = {
    layer: start.layer,
    box: {
      left: start.path[0]![0],
      right: end.path.at(-1)![0],
      bottom: around.bottom,
      top: around.top,
    },
    count: there.chambers.length,
    chamberLength: around.right - around.left,
    channelWidth: start.width[0],
  };
  return sameShape(there, build(name, wishes)) ? wishes : null;
}

export const chamberRow: Maker<ChamberRowWishes> = { kind: 'row of chambers', make, read };
