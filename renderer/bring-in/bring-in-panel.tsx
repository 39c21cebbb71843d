import { useEffect, useRef, useState } from 'react';
import type { BringInOutcome, BringInSettings, DrawingSummary } from '../../main/contract/bring-in.ts';
import type { Input } from '../../main/contract/contract.ts';
import { NM_PER_M, unitSize } from '../../solver/chip/units.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { choosePlace } from '../commands/files.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import './bring-in.css';
import { Brought } from './brought.tsx';
import { takeWaiting } from './dropped.ts';
import { type Running, runJob } from './job.ts';
import { type LayerWish, LayerWishes } from './layer-wishes.tsx';
import { broughtIn } from './put-on-sheet.ts';
import { UnderlayFields } from './underlay-fields.tsx';

const UNITS = ['um', 'mm', 'in', 'mil', 'nm', 'cm', 'm'] as const;
type Source = Input<'bringIn.start'>['file'];

interface Looked {
  readonly source: Source;
  readonly name: string;
  readonly summary: DrawingSummary;
}

/** A drawing read, its layers told apart, its channels found, and put on the sheet as one edit. */
export function BringInPanel() {
  const { desk } = usePage();
  const chip = useStore(desk.project)!.document.chip;
  const picker = useRef<HTMLInputElement>(null);
  const running = useRef<Running | null>(null);
  const [step, setStep] = useState<{ part: number; says: string } | null>(null);
  const [says, setSays] = useState('');
  const [looked, setLooked] = useState<Looked | null>(null);
  const [unit, setUnit] = useState('');
  const [depth, setDepth] = useState((chip.layers[0]?.depth ?? 50_000) / NM_PER_M);
  const [lineWidth, setLineWidth] = useState<number | null>(null);
  const [ends, setEnds] = useState(true);
  const [wishes, setWishes] = useState<Readonly<Record<string, LayerWish>>>({});
  const [outcome, setOutcome] = useState<BringInOutcome | null>(null);
  const [inPlace, setInPlace] = useState(chip.channels.length === 0 && chip.chambers.length === 0);
  useEffect(() => () => running.current?.cancel(), []);

  /** Runs a job and hands over what comes of it, or says why nothing does. */
  const work = async (source: Source, settings: BringInSettings | null) => {
    running.current?.cancel();
    setSays('');
    setOutcome(null);
    setStep({ part: 0, says: 'Reading the drawing' });
    const job = runJob(desk.client, source, settings, (part, words) => setStep({ part, says: words }));
    running.current = job;
    try {
      const taken = await job.taken;
      if (!taken && running.current === job) setSays('Cancelled; nothing was brought in.');
      return taken;
    } catch (error) {
      const where = error instanceof Problem && error.where ? `${error.where}: ` : '';
      setSays(
        error instanceof Problem
          ? `${where}${error.what} ${error.remedy}`
          : 'That did not work. Try it once more.',
      );
      return null;
    } finally {
      if (running.current === job) {
        running.current = null;
        setStep(null);
      }
    }
  };

  const look = async (source: Source, name: string): Promise<void> => {
    setLooked(null);
    const taken = await work(source, null);
    if (!taken?.summary) return;
    setLooked({ source, name, summary: taken.summary });
    setUnit(taken.summary.unit === null ? '' : 'as the file says');
    setWishes({});
  };
  const lookAt = async (file: File): Promise<void> => {
    await look({ name: file.name.slice(0, 200), bytes: new Uint8Array(await file.arrayBuffer()) }, file.name);
  };
  // biome-ignore lint/correctness/useExhaustiveDependencies: a file that was dropped is taken once
  useEffect(() => {
    const file = takeWaiting(desk);
    if (file) void lookAt(file);
  }, []);

  const choose = async (): Promise<void> => {
    const path = await choosePlace(desk, {
      purpose: 'open',
      title: 'Open a drawing',
      kind: 'Drawing',
      extensions: ['dxf', 'svg', 'gds', 'gds2', 'gdsii'],
    });
    if (path) await look({ path }, path.replace(/^.*[\\/]/, ''));
  };

  const find = async (): Promise<void> => {
    if (!looked) return;
    if (unit === '') {
      setSays('The file does not say what its numbers are in: choose the unit first.');
      return;
    }
    const nm = Math.round(depth * NM_PER_M);
    const roles = Object.fromEntries(
      looked.summary.layers.map(({ name, role }) => {
        const wish = wishes[name] ?? { role, depth: nm, layer: name };
        return wish.role === 'cavity'
          ? [name, { kind: 'cavity' as const, depth: wish.depth ?? nm, layer: wish.layer || name }]
          : [name, { kind: wish.role }];
      }),
    );
    const taken = await work(looked.source, {
      unit: unit === 'as the file says' ? null : unitSize(unit),
      depth: nm,
      roles,
      lineWidth: lineWidth === null ? null : Math.round(lineWidth * NM_PER_M),
      portsAtEnds: ends,
    });
    setOutcome(taken?.outcome ?? null);
  };

  const put = (): void => {
    if (!outcome || !looked) return;
    const why = desk.attempt(broughtIn(chip, outcome.chip, looked.name, inPlace));
    setSays(why ?? 'It is on the sheet; undo takes all of it back.');
    if (why === null) desk.view.patch({ camera: null, selection: [] });
  };

  return (
    <div className="bring-in">
      <p className="soft">
        A drawing as DXF, SVG or GDSII: its regions become channels with widths and centrelines where they are
        ones, chambers where not.
      </p>
      <div className="row">
        <button type="button" className="plain-button" onClick={choose}>
          Open a drawing
        </button>
        <button type="button" className="plain-button" onClick={() => picker.current?.click()}>
          Take one from here
        </button>
        <input
          ref={picker}
          type="file"
          accept=".dxf,.svg,.gds,.gds2,.gdsii"
          aria-label="A drawing to bring in"
          className="aside"
          tabIndex={-1}
          onChange={(event) => {
            const file = event.target.files?.[0];
            event.target.value = '';
            if (file) void lookAt(file);
          }}
        />
      </div>
      {step && (
        <div role="status">
          <p>{step.says} …</p>
          <progress max={1} value={step.part} aria-label={step.says} />
          <button type="button" className="plain-button" onClick={() => running.current?.cancel()}>
            Cancel
          </button>
        </div>
      )}
      {says && (
        <p className="fault" role="alert">
          {says}
        </p>
      )}
      {looked && (
        <section className="fields" aria-label="The drawing">
          <h3>{looked.name}</h3>
          <p className="soft small">
            {looked.summary.drawing}, {looked.summary.entities.toLocaleString('en')} entities.{' '}
            {looked.summary.unitSays}
          </p>
          <div className="field">
            <label htmlFor="drawing-unit">One unit is</label>
            <select
              id="drawing-unit"
              value={unit}
              onChange={(event) => {
                setUnit(event.target.value);
                setOutcome(null);
              }}
            >
              {looked.summary.unit === null ? (
                <option value="">not said: choose</option>
              ) : (
                <option>as the file says</option>
              )}
              {UNITS.map((name) => (
                <option key={name} value={name}>
                  1 {name.replace('um', 'µm')}
                </option>
              ))}
            </select>
          </div>
          <QuantityField
            label="Depth"
            value={depth}
            kind="length"
            unit="um"
            onAccept={(value) => {
              if (!(value > 0 && value <= 0.1)) return 'Takes a length above zero, of at most 100 mm.';
              setDepth(value);
              return null;
            }}
          />
          <QuantityField
            label="Width of bare lines"
            value={lineWidth}
            kind="length"
            unit="um"
            onEmpty={() => {
              setLineWidth(null);
              return null;
            }}
            onAccept={(value) => {
              if (!(value > 0 && value <= 0.1))
                return 'Takes a length above zero, or nothing: then they are left out.';
              setLineWidth(value);
              return null;
            }}
          />
          <LayerWishes
            layers={looked.summary.layers}
            wishes={wishes}
            depth={depth}
            onChange={(name, wish) => {
              setWishes({ ...wishes, [name]: wish });
              setOutcome(null);
            }}
          />
          <label className="check">
            <input type="checkbox" checked={ends} onChange={(event) => setEnds(event.target.checked)} /> ports
            at free ends where no layer holds holes
          </label>
          <button type="button" className="strong-button" onClick={find} disabled={step !== null}>
            Find channels
          </button>
        </section>
      )}
      {outcome && (
        <>
          <Brought outcome={outcome} />
          <label className="check">
            <input type="checkbox" checked={inPlace} onChange={(event) => setInPlace(event.target.checked)} />{' '}
            in place of what is on the sheet
          </label>
          <button type="button" className="strong-button" onClick={put}>
            Put on the sheet
          </button>
        </>
      )}
      <UnderlayFields />
    </div>
  );
}
