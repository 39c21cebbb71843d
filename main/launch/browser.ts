import { spawn } from 'node:child_process';

/** Opens an address in the person's browser; false where there is none to ask. */
export function openBrowser(address: string): Promise<boolean> {
  const [command, ...args] =
    process.platform === 'darwin'
      ? ['open', address]
      : process.platform === 'win32'
        ? ['rundll32', 'url.dll,FileProtocolHandler', address]
        : ['xdg-open', address];
  return new Promise((done) => {
    const child = spawn(command!, args, { stdio: 'ignore', detached: true });
    child.on('error', () => done(false));
    child.on('spawn', () => {
      child.unref();
      // The opener ends at once with a failure where no browser is known to the system.
      const early = setTimeout(() => done(true), 1_500);
      child.on('exit', (code) => {
        clearTimeout(early);
        done(code === 0);
      });
    });
  });
}
