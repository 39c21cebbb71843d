import type { Chip } from '../../solver/chip/chip.ts';
import { drawPicked, drawUnderlay, underlayOf } from '../bring-in/underlay.ts';
import { boxOfParts, findPart } from '../edits/parts.ts';
import type { Xy } from '../geometry/vector.ts';
import { motionAllowed, onMotion } from '../look/motion.ts';
import { onTheme, palette, scheme } from '../look/theme.ts';
import type { Desk } from '../state/desk.ts';
import { shownAnswer } from '../state/live.ts';
import type { Workbench } from '../state/workbench.ts';
import { Bodies } from './bodies.ts';
import { inView, toScreen } from './camera.ts';
import { CellArt } from './cell-art.ts';
import { drawChannelWords } from './channel-words.ts';
import { drawEdge, drawScaleBar, takeEdge } from './edge.ts';
import { type Directions, directionsOf, drawFlowMarks } from './flow-marks.ts';
import { paintHand } from './hand-paint.ts';
import { drawKeepOuts } from './keep-outs.ts';
import { drawPorts } from './marks.ts';
import { type Shown, shown } from './overlay.ts';
import { createPainter } from './painter.ts';
import { drawPlaceWords } from './place-words.ts';
import { drawPortWords } from './port-words.ts';
import { Room } from './room.ts';
import { chamberShades, makeScene, type Scene, shadesOf } from './scene.ts';
import { Spatial } from './spatial.ts';
import { type PlaceWords, type PortWords, placeWords, portWords } from './words.ts';

/** Derived from chip and result, kept until one of them changes. */
interface Derived {
  readonly chip: Chip;
  readonly key: readonly unknown[];
  readonly scene: Scene;
  readonly spatial: Spatial;
  /** Of what is being dragged. */
  readonly live: boolean;
  readonly shown: Shown;
  readonly bodies: Bodies;
  readonly directions: Directions;
  readonly ports: readonly PortWords[];
  readonly places: readonly PlaceWords[];
}

