import type { Xy } from '../geometry/vector.ts';
import type { Palette } from '../look/tokens.ts';
import { type Camera, type Size, toScreen } from '../sheet/camera.ts';
import type { Desk } from '../state/desk.ts';
import { createStore, type Store } from '../state/store.ts';

/** A picture to trace, under the channels: of this sitting alone, never part of the chip. */
export interface Underlay {
  readonly name: string;
  readonly image: HTMLImageElement;
  /** Place of its lower left corner on the plan, nm. */
  readonly x: number;
  readonly y: number;
  /** nm per pixel of the picture. */
  readonly scale: number;
  /** 0 to 1 */
  readonly opacity: number;
  /** Places of the plan whose distance is to be given, nm: none, one or two. */
  readonly picked: readonly Xy[];
}

const UNDERLAYS = new WeakMap<Desk, Store<Underlay | null>>();

export function underlayOf(desk: Desk): Store<Underlay | null> {
  let store = UNDERLAYS.get(desk);
  if (!store) {
    store = createStore<Underlay | null>(null);
    UNDERLAYS.set(desk, store);
  }
  return store;
}

/** Half the arms of the cross on a place that was picked, px. */
const ARM = 8;

/** The places that were picked to scale the picture by, each a cross, and what lies between them. */
export function drawPicked(
  ctx: CanvasRenderingContext2D,
  desk: Desk,
  camera: Camera,
  size: Size,
  { ink, chip }: Palette,
): void {
  const at = (underlayOf(desk).get()?.picked ?? []).map((place) => toScreen(camera, size, place));
  const draw = (colour: string, width: number): void => {
    ctx.strokeStyle = colour;
    ctx.lineWidth = width;
    ctx.beginPath();
    for (const [x, y] of at) {
      ctx.moveTo(x - ARM, y);
      ctx.lineTo(x + ARM, y);
      ctx.moveTo(x, y - ARM);
      ctx.lineTo(x, y + ARM);
    }
    const [first, second] = at;
    if (first && second) {
      ctx.moveTo(...first);
      ctx.lineTo(...second);
    }
    ctx.stroke();
  };
  ctx.save();
  // seen on a dark photograph as on a light one
  draw(chip, 4);
  draw(ink, 1.5);
  ctx.restore();
}

export function drawUnderlay(ctx: CanvasRenderingContext2D, desk: Desk, camera: Camera, size: Size): void {
  const underlay = underlayOf(desk).get();
  if (!underlay) return;
  const { image, x, y, scale, opacity } = underlay;
  const [width, height] = [image.naturalWidth * scale, image.naturalHeight * scale];
  const [left, top] = toScreen(camera, size, [x, y + height]);
  ctx.save();
  ctx.globalAlpha = opacity;
  ctx.drawImage(image, left, top, width * camera.scale, height * camera.scale);
  ctx.restore();
}

/** Most bytes of a picture. */
const MOST = 64 * 1024 * 1024;

/** A picture from a file, as wide as the chip; or why not. */
export async function readUnderlay(file: File, chip: { readonly width: number }): Promise<Underlay | string> {
  if (!/^image\/(png|jpeg)$/.test(file.type)) return 'A picture to trace is a PNG or a JPEG.';
  if (file.size > MOST) return 'The picture is larger than 64 MB; give a smaller one.';
  const image = new Image();
  image.src = URL.createObjectURL(file);
  try {
    await image.decode();
  } catch {
    URL.revokeObjectURL(image.src);
    return 'The picture cannot be read; save it once more as PNG or JPEG.';
  }
  const scale = chip.width / image.naturalWidth;
  return { name: file.name, image, x: 0, y: 0, scale, opacity: 0.5, picked: [] };
}

/** A length on the plan, nm, to the fifth figure of the picture's width: finer than its pixels. */
export function told({ image, scale }: Underlay, nm: number): number {
  const finest = 10 ** (Math.floor(Math.log10(image.naturalWidth * scale)) - 4);
  return finest >= 1 ? Math.round(nm / finest) * finest : Math.round(nm);
}

/** The picture scaled so that two places of the plan lie `distance` nm apart; the first stays where it is. */
export function scaledBy(
  underlay: Underlay,
  [first, second]: readonly [readonly [number, number], readonly [number, number]],
  distance: number,
): Underlay | string {
  const apart = Math.hypot(second[0] - first[0], second[1] - first[1]);
  if (!(apart > 0) || !(distance > 0))
    return 'The two points must lie apart, and so must their true distance.';
  const factor = distance / apart;
  return {
    ...underlay,
    scale: underlay.scale * factor,
    x: Math.round(first[0] - (first[0] - underlay.x) * factor),
    y: Math.round(first[1] - (first[1] - underlay.y) * factor),
  };
}
