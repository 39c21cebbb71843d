import { basename, dirname, extname, join } from 'node:path';
import { Backups } from '../../db/backup/backups.ts';
import { removeFile } from '../../db/place/copy-out.ts';
import { freeDraft } from '../../db/place/drafts.ts';
import { replaceFile } from '../../db/place/replace.ts';
import { Workplace } from '../../db/workplace.ts';
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
  | 'project.revert'
  | 'project.history'
  | 'project.backups'
  | 'project.restore'
> = {
  'project.new': async (session, { chip }) => await session.draft(chip),
  'project.import': async (session, { text, name }) => await session.draft(readDescription(text, name)),
  'project.demo': async (session, { id }) =>
    await session.draft(readDescription(await demoText(session.settings.assets, id), id)),
  'project.open': async (session, { path }) => await session.open(wholePath(path)),
  'project.upload': async (session, { name, bytes }) => {
    const path = await freeDraft(session.settings, basename(name, extname(name)));
    await replaceFile(path, bytes, false);
    try {
      return await session.open(path);
    } catch (error) {
      await removeFile(path);
      throw error;
    }
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
  'project.edit': (session, { edit, seq }) => {
    const { workplace } = session;
    const position = workplace.project.edit(edit, seq);
    session.touched();
    return position;
  },
  'project.undo': (session) => {
    const { workplace } = session;
    const moved = workplace.project.undo();
    session.touched();
    return moved;
  },
  'project.redo': (session) => {
    const { workplace } = session;
    const moved = workplace.project.redo();
    session.touched();
    return moved;
  },
  'project.revert': (session) => {
    const { workplace } = session;
    const moved = workplace.project.revert();
    session.touched();
    return moved;
  },
  'project.backups': async (session, { path }) => {
    const of = path === undefined ? session.workplace.path : wholePath(path);
    return { backups: await new Backups(session.settings.userData, of).list() };
  },
  'project.restore': async (session, { path, id }) => {
    const of = path === undefined ? session.workplace.path : wholePath(path);
    return await session.open(await Workplace.restored(session.workplaceSettings, of, id));
  },
  'project.history': ({ workplace }, { limit }) => ({ steps: workplace.project.history(limit ?? 200) }),
};

/** The path with the project's ending. */
function asProject(path: string): string {
  return extname(path).toLowerCase() === '.chw' ? path : join(dirname(path), `${basename(path)}.chw`);
}
