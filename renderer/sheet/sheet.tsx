import { useEffect, useLayoutEffect, useRef } from 'react';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import type { ToolEvent } from '../tools/tool.ts';
import { fitted, INSET, panned, toPlan, toScreen, zoomed } from './camera.ts';
import { Legend } from './legend.tsx';
import { createPicture } from './picture.ts';
import { PointerNote } from './pointer-note.tsx';

/** The camera as it was last fitted: while it is that one, the chip stays fitted to the sheet. */
let fittedCamera: unknown = null;

export function fitChip(desk: ReturnType<typeof usePage>['desk']): void {
  const chip = desk.chip();
  const { size } = desk.view.get();
  if (!chip || size.width === 0) return;
  const { width, height } = chip.outline;
  const camera = fitted({ left: 0, bottom: 0, right: width, top: height }, size, INSET);
  fittedCamera = camera;
  desk.view.patch({ camera });
}

/** The chip, where it is drawn and edited. The same is operable as tables in the ledger. */
export function Sheet() {
  const { desk, bench } = usePage();
  const surface = useRef<HTMLDivElement>(null);
  const box = useRef<HTMLDivElement>(null);
  const tool = useStore(desk.view, (view) => view.tool);
  const name = useStore(desk.project)!.document.chip.name;

  // before the first paint, so that it is of the chip
  useLayoutEffect(() => {
    const element = box.current!;
    const measure = (): void => {
      const { clientWidth: width, clientHeight: height } = element;
      const view = desk.view.get();
      if (width === 0 || (view.size.width === width && view.size.height === height)) return;
      desk.view.patch({ size: { width, height } });
      if (!view.camera || view.camera === fittedCamera) fitChip(desk);
    };
    measure();
    const stop = createPicture(element, desk, bench);
    const watch = new ResizeObserver(measure);
    watch.observe(element);
    const refit = desk.view.subscribe(() => {
      if (!desk.view.get().camera) fitChip(desk);
    });
    // measured already, it would only be drawn twice
    if (!desk.view.get().camera) fitChip(desk);
    return () => {
      watch.disconnect();
      refit();
      stop();
    };
  }, [desk, bench]);

  useEffect(() => watchPointer(surface.current!, desk, bench), [desk, bench]);

  return (
    <main className="sheet">
      <div
        ref={surface}
        className="sheet-surface"
        data-tool={tool}
        // biome-ignore lint/a11y/noNoninteractiveTabindex: drawing is by keys as well
        tabIndex={0}
        role="application"
        aria-label={`Sheet of ${name}: the ${tool} tool. Everything on it is in the tables below.`}
      >
        <div ref={box} className="sheet-surface" />
      </div>
      <Legend />
      <PointerNote />
      <Notice />
    </main>
  );
}

function Notice() {
  const { desk } = usePage();
  const says = useStore(desk.view, (view) => view.says);
  if (!says) return <p className="aside" role="alert" />;
  return (
    <div className="notice" role="alert">
      <p>{says}</p>
      <button type="button" className="verb" onClick={() => desk.say('')}>
        Close
      </button>
    </div>
  );
}

/** Pointer, wheel and touch on the sheet as tool events; the middle button and Space move the view. */
function watchPointer(
  element: HTMLElement,
  desk: ReturnType<typeof usePage>['desk'],
  bench: ReturnType<typeof usePage>['bench'],
): () => void {
  let panning: { x: number; y: number } | null = null;
  let spaced = false;
  const at = (event: PointerEvent | WheelEvent): readonly [number, number] => {
    const { left, top } = element.getBoundingClientRect();
    return [event.clientX - left, event.clientY - top];
  };
  const send = (kind: 'down' | 'move' | 'up', event: PointerEvent): void => {
    const { camera, size } = desk.view.get();
    if (!camera) return;
    const tool: ToolEvent = {
      kind,
      at: toPlan(camera, size, at(event)),
      // some desktops keep Alt with the mouse for themselves
      ...((event.altKey || event.ctrlKey || event.metaKey) && { free: true }),
      ...(event.shiftKey && { extend: true }),
    };
    bench.event(tool);
  };
  const down = (event: PointerEvent): void => {
    element.focus({ preventScroll: true });
    if (event.button === 1 || (event.button === 0 && spaced)) {
      panning = { x: event.clientX, y: event.clientY };
      element.setPointerCapture(event.pointerId);
      event.preventDefault();
      return;
    }
    if (event.button !== 0) return;
    element.setPointerCapture(event.pointerId);
    send('down', event);
  };
  const move = (event: PointerEvent): void => {
    if (panning) {
      const { camera } = desk.view.get();
      if (camera)
        desk.view.patch({ camera: panned(camera, event.clientX - panning.x, event.clientY - panning.y) });
      panning = { x: event.clientX, y: event.clientY };
      return;
    }
    send('move', event);
  };
  const up = (event: PointerEvent): void => {
    if (panning) {
      panning = null;
      return;
    }
    if (event.button === 0) send('up', event);
  };
  const wheel = (event: WheelEvent): void => {
    event.preventDefault();
    const { camera, size } = desk.view.get();
    if (!camera) return;
    const lines = event.deltaMode === 1 ? 16 : 1;
    if (event.shiftKey)
      desk.view.patch({ camera: panned(camera, -(event.deltaX || event.deltaY) * lines, 0) });
    else if (Math.abs(event.deltaX) > Math.abs(event.deltaY) && !event.ctrlKey)
      desk.view.patch({ camera: panned(camera, -event.deltaX * lines, -event.deltaY * lines) });
    else
      desk.view.patch({
        camera: zoomed(
          camera,
          size,
          at(event),
          Math.exp(-event.deltaY * lines * (event.ctrlKey ? 0.01 : 0.0015)),
        ),
      });
  };
  const space = (event: KeyboardEvent): void => {
    if (event.key !== ' ' || event.target !== element) return;
    // in the middle of a typed figure it is a space
    if (event.type === 'keydown' && bench.preview().readout?.some((line) => line.typing)) return;
    spaced = event.type === 'keydown';
    element.dataset.panning = String(spaced);
    event.preventDefault();
  };
  const listeners = [
    ['pointerdown', down],
    ['pointermove', move],
    ['pointerup', up],
    ['pointercancel', up],
    ['wheel', wheel],
    ['keydown', space],
    ['keyup', space],
  ] as const;
  for (const [kind, listener] of listeners)
    element.addEventListener(kind, listener as EventListener, { passive: false });
  return () => {
    for (const [kind, listener] of listeners) element.removeEventListener(kind, listener as EventListener);
  };
}

/** Where on the page's own screen a place of the plan lies; for what is shown beside it. */
export const onSheet = (desk: ReturnType<typeof usePage>['desk'], place: readonly [number, number]) => {
  const { camera, size } = desk.view.get();
  return camera && toScreen(camera, size, place);
};
