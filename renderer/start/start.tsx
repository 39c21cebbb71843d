import { useEffect, useRef, useState } from 'react';
import type { Output } from '../../main/contract/contract.ts';
import { isDrawing, showDropped } from '../bring-in/dropped.ts';
import { QuantityField } from '../card/quantity-field.tsx';
import { ChoiceField } from '../card/text-field.tsx';
import { choosePlace } from '../commands/files.ts';
import { usePage } from '../page/context.tsx';
import { useStore } from '../state/store.ts';
import { newChip, SIZES, type SizeId } from './new-chip.ts';

const day = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium' });

/** Nothing is open: three ways in. */
export function Start() {
  const { desk, commands } = usePage();
  const says = useStore(desk.view, (view) => view.says);
  const opening = useStore(desk.opening);
  return (
    <main className="start" aria-busy={opening !== ''}>
      <header>
        <h1>Channelwright</h1>
        <p>
          Draw the chip; the five answers stand beside it: does it split right, do the cells survive, can the
          pump drive it, can it be made, can I trust it.
        </p>
      </header>
      {(says || opening) && (
        <p className={opening ? 'soft' : 'start-says'} role={opening ? 'status' : 'alert'}>
          {opening || says}
        </p>
      )}
      <div className="ways">
        <Demos />
        <NewChip />
        <Files />
      </div>
      <footer className="soft">
        <button type="button" onClick={() => commands.run('find')}>
          Find a command <kbd>/</kbd>
        </button>
        <p>A computed pass is not evidence that cells live. Not for diagnosis or treatment.</p>
      </footer>
    </main>
  );
}

