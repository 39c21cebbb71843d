import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { CDPSession, Page } from 'playwright-core';
import { splitTree } from '../../renderer/makers/split-tree.ts';
import { emptyChip } from '../../renderer/testing/chips.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import { answered, type Sitting, sit } from '../page/desk.ts';
import { snakeChip } from '../page/snake.ts';
import { STAGES, stepped } from './page-stages.ts';
import { memory, starting } from './page-start.ts';
import type { BenchRow } from './row.ts';

/**
 * The page in Chromium. Script time is what the page's own thread spends in scripts, by the browser's own
 * count, over the frames that were painted: a share of a frame of 60 a second. Answers are timed in the
 * page from the key or pointer to the changed words, the wait for the next frame left out.
 */

const FRAME = 1000 / 60;
/** ms between a chip's first whole answer and the first edit. */
const LOOKED = 6000;

/** A tree to 64 outlets: 127 channels. */
function treeChip(): string {
  const mm = 1e6;
  const making = splitTree.make('tree', {
    layer: 'flow',
    levels: 6,
    box: { left: 5 * mm, right: 120 * mm, bottom: 5 * mm, top: 80 * mm },
    trunkWidth: 200_000,
    leafWidth: 100_000,
    joining: false,
    portDiameter: 750_000,
  });
  if ('refusal' in making) throw new Error(making.refusal);
  const chip = { ...emptyChip(), name: 'tree', outline: { width: 127_760_000, height: 85_480_000 } };
  return writeDescription({ ...chip, ...making.made });
}

/** Four arms that meet in the middle, to be dragged. */
function crossChip(): string {
  const mm = 1e6;
  const middle = [20 * mm, 10 * mm] as const;
  const ends = [
    [5 * mm, 10 * mm],
    [35 * mm, 10 * mm],
    [20 * mm, 18 * mm],
    [20 * mm, 2 * mm],
  ] as const;
  const chip = {
    ...emptyChip(),
    name: 'cross',
    layers: [{ id: 'flow', depth: 50_000, profile: { kind: 'rectangle' }, fillet: 25_000 }],
    outline: { width: 40 * mm, height: 20 * mm },
    channels: ends.map((end, i) => ({
      id: `arm ${i + 1}`,
      layer: 'flow',
      path: [end, middle],
      width: [200_000, 200_000],
      bendRadius: 0,
    })),
    ports: ends.map((at, i) => ({
      id: `p${i + 1}`,
      at,
      layer: 'flow',
      diameter: 0,
      drive: i === 0 ? { kind: 'flow', flow: 1e-8 / 60 } : { kind: 'pressure', pressure: 0 },
      tubing: [],
    })),
  } as unknown as ReturnType<typeof emptyChip>;
  return writeDescription(chip);
}

const sorted = (values: readonly number[]): number[] => [...values].sort((a, b) => a - b);
const median = (values: readonly number[]): number =>
  sorted(values)[Math.floor(values.length / 2)] ?? Number.NaN;
const high = (values: readonly number[]): number =>
  sorted(values)[Math.min(values.length - 1, Math.floor(0.95 * values.length))] ?? Number.NaN;

async function scriptTime(cdp: CDPSession): Promise<number> {
  const { metrics } = await cdp.send('Performance.getMetrics');
  return 1000 * metrics.find(({ name }) => name === 'ScriptDuration')!.value;
}

/** ms of script per painted frame while something is done in the page. */
async function perFrame(sitting: Sitting, work: () => Promise<unknown>): Promise<number> {
  const cdp = await sitting.context.newCDPSession(sitting.page);
  await cdp.send('Performance.enable');
  await sitting.page.evaluate(() => {
    const state = { frames: 0 };
    Object.assign(window, { counted: state });
    const tick = (): void => {
      state.frames += 1;
      requestAnimationFrame(tick);
    };
    requestAnimationFrame(tick);
  });
  const before = await scriptTime(cdp);
  await work();
  const spent = (await scriptTime(cdp)) - before;
  const frames = await sitting.page.evaluate(
    () => (window as unknown as { counted: { frames: number } }).counted.frames,
  );
  await cdp.detach();
  return spent / Math.max(1, frames);
}

