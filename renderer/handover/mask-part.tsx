import { useState } from 'react';
import type { Output } from '../../main/contract/contract.ts';
import type { MaskFormat, MaskOptions } from '../../main/contract/mask.ts';
import type { Kind } from '../../solver/chip/units.ts';
import { metres, NM_PER_M } from '../../solver/chip/units.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';
import { usePage } from '../page/context.tsx';
import { counted, figure } from '../words/figure.ts';
import { placeFor } from './answer.ts';
import { follow } from './jobs.ts';
import { troubleWords } from './note-part.tsx';

const FORMATS = [
  ['dxf', 'DXF'],
  ['gdsii', 'GDSII'],
  ['svg', 'SVG'],
  ['pdf', 'PDF, true size'],
] as const;
const ENDINGS: Readonly<Record<MaskFormat, string>> = { dxf: 'dxf', gdsii: 'gds', svg: 'svg', pdf: 'pdf' };
const FIELDS = [
  ['dark-field', 'dark field'],
  ['clear-field', 'clear field'],
] as const;
const SIDES = [
  ['no', 'as drawn'],
  ['yes', 'mirrored'],
] as const;
const YES_NO = [
  ['yes', 'yes'],
  ['no', 'no'],
] as const;

type Report = Output<'mask.take'>['report'];

/** Null is "as the program takes it where nothing is said"; lengths in whole nm. */
interface Wish {
  readonly format: MaskFormat;
  readonly polarity: NonNullable<MaskOptions['polarity']>;
  readonly mirror: boolean;
  readonly undercut: number | null;
  readonly shrink: number | null;
  readonly lane: number | null;
  readonly marks: boolean;
  readonly pads: boolean;
  readonly wafer: number | null;
  readonly edge: number;
  readonly pitch: readonly [number | null, number | null];
}

const EDGE = 3_000_000;
const FIRST: Wish = {
  format: 'dxf',
  polarity: 'dark-field',
  mirror: false,
  undercut: null,
  shrink: null,
  lane: null,
  marks: true,
  pads: false,
  wafer: null,
  edge: EDGE,
  pitch: [null, null],
};

/** A person's last choice, for this sitting. */
let habit = FIRST;

function optionsOf({
  polarity,
  mirror,
  undercut,
  shrink,
  lane,
  marks,
  pads,
  wafer,
  edge,
  pitch,
}: Wish): MaskOptions {
  const [right, up] = pitch;
  return {
    polarity,
    mirror,
    marks,
    pads,
    ...(undercut !== null && { undercut }),
    ...(shrink !== null && { shrink }),
    ...(lane !== null && { lane }),
    ...(wafer !== null && {
      wafer: {
        diameter: wafer,
        edge,
        ...(right !== null && up !== null && { pitch: [right, up] as [number, number] }),
      },
    }),
  };
}

function Length({
  label,
  nm,
  unit,
  least = 0,
  onNm,
  onEmpty,
}: {
  readonly label: string;
  readonly nm: number | null;
  readonly unit: string;
  readonly least?: number;
  readonly onNm: (nm: number) => void;
  readonly onEmpty?: () => void;
}) {
  const kind: Kind = 'length';
  return (
    <QuantityField
      label={label}
      value={nm === null ? null : metres(nm)}
      kind={kind}
      unit={unit}
      onAccept={(value) => {
        const whole = Math.round(value * NM_PER_M);
        if (whole < least || whole > NM_PER_M)
          return `${label} takes a length from ${figure(metres(least), 'length')} to 1 m.`;
        onNm(whole);
        return null;
      }}
      {...(onEmpty && {
        onEmpty: () => {
          onEmpty();
          return null;
        },
      })}
    />
  );
}

