import { useLayoutEffect, useMemo, useRef } from 'react';
import { usePage } from '../page/context.tsx';
import { useAnswer } from '../state/live.ts';
import { useStore } from '../state/store.ts';
import type { Preview } from '../tools/tool.ts';
import { toScreen } from './camera.ts';
import { pointerFigures, pointerSays } from './pointer-figures.ts';

/** What is being made, in figures that can be typed over, beside the pointer. */
export function PointerNote() {
  const { desk, bench } = usePage();
  useStore(bench.hand);
  const view = useStore(desk.view);
  const chip = useStore(desk.project)!.document.chip;
  const note = useRef<HTMLDivElement>(null);
  const size = useRef({ width: 0, height: 0 });
  const preview = bench.preview();
  const answer = useAnswer(desk);
  const figures = useMemo(
    () => pointerFigures(chip, preview.parts ?? [], answer),
    [chip, preview.parts, answer],
  );
  const says = useMemo(
    () => (answer.preview ? pointerSays(preview.parts ?? [], answer, desk.solver.solved.get()) : []),
    [preview.parts, answer, desk],
  );
  const place = anchor(preview, chip.outline.width);
  const shows = Boolean(preview.readout || preview.hint);
  const put = (): void => {
    const element = note.current;
    if (!element || !view.camera) return;
    const [x, y] = toScreen(view.camera, view.size, place ?? [0, 0]);
    const { width, height } = size.current;
    const right = x + 18 + width < view.size.width;
    const left = right ? x + 18 : x - 18 - width;
    const top = y + 18 + height < view.size.height ? y + 18 : y - 18 - height;
    element.style.left = `${Math.max(4, Math.min(left, view.size.width - width - 4))}px`;
    element.style.top = `${Math.max(4, Math.min(top, view.size.height - height - 4))}px`;
  };
  const latest = useRef(put);
  useLayoutEffect(() => {
    latest.current = put;
    put();
  });
  // asked for its size with every move of the hand, the page would be laid out before the answers are painted
  useLayoutEffect(() => {
    const element = note.current;
    if (!shows || !element) return;
    const watch = new ResizeObserver(([entry]) => {
      const box = entry?.borderBoxSize[0];
      if (!box) return;
      size.current = { width: box.inlineSize, height: box.blockSize };
      latest.current();
    });
    watch.observe(element);
    return () => watch.disconnect();
  }, [shows]);
  if (!shows) return null;
  return (
    <div ref={note} className="pointer-note">
      {preview.readout && (
        <dl>
          {[...preview.readout, ...figures].map((line) => (
            <div key={line.name} className="pair">
              <dt>{line.name}</dt>
              <dd className={line.typing ? 'typing' : undefined}>{line.typing || line.figure}</dd>
              {line.fault && <dd className="fault">{line.fault}</dd>}
            </div>
          ))}
        </dl>
      )}
      {says.map((sentence) => (
        <p key={sentence} className="strong-note">
          {sentence}
        </p>
      ))}
      {preview.hint && <p>{preview.hint}</p>}
    </div>
  );
}

function anchor(preview: Preview, width: number): readonly [number, number] | null {
  if (preview.cursor) return preview.cursor;
  const part = preview.parts?.[0];
  if (!part) return [width / 2, 0];
  if (part.kind === 'channel') return part.value.path[0]!;
  return part.kind === 'port' || part.kind === 'via' ? part.value.at : part.value.outline[0]!;
}