async function answers(folder: string): Promise<BenchRow[]> {
  const file = join(folder, 'tree.json');
  writeFileSync(file, treeChip());
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  try {
    await answered(page);
    // somebody looks at the answers before they change anything
    await page.waitForTimeout(LOOKED);
    const rows: BenchRow[] = [];
    for (const [what, tab, name, label] of [
      ['a drive', 'Ports', 'tree-in', 'Flow into the chip'],
      ['a width', 'Channels', 'tree-2-1', 'Width'],
    ] as const) {
      await page.getByRole('tab', { name: new RegExp(tab) }).click();
      await page.getByRole('searchbox').fill(name);
      await page.getByRole('gridcell', { name, exact: true }).click();
      await page.getByLabel(label, { exact: true }).focus();
      await stepped(page, label, 3);
      const steps = (await stepped(page, label, 21)).filter(({ total }) => Number.isFinite(total));
      const times = steps.map(({ total }) => total);
      rows.push(
        {
          what: `127 channels, ${what} changed: to the new verdict`,
          median: median(times),
          unit: 'ms',
          runs: times.length,
          target: FRAME,
        },
        { what: `  the slowest twentieth`, median: high(times), unit: 'ms', runs: times.length, target: 50 },
        ...STAGES.map(
          ([stage, what]): BenchRow => ({
            what: `    ${what}`,
            median: median(steps.map((step) => step[stage])),
            unit: 'ms',
            runs: steps.length,
          }),
        ),
      );
      await page.getByRole('searchbox').fill('');
    }
    rows.push(...(await memory(sitting, '127 channels, solved')));
    return rows;
  } finally {
    await sitting.end();
  }
}

/** ms from letting go of what was dragged. */
interface Settled {
  /** To the words of the five answers with every junction solved. */
  readonly words: number;
  /** To the rest of the page in step with them. */
  readonly whole: number;
}

/** Follows what comes of the next time that the pointer lets go. */
const letGo = (page: Page): Promise<Settled> =>
  page.evaluate(
    () =>
      new Promise<Settled>((done) => {
        interface Told {
          kind: string;
          waiting?: number;
        }
        const bar = document.querySelector('.verdicts')!;
        let began = 0;
        let words = Number.NaN;
        const known = new Set<Worker>();
        const { postMessage } = Worker.prototype;
        // the thread is met when it is given an order; what it says is heard after the page has put it in words
        Worker.prototype.postMessage = function post(this: Worker, ...said: Parameters<typeof postMessage>) {
          if (!known.has(this)) {
            known.add(this);
            this.addEventListener('message', ({ data }: MessageEvent<Told>) => {
              if (began > 0 && data.kind === 'short' && data.waiting === 0) words = performance.now() - began;
            });
          }
          return postMessage.apply(this, said);
        } as typeof postMessage;
        const start = (): void => {
          began = performance.now();
        };
        addEventListener('pointerup', start, { once: true, capture: true });
        const end = (whole: number): void => {
          watch.disconnect();
          Worker.prototype.postMessage = postMessage;
          done({ words, whole });
        };
        const watch = new MutationObserver(() => {
          if (began > 0 && bar.getAttribute('aria-busy') === 'false') end(performance.now() - began);
        });
        watch.observe(bar, { attributes: true, childList: true, characterData: true, subtree: true });
        setTimeout(() => end(Number.NaN), 5000);
      }),
  );

