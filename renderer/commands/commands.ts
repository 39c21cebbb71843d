import { boxOfParts, findPart } from '../edits/parts.ts';
import { zoomed } from '../sheet/camera.ts';
import { placeOf } from '../sheet/picture.ts';
import type { Desk } from '../state/desk.ts';
import { partOf, type Ref } from '../state/ref.ts';
import type { Workbench } from '../state/workbench.ts';
import { changeCommands } from './change.ts';
import type { Command, Commands } from './command.ts';
import { drawCommands } from './draw.ts';
import { programCommands } from './program.ts';
import { showCommands } from './show.ts';

/** Keys a person chose, by command; '' takes a key away. */
export type OwnKeys = Readonly<Record<string, string>>;

export function createCommands(desk: Desk, bench: Workbench, ownKeys: () => OwnKeys): Commands {
  const show = (ref: Ref): void => {
    const chip = desk.chip();
    if (!chip) return;
    desk.view.patch({ selection: [ref], panel: 'card' });
    const place = sitePlace(desk, ref) ?? placeOf(chip, ref);
    const { camera, size } = desk.view.get();
    if (!place || !camera || size.width === 0) return;
    const part = partOf(ref) ? findPart(chip, ref) : null;
    const box = part && boxOfParts([part]);
    const away = [
      Math.abs(place[0] - camera.centre[0]) * camera.scale > size.width / 2 - 60,
      Math.abs(place[1] - camera.centre[1]) * camera.scale > size.height / 2 - 60,
    ];
    const tiny =
      box &&
      Math.max(box.right - box.left, box.top - box.bottom) * camera.scale < 24 &&
      part?.kind !== 'port';
    if (tiny) desk.view.patch({ camera: { ...zoomed(camera, size, [0, 0], 4), centre: place } });
    else if (away.some(Boolean)) desk.view.patch({ camera: { ...camera, centre: place } });
  };
  const all: readonly Command[] = [
    ...drawCommands(desk, bench),
    ...changeCommands(desk, bench),
    ...showCommands(desk, show),
    ...programCommands(desk),
  ];
  const byId = (id: string): Command => {
    const found = all.find((command) => command.id === id);
    if (!found) throw new Error(`no command ${id}`);
    return found;
  };
  const keysOf = (command: Command): readonly string[] => {
    const own = ownKeys()[command.id];
    return own === undefined ? command.keys : own === '' ? [] : [own];
  };
  // a key that a person gave goes before one that a command had at first
  const forKey = (key: string): Command | null =>
    all.find((command) => ownKeys()[command.id] === key) ??
    all.find((command) => keysOf(command).includes(key)) ??
    null;
  return {
    all,
    byId,
    run(id) {
      const command = byId(id);
      const why = command.why?.();
      if (why) desk.say(why);
      else void command.run();
    },
    forKey,
    // a key that went over to another command is not shown here any more
    keyOf: (id) => keysOf(byId(id)).find((key) => forKey(key)?.id === id) ?? '',
    show,
  };
}

/** Where a place that was read from the drawing lies: a junction, an end. */
function sitePlace(desk: Desk, ref: Ref): readonly [number, number] | null {
  const { graph, result } = desk.solver.solved.get();
  const site = graph?.sites.find((found) => found.name === ref);
  if (site) return site.at;
  const cell = result?.cells.find((found) => found.id === ref);
  return cell ? [cell.at[0] * 1e9, cell.at[1] * 1e9] : null;
}
