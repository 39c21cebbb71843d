import { useEffect, useRef, useState } from 'react';
import { metres, NM_PER_M } from '../../solver/chip/units.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { usePage } from '../page/context.tsx';
import { toPlan } from '../sheet/camera.ts';
import { useStore } from '../state/store.ts';
import { readUnderlay, scaledBy, told, underlayOf } from './underlay.ts';

/** A picture of a chip under the sheet, to trace: scaled by two points, or by its width. */
export function UnderlayFields() {
  const { desk } = usePage();
  const store = underlayOf(desk);
  const underlay = useStore(store);
  const chip = useStore(desk.project)!.document.chip;
  const picker = useRef<HTMLInputElement>(null);
  const [says, setSays] = useState('');
  const [picking, setPicking] = useState(false);
  const points = underlay?.picked ?? [];

  useEffect(() => {
    const surface = document.querySelector<HTMLElement>('.sheet-surface[role="application"]');
    if (!picking || !surface) return;
    const press = (event: PointerEvent): void => {
      const { camera, size } = desk.view.get();
      if (!camera || event.button !== 0) return;
      event.stopImmediatePropagation();
      event.preventDefault();
      const { left, top } = surface.getBoundingClientRect();
      const at = toPlan(camera, size, [event.clientX - left, event.clientY - top]);
      const before = store.get();
      if (before && before.picked.length < 2) store.set({ ...before, picked: [...before.picked, at] });
    };
    surface.addEventListener('pointerdown', press, { capture: true });
    return () => surface.removeEventListener('pointerdown', press, { capture: true });
  }, [picking, desk, store]);
  useEffect(() => {
    if (points.length === 2) setPicking(false);
  }, [points.length]);

  const take = async (file: File): Promise<void> => {
    const read = await readUnderlay(file, chip.outline);
    if (typeof read === 'string') {
      setSays(read);
      return;
    }
    setSays('');
    drop();
    store.set(read);
  };
  const drop = (): void => {
    const before = store.get();
    if (before) URL.revokeObjectURL(before.image.src);
    store.set(null);
    setPicking(false);
  };
  const length = (label: string, nm: number, apply: (nm: number) => string | null) => (
    <QuantityField
      label={label}
      value={metres(underlay ? told(underlay, nm) : nm)}
      kind="length"
      unit="mm"
      onAccept={(value) =>
        Math.abs(value) <= 1 ? apply(value * NM_PER_M) : 'Takes a length of at most 1 m.'
      }
    />
  );
  const [first, second] = points;
  const apart = first && second ? Math.hypot(second[0] - first[0], second[1] - first[1]) : 0;

  return (
    <section className="fields" aria-label="Picture to trace">
      <h3>Picture to trace</h3>
      <p className="soft small">
        A PNG or JPEG under the channels, for as long as this page is open: it is no part of the chip.
      </p>
      <button type="button" className="plain-button" onClick={() => picker.current?.click()}>
        {underlay ? 'Take another picture' : 'Take a picture'}
      </button>
      <input
        ref={picker}
        type="file"
        accept="image/png,image/jpeg"
        aria-label="A picture to trace"
        className="aside"
        tabIndex={-1}
        onChange={(event) => {
          const file = event.target.files?.[0];
          event.target.value = '';
          if (file) void take(file);
        }}
      />
      {says && (
        <p className="fault" role="alert">
          {says}
        </p>
      )}
      {underlay && (
        <>
          <p className="small">{underlay.name}</p>
          <div className="field">
            <label htmlFor="underlay-opacity">Strength</label>
            <input
              id="underlay-opacity"
              type="range"
              min={5}
              max={100}
              value={Math.round(underlay.opacity * 100)}
              onChange={(event) => store.set({ ...underlay, opacity: Number(event.target.value) / 100 })}
            />
          </div>
          <p className="small" role="status">
            {picking
              ? `Press the ${points.length === 0 ? 'first' : 'second'} point on the sheet.`
              : points.length === 2
                ? 'Give the true distance of the two points.'
                : 'Scale it by two points on the sheet whose distance you know, or by its width.'}
          </p>
          <button
            type="button"
            className="plain-button"
            aria-pressed={picking}
            onClick={() => {
              store.set({ ...underlay, picked: [] });
              setPicking(!picking);
            }}
          >
            Pick two points
          </button>
          {first &&
            second &&
            length('They are apart by', apart, (nm) => {
              const scaled = scaledBy(underlay, [first, second], nm);
              if (typeof scaled === 'string') return scaled;
              store.set({ ...scaled, picked: [] });
              return null;
            })}
          {length('Its width', underlay.scale * underlay.image.naturalWidth, (nm) => {
            if (!(nm > 0)) return 'Takes a length above zero.';
            store.set({ ...underlay, scale: nm / underlay.image.naturalWidth });
            return null;
          })}
          {length('Left edge at', underlay.x, (nm) => {
            store.set({ ...underlay, x: nm });
            return null;
          })}
          {length('Lower edge at', underlay.y, (nm) => {
            store.set({ ...underlay, y: nm });
            return null;
          })}
          <button type="button" className="plain-button" onClick={drop}>
            Take the picture away
          </button>
        </>
      )}
    </section>
  );
}
