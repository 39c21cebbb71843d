import { join } from 'node:path';

/**
 * Runs the packaged entry, extracted to the folder named, where the desktop's module is the double of
 * the tests; plays the system up to the first window, makes a request of the page and prints the answer.
 */
const [folder] = process.argv.slice(2) as [string];
const electron = await import('./electron-double.ts');
const { decode, encode } = await import('../../main/contract/wire.ts');
electron.noted.appPath = folder;
process.argv = ['electron', folder];
await import(join(folder, 'dist', 'main', 'electron.js'));
electron.app.ready();
while (electron.noted.windows.length === 0) await new Promise((done) => setTimeout(done, 10));
const [window] = electron.noted.windows;
const ask = async (name: string, input: unknown): Promise<unknown> => {
  const event = { sender: window!.webContents, senderFrame: window!.webContents.mainFrame };
  return decode(
    (await electron.noted.handlers.get('channelwright:request')!(event, name, encode(input))) as Uint8Array,
  );
};
const about = await ask('about', {});
const demo = await ask('project.demo', { id: 'eight-way-splitter' });
process.stdout.write(JSON.stringify({ about, demo, preload: window!.options.webPreferences }));
electron.app.quit();
