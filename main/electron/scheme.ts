import { readFile } from 'node:fs/promises';
import { type Protocol, protocol } from 'electron';
import { pageFiles } from '../page/files.ts';
import { PAGE_HEADERS } from '../page/policy.ts';

/** The page has a scheme of its own, with one host and nothing on it but its own files. */
export const SCHEME = 'channelwright';
export const HOST = 'app';
export const PAGE_ADDRESS = `${SCHEME}://${HOST}/`;

/** To be called before the program is ready. */
export function declareScheme(): void {
  protocol.registerSchemesAsPrivileged([
    { scheme: SCHEME, privileges: { standard: true, secure: true, supportFetchAPI: true, codeCache: true } },
  ]);
}

/** Whether an address is one of the page's own. */
export function isOurs(address: string): boolean {
  try {
    const { protocol: scheme, host } = new URL(address);
    return scheme === `${SCHEME}:` && host === HOST;
  } catch {
    return false;
  }
}

/** Serves the page's files, each under its exact path; anything else is not there. */
export async function serveScheme(on: Protocol, folder: string): Promise<void> {
  const files = await pageFiles(folder);
  on.handle(SCHEME, async (request) => {
    const none = new Response(null, { status: 404, headers: PAGE_HEADERS });
    if (request.method !== 'GET' || !isOurs(request.url)) return none;
    const { pathname } = new URL(request.url);
    const file = files.get(pathname);
    if (!file) return none;
    try {
      const body = new Uint8Array(await readFile(file.file));
      return new Response(body, { headers: { ...PAGE_HEADERS, 'content-type': file.type } });
    } catch {
      return none;
    }
  });
}