function Demos() {
  const { desk } = usePage();
  const [demos, setDemos] = useState<Output<'demos.list'>['demos'] | null>(null);
  useEffect(() => {
    desk.client
      .call('demos.list', {})
      .then((found) => setDemos(found.demos))
      .catch(() => setDemos([]));
  }, [desk]);
  return (
    <section aria-labelledby="way-demo">
      <h2 id="way-demo">Look at one that works</h2>
      {demos?.length === 0 && <p className="soft">No demo came with this copy.</p>}
      <ul className="nexts">
        {demos?.map((demo) => (
          <li key={demo.id}>
            <button
              type="button"
              onClick={() =>
                desk.open(`Opening ${demo.name} …`, () => desk.client.call('project.demo', { id: demo.id }))
              }
            >
              <span>{demo.name}</span>
              <span className="soft">{demo.says}</span>
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}

function NewChip() {
  const { desk } = usePage();
  const [size, setSize] = useState<SizeId>('slide');
  const [own, setOwn] = useState({ width: 0.05, height: 0.03 });
  const [depth, setDepth] = useState(50e-6);
  const [name, setName] = useState('');
  const chosen = SIZES.find((entry) => entry.id === size)!;
  const begin = (): void => {
    const nm = (metres: number): number => Math.round(metres * 1e9);
    const [width, height] =
      size === 'own' ? [nm(own.width), nm(own.height)] : [chosen.width * 1e6, chosen.height * 1e6];
    const chip = newChip(name.trim() || 'A new chip', Math.round(width), Math.round(height), nm(depth));
    void desk.open('Beginning a chip …', () => desk.client.call('project.new', { chip }));
  };
  const length =
    (key: 'width' | 'height') =>
    (value: number): string | null => {
      if (!(value > 0 && value <= 1)) return 'Takes a length above zero, of at most one metre.';
      setOwn({ ...own, [key]: value });
      return null;
    };
  return (
    <section aria-labelledby="way-new">
      <h2 id="way-new">Begin a chip</h2>
      <form
        className="fields"
        onSubmit={(event) => {
          event.preventDefault();
          begin();
        }}
      >
        <div className="field">
          <label htmlFor="new-name">Name</label>
          <input
            id="new-name"
            value={name}
            maxLength={200}
            placeholder="A new chip"
            onChange={(event) => setName(event.target.value)}
          />
        </div>
        <ChoiceField
          label="Size"
          value={size}
          choices={SIZES.map((entry) => [entry.id, entry.says] as const)}
          onAccept={setSize}
        />
        {size === 'own' && (
          <>
            <QuantityField
              label="Width"
              value={own.width}
              kind="length"
              unit="mm"
              onAccept={length('width')}
            />
            <QuantityField
              label="Height"
              value={own.height}
              kind="length"
              unit="mm"
              onAccept={length('height')}
            />
          </>
        )}
        <QuantityField
          label="Depth of its channels"
          value={depth}
          kind="length"
          unit="um"
          onAccept={(value) => {
            if (!(value > 0 && value <= 0.1)) return 'Takes a length above zero, of at most 100 mm.';
            setDepth(value);
            return null;
          }}
        />
        <button type="submit" className="strong-button">
          Begin
        </button>
      </form>
    </section>
  );
}

/** A dropped or picked file: a project by its bytes, anything else as a description. */
export async function openDropped(desk: ReturnType<typeof usePage>['desk'], file: File): Promise<void> {
  const name = file.name.slice(0, 200) || 'a file';
  if (isDrawing(name)) {
    if (!desk.chip()) {
      // A drawing needs a chip to come into; its own size is taken once it is put on the sheet.
      const blank = newChip(name.replace(/\.\w+$/, ''), 76_000_000, 26_000_000, 50_000);
      await desk.open(`Opening ${name} …`, () => desk.client.call('project.new', { chip: blank }));
    }
    if (desk.chip()) showDropped(desk, file);
    return;
  }
  await desk.open(`Opening ${name} …`, async () => {
    const bytes = new Uint8Array(await file.arrayBuffer());
    if (/\.chw$/i.test(name)) return desk.client.call('project.upload', { name, bytes });
    return desk.client.call('project.import', {
      text: new TextDecoder().decode(bytes),
      name: name.replace(/\.json$/i, ''),
    });
  });
}

function Files() {
  const { desk } = usePage();
  const [recent, setRecent] = useState<Output<'recent.list'>['recent']>([]);
  const picker = useRef<HTMLInputElement>(null);
  useEffect(() => {
    desk.client
      .call('recent.list', {})
      .then((found) => setRecent(found.recent))
      .catch(() => undefined);
  }, [desk]);
  const open = async (): Promise<void> => {
    const path = await choosePlace(desk, {
      purpose: 'open',
      title: 'Open a project',
      kind: 'Project',
      extensions: ['chw', 'json'],
    });
    if (path) await openPath(path);
  };
  const openPath = (path: string): Promise<void> =>
    desk.open('Opening …', async () => {
      if (!/\.json$/i.test(path)) return desk.client.call('project.open', { path });
      const { name, bytes } = await desk.client.call('files.read', { path });
      return desk.client.call('project.import', { text: new TextDecoder().decode(bytes), name });
    });
  return (
    <section aria-labelledby="way-file">
      <h2 id="way-file">Go on with a file</h2>
      <p className="soft">A project (.chw) or a chip description (.json); it can be dropped here too.</p>
      <div className="row">
        <button type="button" className="plain-button" onClick={open}>
          Open a file
        </button>
        <button type="button" className="plain-button" onClick={() => picker.current?.click()}>
          Take a copy of one
        </button>
        <input
          ref={picker}
          type="file"
          accept=".chw,.json,.dxf,.svg,.gds"
          aria-label="A file to take a copy of"
          className="aside"
          tabIndex={-1}
          onChange={(event) => {
            const file = event.target.files?.[0];
            if (file) void openDropped(desk, file);
          }}
        />
      </div>
      {recent.length > 0 && (
        <ul className="nexts">
          {recent.slice(0, 6).map((entry) => (
            <li key={entry.path}>
              <button type="button" disabled={!entry.there} onClick={() => openPath(entry.path)}>
                <span>{entry.name}</span>
                <span className="soft">{entry.there ? day.format(entry.opened) : 'no longer there'}</span>
              </button>
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}
