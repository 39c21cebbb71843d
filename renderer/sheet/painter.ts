import { Konva } from 'konva/lib/Core';
import { Layer } from 'konva/lib/Layer';
import { Shape } from 'konva/lib/Shape';
import { Stage } from 'konva/lib/Stage';
import type { Size } from './camera.ts';

export type Paint = (ctx: CanvasRenderingContext2D) => void;

/** Sheets of paint one over the other, each one shape that draws all it has. */
export const SHEETS = ['chip', 'flow', 'marks', 'hand'] as const;
export type SheetName = (typeof SHEETS)[number];

/** The canvas behind the sheet: konva keeps it sharp and drawn once a frame, nothing more. */
export interface Painter {
  resize(size: Size): void;
  /** Draws again at the next frame. */
  redraw(...sheets: SheetName[]): void;
  /** A sheet that has nothing on it is better away: it would be laid over the others in every frame all the same. */
  show(sheet: SheetName, shown: boolean): void;
  /** Draws at once. */
  drawNow(): void;
  destroy(): void;
}

export function createPainter(
  container: HTMLDivElement,
  size: Size,
  paints: Readonly<Record<SheetName, Paint>>,
): Painter {
  Konva.autoDrawEnabled = false;
  const stage = new Stage({ container, width: size.width, height: size.height, listening: false });
  const layers = new Map<SheetName, Layer>();
  for (const name of SHEETS) {
    const layer = new Layer({ listening: false });
    const shape = new Shape({
      listening: false,
      perfectDrawEnabled: false,
      sceneFunc: (context) => paints[name](context._context),
    });
    // in this order: a layer that is added is drawn at once, and the first frame draws all there is
    stage.add(layer);
    layer.add(shape);
    layers.set(name, layer);
  }
  return {
    resize(next) {
      stage.size(next);
      for (const layer of layers.values()) layer.batchDraw();
    },
    redraw(...sheets) {
      for (const name of sheets) layers.get(name)!.batchDraw();
    },
    show(name, shown) {
      layers.get(name)!.visible(shown);
    },
    drawNow() {
      for (const layer of layers.values()) layer.draw();
    },
    destroy: () => stage.destroy(),
  };
}