/** Joins the desk to the canvas: what changes is drawn at the next frame, once. */
export function createPicture(container: HTMLDivElement, desk: Desk, bench: Workbench): () => void {
  let derived: Derived | null = null;

  const derive = (): Derived | null => {
    const open = desk.chip();
    if (!open) return null;
    const live = desk.solver.live.get();
    // what is dragged is drawn as it would be, with what would come of it
    const solved = shownAnswer(live, desk.solver.solved.get());
    const chip = live?.chip ?? open;
    const { overlay } = desk.view.get();
    const key = [chip, solved.graph, solved.result, overlay];
    if (derived && key.every((value, i) => value === derived!.key[i])) return derived;
    const old = derived;
    const scene =
      old && old.chip === chip && old.key[1] === solved.graph
        ? old.scene
        : makeScene(chip, solved.graph, solved.graphChip);
    const coloured = shown(overlay, solved.chip ?? chip, solved.result, solved.graph);
    derived = {
      chip,
      key,
      scene,
      spatial: live ? new Spatial(chip) : desk.spatial(),
      live: live !== null,
      shown: coloured,
      bodies: new Bodies(scene, shadesOf(scene, coloured), chamberShades(chip, coloured)),
      directions: overlay === 'speed' ? directionsOf(solved.result) : new Map(),
      ports: portWords(chip, solved.result),
      places: placeWords(chip, solved.result, (where) => {
        // a junction is marked where it is worst
        const peak = solved.result?.cells.find((cell) => cell.id === where)?.peakAt;
        if (peak) return [peak[0] * 1e9, peak[1] * 1e9];
        return solved.graph?.sites.find((site) => site.name === where)?.at ?? placeOf(chip, where);
      }),
    };
    return derived;
  };

  const frame = (draw: (d: Derived, view: View) => void) => (): void => {
    const d = derive();
    const { camera, size } = desk.view.get();
    if (d && camera && size.width > 0) draw(d, { camera, size });
  };
  type View = {
    readonly camera: NonNullable<ReturnType<typeof desk.view.get>['camera']>;
    readonly size: { width: number; height: number };
  };

  const art = new CellArt(desk, () => painter.redraw('chip'));
  let told: View | null = null;
  /** The solving thread hears what is on screen, once for each view. */
  const tellView = (camera: View['camera'], size: View['size']): void => {
    if (told?.camera === camera && told.size === size) return;
    told = { camera, size };
    desk.solver.look(inView(camera, size));
  };
  const painter = createPainter(container, desk.view.get().size, {
    chip: (ctx) =>
      frame((d, { camera, size }) => {
        const look = palette();
        tellView(camera, size);
        ctx.fillStyle = look.sheet;
        ctx.fillRect(0, 0, size.width, size.height);
        drawEdge(ctx, d.chip, camera, size, look);
        drawUnderlay(ctx, desk, camera, size);
        drawKeepOuts(ctx, d.chip, camera, size, look);
        d.bodies.draw(ctx, camera, size, d.spatial, {
          scheme: scheme(),
          palette: look,
          ramp: d.shown.ramp,
        });
        art.draw(ctx, d.shown, camera, size, look);
      })(),
    flow: (ctx) =>
      frame((d, { camera, size }) => {
        if (d.shown.overlay !== 'speed') return;
        const seconds = motionAllowed() ? performance.now() / 1000 : null;
        drawFlowMarks(ctx, d.scene, d.shown, d.directions, camera, size, palette(), d.spatial, seconds);
      })(),
    marks: (ctx) =>
      frame((d, { camera, size }) => {
        const look = palette();
        drawPorts(ctx, d.chip, camera, size, look);
        const room = new Room();
        const edge = new Room();
        takeEdge(edge, d.chip, camera, size);
        takeFoot(room, size);
        for (const port of d.chip.ports) {
          const [x, y] = toScreen(camera, size, port.at);
          room.fill(x - 6, y - 6, 12, 12);
        }
        // what a finding says of something in the hand stands at the pointer
        drawPlaceWords(
          ctx,
          d.places,
          camera,
          size,
          look,
          room,
          edge,
          d.spatial,
          (entry) => !d.live || entry.alarm,
        );
        const onPicture = underlayOf(desk).get() !== null;
        drawPortWords(ctx, d.ports, camera, size, look, room, edge, d.spatial, onPicture);
        drawChannelWords(ctx, d.scene, d.shown, camera, size, look, room, d.spatial, onPicture);
        drawScaleBar(ctx, camera, size, look);
        drawPicked(ctx, desk, camera, size, look);
      })(),
    hand: (ctx) =>
      frame((d, { camera, size }) => {
        paintHand(ctx, d.chip, desk.view.get().selection, bench.preview(), camera, size, palette(), d.live);
      })(),
  });

  const showFlow = (): void => painter.show('flow', desk.view.get().overlay === 'speed');
  const drawAll = (): void => painter.redraw('chip', 'flow', 'marks', 'hand');
  let answer = desk.solver.solved.get();
  const drawAnswer = (): void => {
    const before = answer;
    answer = desk.solver.solved.get();
    // that one is on its way changes nothing either
    if (answer.chip === before.chip && answer.result === before.result && answer.graph === before.graph)
      return;
    painter.redraw('chip', 'flow', 'marks');
  };
  let seen = desk.view.get();
  const stops = [
    desk.view.subscribe(() => {
      const view = desk.view.get();
      const before = seen;
      seen = view;
      if (view.size !== before.size) painter.resize(view.size);
      if (view.overlay !== before.overlay) showFlow();
      if (view.camera !== before.camera) painter.redraw('chip', 'flow', 'marks', 'hand');
      else if (view.overlay !== before.overlay || view.streamlines !== before.streamlines)
        painter.redraw('chip', 'flow', 'marks');
      if (view.selection !== before.selection || view.tool !== before.tool) painter.redraw('hand');
    }),
    underlayOf(desk).subscribe(() => painter.redraw('chip', 'marks')),
    desk.drawn.sheet.subscribe(drawAll),
    desk.solver.solved.subscribe(drawAnswer),
    desk.solver.live.subscribe(drawAll),
    bench.hand.subscribe(() => painter.redraw('hand')),
    onTheme(drawAll),
  ];
  // the marks of the flow move while speed is shown, thirty times a second, and only where motion is allowed
  let even = false;
  let ticking = 0;
  const tick = (): void => {
    ticking = 0;
    even = !even;
    if (even) painter.redraw('flow');
    start();
  };
  const start = (): void => {
    const moves = desk.view.get().overlay === 'speed' && desk.solver.solved.get().result && motionAllowed();
    if (moves && ticking === 0) ticking = requestAnimationFrame(tick);
  };
  start();
  stops.push(
    desk.view.subscribe(start),
    desk.solver.solved.subscribe(start),
    onMotion(() => {
      painter.redraw('flow');
      start();
    }),
    () => cancelAnimationFrame(ticking),
  );
  const fonts = (): void => painter.redraw('marks', 'chip');
  document.fonts.addEventListener('loadingdone', fonts);
  showFlow();
  painter.drawNow();
  return () => {
    document.fonts.removeEventListener('loadingdone', fonts);
    for (const stop of stops) stop();
    painter.destroy();
  };
}

/** px at the foot of the sheet that the legend and the bar of the scale stand on. */
const LEGEND = { from: 30, wide: 520, high: 52 } as const;
const SCALE = { wide: 150, high: 46 } as const;

/** What would be written under the legend could not be read. */
function takeFoot(room: Room, { width, height }: { readonly width: number; readonly height: number }): void {
  const wide = Math.min(LEGEND.wide, width - LEGEND.from - SCALE.wide - 60);
  if (wide > 0) room.fill(LEGEND.from, height - LEGEND.high, wide, LEGEND.high);
  room.fill(width - SCALE.wide, height - SCALE.high, SCALE.wide, SCALE.high);
}

/** Where a part, a piece or a place read from the chip lies; its middle. */
export function placeOf(chip: Chip, where: string): Xy | null {
  const id = where.replace(/#\d+$/, '');
  for (const kind of ['channel', 'port', 'chamber', 'via', 'keep-out']) {
    const part = findPart(chip, where.includes(':') ? where : `${kind}:${id}`);
    if (!part) continue;
    if (part.kind === 'channel') {
      const { path } = part.value;
      const i = Math.floor((path.length - 1) / 2);
      return [(path[i]![0] + path[i + 1]![0]) / 2, (path[i]![1] + path[i + 1]![1]) / 2];
    }
    const box = boxOfParts([part]);
    return box && [(box.left + box.right) / 2, (box.bottom + box.top) / 2];
  }
  return null;
}
