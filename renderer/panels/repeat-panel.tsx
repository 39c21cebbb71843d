import { useState } from 'react';
import { QuantityField } from '../card/quantity-field.tsx';
import { boxOfParts, findParts } from '../edits/parts.ts';
import { array, offset, turn } from '../edits/shape.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';

/** Turning by an angle, copies along a pitch, and channels laid beside others. */
export function RepeatPanel() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const selection = useStore(desk.view, (view) => view.selection);
  const box = boxOfParts(findParts(chip, selection));
  const [angle, setAngle] = useState(45);
  const [count, setCount] = useState(4);
  const [right, setRight] = useState(0);
  const [up, setUp] = useState(box ? -Math.max(1_000_000, (box.top - box.bottom) * 1.5) : -2_000_000);
  const [beside, setBeside] = useState(1_000_000);
  const [says, setSays] = useState('');
  const run = (made: ReturnType<typeof array>): void => {
    setSays(typeof made === 'string' ? made : (desk.attempt(made) ?? ''));
  };
  const nm = (metres: number): number => Math.round(metres * 1e9);
  return (
    <>
      <section aria-label="Turn" className="fields">
        <h3>Turn about their middle</h3>
        <QuantityField
          label="Angle, to the left"
          value={angle}
          kind="angle"
          unit="deg"
          onAccept={(value) => {
            if (Math.abs(value) > 360) return 'Takes an angle from −360° to 360°.';
            setAngle(value);
            return null;
          }}
        />
        <button
          type="button"
          className="strong-button"
          onClick={() => run(angle % 360 === 0 ? 'That angle turns nothing.' : turn(chip, selection, angle))}
        >
          Turn
        </button>
      </section>
      <section aria-label="Array" className="fields">
        <h3>Array along a pitch</h3>
        <QuantityField
          label="How many in all"
          value={count}
          kind="number"
          counts
          onAccept={(value) => {
            if (!Number.isInteger(value) || value < 2 || value > 1000)
              return 'Takes a whole number from 2 to 1000.';
            setCount(value);
            return null;
          }}
        />
        <QuantityField
          label="To the right"
          value={right / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) => {
            setRight(nm(value));
            return null;
          }}
        />
        <QuantityField
          label="Upward"
          value={up / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) => {
            setUp(nm(value));
            return null;
          }}
        />
        <button
          type="button"
          className="strong-button"
          onClick={() => run(array(chip, selection, count, [right, up]))}
        >
          Repeat
        </button>
      </section>
      <section aria-label="Offset" className="fields">
        <h3>A channel beside</h3>
        <QuantityField
          label="Away, to the left"
          value={beside / 1e9}
          kind="length"
          unit="mm"
          onAccept={(value) => {
            setBeside(nm(value));
            return null;
          }}
        />
        <button type="button" className="strong-button" onClick={() => run(offset(chip, selection, beside))}>
          Lay beside
        </button>
      </section>
      {says && (
        <p className="fault" role="alert">
          {says}
        </p>
      )}
    </>
  );
}
