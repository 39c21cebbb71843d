import { app, BrowserWindow, nativeTheme } from 'electron';
import type { EventData } from '../contract/contract.ts';
import type { Sessions } from '../session/sessions.ts';
import { keepFrame, LEAST_SIZE, lastFrame } from './frame.ts';
import { EVENT_CHANNEL } from './ipc.ts';
import { PAGE_ADDRESS } from './scheme.ts';

type Standing = EventData<'project'>;

export interface WindowSettings {
  readonly sessions: Sessions;
  readonly userData: string;
  /** File of the built preload. */
  readonly preload: string;
}

/** A window of the program with the name its thread goes by. */
interface Open {
  readonly window: BrowserWindow;
  readonly name: string;
  standing: Standing | null;
  /** File on its way into the window: until it stands there, or can't, the window is not free for another. */
  coming: string | null;
}

/** The ground behind the page before it is drawn. */
const GROUND = { light: '#eceae4', dark: '#111416' };

/** The windows: each shows the page and holds at most one project. */
export class Windows {
  readonly #settings: WindowSettings;
  readonly #open = new Map<number, Open>();
  #count = 0;

  constructor(settings: WindowSettings) {
    this.#settings = settings;
    nativeTheme.on('updated', () => {
      for (const { window } of this.#open.values()) window.setBackgroundColor(ground());
    });
  }

  /** The name of a window's thread by its contents, null where it is none of ours. */
  nameOf(contents: number): string | null {
    return this.#open.get(contents)?.name ?? null;
  }

  windowOf(contents: number): BrowserWindow | null {
    return this.#open.get(contents)?.window ?? null;
  }

  get count(): number {
    return this.#open.size;
  }

  async make(file?: string): Promise<void> {
    const { maximised, ...frame } = await lastFrame(this.#settings.userData);
    const window = new BrowserWindow({
      ...frame,
      ...LEAST_SIZE,
      show: false,
      title: app.getName(),
      backgroundColor: ground(),
      webPreferences: {
        preload: this.#settings.preload,
        contextIsolation: true,
        sandbox: true,
        nodeIntegration: false,
        nodeIntegrationInWorker: false,
        nodeIntegrationInSubFrames: false,
        webSecurity: true,
        allowRunningInsecureContent: false,
        experimentalFeatures: false,
        webviewTag: false,
        navigateOnDragDrop: false,
        spellcheck: false,
      },
    });
    this.#count += 1;
    const open: Open = { window, name: `window-${process.pid}-${this.#count}`, standing: null, coming: null };
    const contents = window.webContents.id;
    this.#open.set(contents, open);
    const { sessions } = this.#settings;
    const stop = sessions.listen(open.name, (name, data) => {
      if (window.isDestroyed()) return;
      window.webContents.send(EVENT_CHANNEL, name, data);
      if (name === 'project') this.#stand(open, JSON.parse(data) as Standing);
      if (name === 'opened' || name === 'problem') open.coming = null;
    });
    keepFrame(window, this.#settings.userData);
    window.once('ready-to-show', () => {
      if (maximised) window.maximize();
      window.show();
    });
    // The title is the project's, whatever the page's own says.
    window.on('page-title-updated', (event) => event.preventDefault());
    window.on('closed', () => {
      stop();
      this.#open.delete(contents);
      void sessions.end(open.name);
    });
    window.webContents.on('render-process-gone', () => {
      // The project is held by its own thread: the page comes back to where it was.
      if (!window.isDestroyed()) window.webContents.reload();
    });
    if (file !== undefined) {
      open.coming = file;
      // The page must listen before it can hear of what was opened.
      window.webContents.once('did-finish-load', () => sessions.open(open.name, file));
    }
    await window.loadURL(PAGE_ADDRESS);
  }

  /** Opens a file: in the window that has it, else in one that holds nothing yet, else in a new one. */
  async openFile(file: string): Promise<void> {
    const all = [...this.#open.values()];
    const there = all.find(({ standing, coming }) => (coming ?? standing?.path) === file);
    if (there) return bringUp(there.window);
    const free = all.find(({ standing, coming }) => standing === null && coming === null);
    if (!free) return await this.make(file);
    free.coming = file;
    bringUp(free.window);
    this.#settings.sessions.open(free.name, file);
  }

  /** Brings the window last used to the front; makes one where there is none. */
  async bringUp(): Promise<void> {
    const [first] = this.#open.values();
    const window = BrowserWindow.getFocusedWindow() ?? first?.window;
    if (window) bringUp(window);
    else await this.make();
  }

  /** Sends a command of the menu to the page in front. */
  command(name: string): void {
    const focused = BrowserWindow.getFocusedWindow();
    const open = focused && this.#open.get(focused.webContents.id);
    if (open) this.#settings.sessions.emit(open.name, 'command', { name });
    else if (!focused) void this.bringUp();
  }

  #stand(open: Open, standing: Standing): void {
    open.standing = standing;
    open.window.setTitle(`${standing.name}${standing.edited ? ' (edited)' : ''} – ${app.getName()}`);
    open.window.setRepresentedFilename(standing.path ?? '');
    open.window.setDocumentEdited(standing.edited);
    if (standing.path) app.addRecentDocument(standing.path);
  }
}

function ground(): string {
  return nativeTheme.shouldUseDarkColors ? GROUND.dark : GROUND.light;
}

function bringUp(window: BrowserWindow): void {
  if (window.isMinimized()) window.restore();
  window.show();
  window.focus();
}