/** Masks: what the plate and the process ask for, then out with them, read back. */
export function MaskPart() {
  const { desk } = usePage();
  const [wish, setWish] = useState(habit);
  const [job, setJob] = useState<number | null>(null);
  const [making, setMaking] = useState(false);
  const [says, setSays] = useState('');
  const [report, setReport] = useState<Report | null>(null);
  const choose = (patch: Partial<Wish>): void => {
    habit = { ...habit, ...patch };
    setWish(habit);
  };
  const go = async (): Promise<void> => {
    setMaking(true);
    setSays('');
    setReport(null);
    try {
      const path = await placeFor(desk, 'Mask', `${desk.chip()!.name} mask`, ENDINGS[wish.format]);
      if (!path) return;
      await desk.settled();
      const state = await follow(
        desk.client,
        'mask',
        async () => {
          const started = await desk.client.call('mask.start', {
            formats: [wish.format],
            options: optionsOf(wish),
            path,
            replace: true,
          });
          setJob(started.job);
          return started;
        },
        (now) => setSays(now.says),
      );
      if (state.state === 'cancelled') return;
      const outcome = await desk.client.call('mask.take', { job: state.job });
      setReport(outcome.report);
      setSays(writtenWords(outcome.report));
    } catch (error) {
      setSays(troubleWords(error));
    } finally {
      setMaking(false);
      setJob(null);
    }
  };
  const cancel = (): void => {
    if (job !== null)
      desk.client.call('mask.cancel', { job }).catch((error: unknown) => setSays(troubleWords(error)));
  };
  return (
    <section className="fields" aria-labelledby="handover-mask">
      <h3 id="handover-mask">Masks</h3>
      <ChoiceField
        label="Format"
        value={wish.format}
        choices={FORMATS}
        onAccept={(format) => choose({ format })}
      />
      <ChoiceField
        label="Plate"
        value={wish.polarity}
        choices={FIELDS}
        onAccept={(polarity) => choose({ polarity })}
      />
      <ChoiceField
        label="Side"
        value={wish.mirror ? 'yes' : 'no'}
        choices={SIDES}
        onAccept={(value) => choose({ mirror: value === 'yes' })}
      />
      <Length
        label="Undercut on each side"
        nm={wish.undercut}
        unit="um"
        onNm={(undercut) => choose({ undercut })}
        onEmpty={() => choose({ undercut: null })}
      />
      <QuantityField
        label="Shrinkage off the mould"
        value={wish.shrink}
        kind="share"
        unit="%"
        onAccept={(shrink) => {
          if (!(shrink >= 0 && shrink <= 0.2)) return 'Shrinkage takes a share from 0 to 20 %.';
          choose({ shrink });
          return null;
        }}
        onEmpty={() => {
          choose({ shrink: null });
          return null;
        }}
      />
      <Length
        label="Dicing lane"
        nm={wish.lane}
        unit="um"
        onNm={(lane) => choose({ lane })}
        onEmpty={() => choose({ lane: null })}
      />
      <ChoiceField
        label="Alignment marks"
        value={wish.marks ? 'yes' : 'no'}
        choices={YES_NO}
        onAccept={(value) => choose({ marks: value === 'yes' })}
      />
      <ChoiceField
        label="Holes of ports and vias"
        value={wish.pads ? 'yes' : 'no'}
        choices={YES_NO}
        onAccept={(value) => choose({ pads: value === 'yes' })}
      />
      <Length
        label="Wafer diameter"
        nm={wish.wafer}
        unit="mm"
        least={1_000_000}
        onNm={(wafer) => choose({ wafer })}
        onEmpty={() => choose({ wafer: null })}
      />
      {wish.wafer !== null && (
        <>
          <Length label="Rim kept free" nm={wish.edge} unit="mm" onNm={(edge) => choose({ edge })} />
          <Length
            label="Pitch to the right"
            nm={wish.pitch[0]}
            unit="mm"
            least={1}
            onNm={(right) => choose({ pitch: [right, wish.pitch[1]] })}
            onEmpty={() => choose({ pitch: [null, wish.pitch[1]] })}
          />
          <Length
            label="Pitch upward"
            nm={wish.pitch[1]}
            unit="mm"
            least={1}
            onNm={(up) => choose({ pitch: [wish.pitch[0], up] })}
            onEmpty={() => choose({ pitch: [wish.pitch[0], null] })}
          />
        </>
      )}
      <p className="soft small">
        Not said: the undercut of the process, no shrinkage, a lane of 200 µm, one chip
        {wish.wafer !== null && ', chips as close as can be (give both pitches or none)'}.
      </p>
      <div className="row">
        <button type="button" className="strong-button" disabled={making} onClick={go}>
          {making ? 'Making …' : 'Make the masks'}
        </button>
        {job !== null && (
          <button type="button" className="plain-button" onClick={cancel}>
            Cancel
          </button>
        )}
      </div>
      <p className="small handed" role="status">
        {says}
      </p>
      {report && (
        <ul className="small cautions">
          {report.findings.map(({ where, says: found }) => (
            <li key={`${where} ${found}`}>{found}</li>
          ))}
          {report.notes.map((note) => (
            <li key={note} className="soft">
              {note}
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}

/** What was written, and how it read back. */
function writtenWords({ files, placed }: Report): string {
  const worst = files
    .flatMap(({ compared }) => compared)
    .reduce((most, { difference, allowed }) => Math.max(most, allowed > 0 ? difference / allowed : 0), 0);
  const where = files[0]?.path ?? '';
  const chips = placed.length > 1 ? ` with ${counted(placed.length, 'chip')}` : '';
  const what =
    files.length === 1
      ? `Written to ${where}${chips}`
      : `${counted(files.length, 'file')} written${chips}, the first to ${where}`;
  if (worst === 0) return `${what}; read back, it is the drawing.`;
  return worst < 0.01
    ? `${what}; read back, it differs by less than a hundredth of what the chord error allows.`
    : `${what}; read back, it differs by ${figure(worst, 'share', { digits: 2, unit: '%' })} of what the chord error allows.`;
}