async function dragging(folder: string): Promise<BenchRow[]> {
  const file = join(folder, 'cross.json');
  writeFileSync(file, crossChip());
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  try {
    await answered(page);
    // somebody looks at the chip before they take hold of it
    await page.waitForTimeout(LOOKED);
    const box = (await page.locator('.sheet-surface').first().boundingBox())!;
    // the junction lies in the middle of the chip, and that 18 px above the middle of the sheet
    const at = { x: box.x + box.width / 2, y: box.y + box.height / 2 - 18 };
    await page.mouse.click(at.x - 60, at.y);
    await page.mouse.move(at.x, at.y);
    await page.mouse.down();
    // held off the grid: the junction stays under the pointer and takes a new shape with every step
    await page.keyboard.down('Alt');
    let x = 0;
    const script = await perFrame(sitting, async () => {
      for (; x < 90; x += 1) {
        await page.mouse.move(at.x + x, at.y + x / 3);
        await page.waitForTimeout(8);
      }
    });
    const follow: number[] = [];
    const settle: Settled[] = [];
    const rested: Settled[] = [];
    for (let i = 0; i < 9; i += 1) {
      // one step of the hand, until the preview of the junction there is in the answer
      const seen = page.evaluate(
        () =>
          new Promise<number>((done) => {
            let began = 0;
            const start = (): void => {
              began = performance.now();
            };
            addEventListener('pointermove', start, { once: true, capture: true });
            const bar = document.querySelector('.verdicts')!;
            const watch = new MutationObserver(() => {
              if (began === 0 || !bar.textContent?.includes('solved within')) return;
              watch.disconnect();
              done(performance.now() - began);
            });
            watch.observe(bar, { childList: true, characterData: true, subtree: true });
            setTimeout(() => done(Number.NaN), 3000);
          }),
      );
      await page.waitForTimeout(40);
      x += 7;
      await page.mouse.move(at.x + x, at.y + x / 3);
      follow.push(await seen);
    }
    /** ms that the hand rests before it lets go. */
    for (const [rest, settled] of [
      [0, settle],
      [150, rested],
    ] as const) {
      for (let i = 0; i < 5; i += 1) {
        const solved = letGo(page);
        // far enough for another shape
        x += 24;
        await page.mouse.move(at.x + x, at.y + x / 3, { steps: 4 });
        if (rest > 0) await page.waitForTimeout(rest);
        await page.mouse.up();
        settled.push(await solved);
        await page.mouse.down();
      }
    }
    await page.mouse.up();
    await page.keyboard.up('Alt');
    const followed = follow.filter(Number.isFinite);
    const ends = [...settle, ...rested];
    // what never came is no fast answer
    if (followed.length < follow.length || ends.some((one) => !Number.isFinite(one.words + one.whole)))
      throw new Error('A dragged junction was not answered within the time that is waited for.');
    const ended = (what: string, times: readonly Settled[]): BenchRow[] => [
      { what, median: median(times.map(({ words }) => words)), unit: 'ms', runs: times.length, target: 100 },
      {
        what: '    to the rest of the page',
        median: median(times.map(({ whole }) => whole)),
        unit: 'ms',
        runs: times.length,
      },
    ];
    return [
      {
        what: 'junction of four arms dragged: script per frame',
        median: script,
        unit: 'ms',
        runs: 90,
        against: 'a frame',
        ratio: script / FRAME,
        target: 1,
      },
      {
        what: '  its preview after the hand',
        median: median(followed),
        unit: 'ms',
        runs: followed.length,
        against: 'a frame',
        ratio: median(followed) / FRAME,
        target: 2,
      },
      ...ended('  solved after the hand stops and at once lets go', settle),
      ...ended('  solved after it lets go, having rested 150 ms', rested),
    ];
  } finally {
    await sitting.end();
  }
}

async function panning(folder: string, count: number, frames: number): Promise<BenchRow[]> {
  const file = join(folder, `snake-${count}.json`);
  writeFileSync(file, snakeChip(count));
  const sitting = await sit({ files: [file] });
  const { page } = sitting;
  try {
    await answered(page);
    const box = (await page.locator('.sheet-surface').first().boundingBox())!;
    await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2);
    const script = await perFrame(sitting, async () => {
      for (let i = 0; i < 80; i += 1) {
        await page.mouse.wheel(i % 8 < 4 ? 12 : -12, i < 40 ? -30 : 30);
        await page.waitForTimeout(8);
      }
    });
    return [
      {
        what: `${count} channels, panned and zoomed: script per frame`,
        median: script,
        unit: 'ms',
        runs: 80,
        against: 'a frame of 60 a second',
        ratio: script / FRAME,
        target: 60 / frames,
      },
      ...(await memory(sitting, `${count} channels`)),
    ];
  } finally {
    await sitting.end();
  }
}

/** By name, so that one can be run alone. */
export const PARTS: Readonly<Record<string, (folder: string) => Promise<BenchRow[]>>> = {
  answers,
  dragging,
  'pan 5000': (folder) => panning(folder, 5000, 60),
  'pan 50000': (folder) => panning(folder, 50_000, 30),
  starting: (folder) => starting(folder, snakeChip(1000)),
};

export default async function page(): Promise<BenchRow[]> {
  const folder = mkdtempSync(join(tmpdir(), 'channelwright-bench-'));
  const rows: BenchRow[] = [];
  try {
    for (const part of Object.values(PARTS)) rows.push(...(await part(folder)));
    return rows;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
