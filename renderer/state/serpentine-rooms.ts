import type { SerpentineRoom } from '../makers/serpentine.ts';
import type { Desk, KeptView } from './desk.ts';

const isRecord = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
const size = (value: unknown): number | undefined =>
  typeof value === 'number' && Number.isSafeInteger(value) && value > 0 ? value : undefined;

/** The room that was wished for a serpentine, as it was kept with the project; whatever is none is left out. */
export function readRoom(view: KeptView, name: string): SerpentineRoom {
  const rooms = view.serpentines;
  const room = isRecord(rooms) && Object.hasOwn(rooms, name) ? rooms[name] : null;
  if (!isRecord(room)) return {};
  const [wall, high] = [size(room.wall), size(room.high)];
  return { ...(wall !== undefined && { wall }), ...(high !== undefined && { high }) };
}

/** Keeps the room that is wished for a serpentine: of the view, for the drawing shows only what it takes of it. */
export function keepRoom(desk: Desk, name: string, room: SerpentineRoom): void {
  const view = desk.keptView();
  const rooms = isRecord(view.serpentines) ? view.serpentines : {};
  // those of serpentines that are gone go too
  const there = new Set(desk.chip()?.channels.map(({ id }) => id));
  const left = Object.entries(rooms).filter(([id]) => there.has(id) && id !== name);
  desk.keepView({ serpentines: { ...Object.fromEntries(left), [name]: { ...room } } as never });
}
