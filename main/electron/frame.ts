import { type BrowserWindow, type Rectangle, screen } from 'electron';
import { z } from 'zod';
import { readRecord, writeRecord } from '../user/record.ts';

const FILE = 'window.json';
const LEAST = { width: 900, height: 600 };
const USUAL = { width: 1440, height: 900 };
/** So much of a window must be on some screen to be taken hold of. */
const GRIP = 120;
const SAVE_AFTER_MS = 500;

const schema = z.object({
  x: z.number(),
  y: z.number(),
  width: z.number(),
  height: z.number(),
  maximised: z.boolean(),
});
export type Frame = z.infer<typeof schema>;

/** Size and place for a new window: as the last one was left, brought onto a screen that is there. */
export async function lastFrame(userData: string): Promise<Partial<Frame>> {
  const kept = await readRecord(userData, FILE, schema.nullable(), null);
  return kept ? onScreen(kept) : USUAL;
}

/** The frame as it can be shown: no larger than its screen, and where it can be reached. */
export function onScreen(frame: Frame): Partial<Frame> {
  const area = screen.getDisplayMatching(frame).workArea;
  const size = {
    width: Math.min(Math.max(frame.width, LEAST.width), area.width),
    height: Math.min(Math.max(frame.height, LEAST.height), area.height),
  };
  const { maximised } = frame;
  const reachable = screen.getAllDisplays().some(({ workArea }) => overlap(frame, workArea));
  if (!reachable) return { ...size, maximised };
  return {
    ...size,
    maximised,
    x: clamp(frame.x, area.x - size.width + GRIP, area.x + area.width - GRIP),
    // A title bar above the screen's top cannot be taken hold of.
    y: clamp(frame.y, area.y, area.y + area.height - GRIP),
  };
}

function overlap(a: Rectangle, b: Rectangle): boolean {
  const across = Math.min(a.x + a.width, b.x + b.width) - Math.max(a.x, b.x);
  const down = Math.min(a.y + a.height, b.y + b.height) - Math.max(a.y, b.y);
  return across >= GRIP && down >= GRIP / 2;
}

function clamp(value: number, low: number, high: number): number {
  return Math.min(Math.max(value, low), Math.max(low, high));
}

/** Keeps the window's frame as the person leaves it. */
export function keepFrame(window: BrowserWindow, userData: string): void {
  let timer: NodeJS.Timeout | undefined;
  const save = (): void => {
    clearTimeout(timer);
    if (window.isDestroyed() || window.isMinimized() || window.isFullScreen()) return;
    const frame: Frame = { ...window.getNormalBounds(), maximised: window.isMaximized() };
    writeRecord(userData, FILE, frame).catch(() => undefined);
  };
  const later = (): void => {
    clearTimeout(timer);
    timer = setTimeout(save, SAVE_AFTER_MS);
  };
  window.on('resize', later);
  window.on('move', later);
  window.on('maximize', later);
  window.on('unmaximize', later);
  window.on('close', save);
  window.on('closed', () => clearTimeout(timer));
}

export const LEAST_SIZE = { minWidth: LEAST.width, minHeight: LEAST.height };
