import { readdir } from 'node:fs/promises';
import { extname, join, relative, sep } from 'node:path';

/** One file of the page as built: where it lies and what it is. */
export interface PageFile {
  readonly file: string;
  readonly type: string;
  /** Its name holds its content's hash, so that it never changes. */
  readonly forEver: boolean;
}

const TYPES: Readonly<Record<string, string>> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.json': 'application/json; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.png': 'image/png',
  '.ico': 'image/x-icon',
  '.webp': 'image/webp',
  '.woff2': 'font/woff2',
  '.woff': 'font/woff',
  '.wasm': 'application/wasm',
  '.txt': 'text/plain; charset=utf-8',
  '.webmanifest': 'application/manifest+json',
};

/**
 * Every file of the built page by the exact address path it is served at ("/" is index.html). What is
 * asked for is looked up here as it was sent and never turned into a file name, so no spelling of a
 * path leads out of the folder. Links are left out, and so are files of a type not listed.
 */
export async function pageFiles(folder: string): Promise<ReadonlyMap<string, PageFile>> {
  const found = new Map<string, PageFile>();
  let entries: Awaited<ReturnType<typeof list>>;
  try {
    entries = await list(folder);
  } catch {
    return found;
  }
  for (const entry of entries) {
    if (!entry.isFile()) continue;
    const file = join(entry.parentPath, entry.name);
    const type = TYPES[extname(entry.name).toLowerCase()];
    if (!type) continue;
    const path = `/${relative(folder, file).split(sep).join('/')}`;
    found.set(path, { file, type, forEver: path.startsWith('/assets/') });
  }
  const index = found.get('/index.html');
  if (index) found.set('/', index);
  return found;
}

function list(folder: string) {
  return readdir(folder, { withFileTypes: true, recursive: true });
}
