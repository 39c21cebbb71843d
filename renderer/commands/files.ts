import { writeDescription } from '../../solver/chip/description-write.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { Desk } from '../state/desk.ts';
import type { FileWish } from '../state/view.ts';

/** Asks for a place: the system's dialog where there is one, else the page's own list of folders. */
export async function choosePlace(desk: Desk, wish: Omit<FileWish, 'done'>): Promise<string | null> {
  const about = await desk.client.call('about', {});
  if (about.dialogs) {
    const { path } = await desk.client.call('files.choose', {
      purpose: wish.purpose,
      title: wish.title,
      kinds: [{ name: wish.kind, extensions: [...wish.extensions] }],
      ...(wish.suggest && { suggest: wish.suggest }),
    });
    return path;
  }
  return new Promise((done) => {
    desk.view.patch({
      files: {
        ...wish,
        done: (path) => {
          desk.view.patch({ files: null });
          done(path);
        },
      },
    });
  });
}

const fileName = (name: string): string => name.replace(/[\\/:*?"<>|]+/g, ' ').trim() || 'chip';

async function said(desk: Desk, work: () => Promise<string>): Promise<void> {
  try {
    desk.say(await work());
  } catch (error) {
    desk.say(
      error instanceof Problem ? `${error.what} ${error.remedy}` : 'That did not work. Try it once more.',
    );
  }
}

export async function saveAs(desk: Desk): Promise<void> {
  const path = await choosePlace(desk, {
    purpose: 'save',
    title: 'Where the project is kept',
    kind: 'Project',
    extensions: ['chw'],
    suggest: `${fileName(desk.chip()!.name)}.chw`,
  });
  if (!path) return;
  await said(desk, async () => {
    await desk.settled();
    const standing = await desk.client.call('project.saveAs', { path, replace: true });
    desk.stand(standing);
    return `Kept in ${standing.name}; every edit goes there from now on.`;
  });
}

export const saveCopy = (desk: Desk): Promise<void> =>
  said(desk, async () => {
    await desk.settled();
    const { path } = await desk.client.call('project.duplicate', {});
    return `A copy lies at ${path}.`;
  });

export async function saveDescription(desk: Desk): Promise<void> {
  const chip = desk.chip()!;
  await saveText(desk, writeDescription(chip), `${fileName(chip.name)}.json`, 'Chip description');
}

/** Writes a text where the person wants it. */
export async function saveText(desk: Desk, content: string, suggest: string, kind: string): Promise<void> {
  const extension = suggest.slice(suggest.lastIndexOf('.') + 1);
  const path = await choosePlace(desk, {
    purpose: 'save',
    title: `Where the ${kind.toLowerCase()} goes`,
    kind,
    extensions: [extension],
    suggest: fileName(suggest),
  });
  if (!path) return;
  await said(desk, async () => {
    const written = await desk.client.call('files.write', { path, content, replace: true });
    return `Written to ${written.path}.`;
  });
}
