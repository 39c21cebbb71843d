import { mkdir } from 'node:fs/promises';
import { basename, dirname, extname, join } from 'node:path';
import { replaceFile } from '../../db/place/replace.ts';
import { draftFolder } from '../../db/workplace.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { demoText } from '../user/demos.ts';
import { wholePath } from './files.ts';
import type { Handlers } from './handlers.ts';

export const projectRequests: Handlers<
  | 'project.new'
  | 'project.import'
  | 'project.demo'
  | 'project.open'
  | 'project.upload'
  | 'project.close'
  | 'project.state'
  | 'project.saveAs'
  | 'project.duplicate'
  | 'project.edit'
  | 'project.undo'
  | 'project.redo'
  | 'project.history'
> = {
  'project.new': async (session, { chip }) => await session.draft(chip),
  'project.import': async (session, { text, name }) => await session.draft(readDescription(text, name)),
  'project.demo': async (session, { id }) =>
    await session.draft(readDescription(await demoText(session.settings.assets, id), id)),
  'project.open': async (session, { path }) => await session.open(wholePath(path)),
  'project.upload': async (session, { name, bytes }) => {
    const folder = draftFolder(session.settings);
    await mkdir(folder, { recursive: true });
    const stem = basename(name, extname(name))
      .replaceAll(/[^\p{L}\p{N} _-]/gu, '_')
      .slice(0, 60);
    const path = join(folder, `${stem || 'project'}-${Date.now().toString(36)}.chw`);
    await replaceFile(path, bytes, false);
    return await session.open(path);
  },
  'project.close': async (session) => {
    await session.close();
    return {};
  },
  'project.state': ({ state }) => ({ state }),
  'project.saveAs': async (session, { path, replace }) => {
    await session.saveAs(asProject(wholePath(path)), replace === true);
    return session.workplace.standing;
  },
  'project.duplicate': async ({ workplace }, { path, replace }) => {
    const to = path === undefined ? null : asProject(wholePath(path));
    return { path: await workplace.duplicate(to, replace === true) };
  },
  'project.edit': ({ workplace }, { edit, seq }) => {
    const position = workplace.project.edit(edit, seq);
    workplace.touched();
    return position;
  },
  'project.undo': ({ workplace }) => {
    const moved = workplace.project.undo();
    workplace.touched();
    return moved;
  },
  'project.redo': ({ workplace }) => {
    const moved = workplace.project.redo();
    workplace.touched();
    return moved;
  },
  'project.history': ({ workplace }, { limit }) => ({ steps: workplace.project.history(limit ?? 200) }),
};

/** The path with the project's ending. */
function asProject(path: string): string {
  return extname(path).toLowerCase() === '.chw' ? path : join(dirname(path), `${basename(path)}.chw`);
}
