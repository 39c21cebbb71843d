import { type BrowserWindow, dialog } from 'electron';
import { type Input, REQUESTS } from '../contract/contract.ts';
import { decode, encode } from '../contract/wire.ts';

/** Answers `files.choose` by the system's own dialog, on top of the window that asks. */
export async function chooseFile(window: BrowserWindow, body: Uint8Array): Promise<Uint8Array> {
  const input = read(body);
  if (!input) {
    const problem = {
      kind: 'format',
      what: 'The request cannot be read.',
      where: '',
      remedy: 'Reload the page.',
    };
    return encode({ ok: false, problem });
  }
  return encode({ ok: true, output: { path: await ask(window, input) } });
}

function read(body: Uint8Array): Input<'files.choose'> | null {
  try {
    return REQUESTS['files.choose'].input.parse(decode(body));
  } catch {
    return null;
  }
}

async function ask(window: BrowserWindow, input: Input<'files.choose'>): Promise<string | null> {
  const { purpose, title, suggest } = input;
  const filters = input.kinds.map(({ name, extensions }) => ({ name, extensions: [...extensions] }));
  const start = suggest === undefined ? {} : { defaultPath: suggest };
  if (purpose === 'open') {
    const { canceled, filePaths } = await dialog.showOpenDialog(window, {
      title,
      filters,
      ...start,
      properties: ['openFile'],
    });
    return canceled ? null : (filePaths[0] ?? null);
  }
  const { canceled, filePath } = await dialog.showSaveDialog(window, {
    title,
    filters,
    ...start,
    properties: ['createDirectory', 'showOverwriteConfirmation'],
  });
  return canceled || !filePath ? null : filePath;
}
