import { app, type Session, type WebContents } from 'electron';
import { isOurs, SCHEME } from './scheme.ts';

/**
 * The two permissions that the page has, and only the page: to put text on the clipboard and to read
 * it back, on the person's command. Everything else that a page can ask for is refused.
 */
const ALLOWED: ReadonlySet<string> = new Set(['clipboard-sanitized-write', 'clipboard-read']);

/** Refuses permissions, devices, downloads and every request that is not the page's own. */
export function closeSession(session: Session): void {
  session.setPermissionRequestHandler((_contents, permission, callback, details) => {
    callback(ALLOWED.has(permission) && details.isMainFrame && isOurs(details.requestingUrl));
  });
  session.setPermissionCheckHandler((_contents, permission, origin, details) => {
    return ALLOWED.has(permission) && details.isMainFrame && isOurs(origin);
  });
  session.setDevicePermissionHandler(() => false);
  session.setDisplayMediaRequestHandler((_request, callback) => callback({}));
  session.on('will-download', (event) => event.preventDefault());
  session.webRequest.onBeforeRequest((details, callback) => {
    callback({ cancel: !isAllowedAddress(details.url) });
  });
}

/** The page's own files, and what it makes itself in memory. */
function isAllowedAddress(address: string): boolean {
  if (isOurs(address) || address.startsWith('data:')) return true;
  return address.startsWith(`blob:${SCHEME}://`) || address.startsWith('devtools:');
}

/** Keeps whatever is shown anywhere in the program where it is: no navigation, no window, no view in it. */
export function closeContents(): void {
  app.on('web-contents-created', (_event, contents: WebContents) => {
    const stay = (event: { preventDefault(): void }): void => event.preventDefault();
    contents.on('will-navigate', stay);
    contents.on('will-frame-navigate', stay);
    contents.on('will-redirect', stay);
    contents.on('will-attach-webview', stay);
    contents.setWindowOpenHandler(() => ({ action: 'deny' }));
  });
}
