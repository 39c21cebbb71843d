import { EventEmitter } from 'node:events';

/**
 * A small double of the desktop's module: it does nothing by itself and notes everything that the
 * program registers, sets and asks for, so that a test can look at it and play the system's part.
 */
export interface Noted {
  appPath: string;
  argv: string[];
  /** Whether this is the first run of the program. */
  first: boolean;
  quits: number;
  sandboxed: boolean;
  /** Switches of the browser that were set before it started. */
  switches: string[];
  schemes: { scheme: string; privileges: Record<string, boolean> }[];
  handlers: Map<string, (event: unknown, ...args: unknown[]) => Promise<unknown>>;
  served: Map<string, (request: Request) => Promise<Response>>;
  windows: BrowserWindow[];
  menu: MenuItem[];
  recent: string[];
  dialogs: { kind: string; options: Record<string, unknown> }[];
  /** What the next dialog answers. */
  answer: Record<string, unknown>;
  displays: { workArea: Rect }[];
  dark: boolean;
  session: DoubleSession;
}

interface Rect {
  x: number;
  y: number;
  width: number;
  height: number;
}

export interface MenuItem {
  readonly label?: string;
  readonly role?: string;
  readonly click?: () => void;
  readonly submenu?: readonly MenuItem[];
}

class DoubleSession extends EventEmitter {
  permissionRequest:
    | ((contents: unknown, permission: string, callback: (granted: boolean) => void, details: object) => void)
    | null = null;
  permissionCheck:
    | ((contents: unknown, permission: string, origin: string, details: object) => boolean)
    | null = null;
  device: (() => boolean) | null = null;
  display: ((request: unknown, callback: (streams: object) => void) => void) | null = null;
  beforeRequest:
    | ((details: { url: string }, callback: (answer: { cancel?: boolean }) => void) => void)
    | null = null;
  readonly protocol = {
    handle: (scheme: string, handler: (request: Request) => Promise<Response>) =>
      noted.served.set(scheme, handler),
  };
  readonly webRequest = {
    onBeforeRequest: (listener: DoubleSession['beforeRequest']) => {
      this.beforeRequest = listener;
    },
  };
  setPermissionRequestHandler(handler: DoubleSession['permissionRequest']): void {
    this.permissionRequest = handler;
  }
  setPermissionCheckHandler(handler: DoubleSession['permissionCheck']): void {
    this.permissionCheck = handler;
  }
  setDevicePermissionHandler(handler: DoubleSession['device']): void {
    this.device = handler;
  }
  setDisplayMediaRequestHandler(handler: DoubleSession['display']): void {
    this.display = handler;
  }
}

export const noted: Noted = {
  appPath: '',
  argv: [],
  first: true,
  quits: 0,
  sandboxed: false,
  switches: [],
  schemes: [],
  handlers: new Map(),
  served: new Map(),
  windows: [],
  menu: [],
  recent: [],
  dialogs: [],
  answer: {},
  displays: [{ workArea: { x: 0, y: 0, width: 1920, height: 1040 } }],
  dark: false,
  session: new DoubleSession(),
};

class DoubleApp extends EventEmitter {
  ready!: () => void;
  #started = false;
  readonly #ready = new Promise<void>((done) => {
    this.ready = () => {
      this.#started = true;
      done();
    };
  });
  whenReady = (): Promise<void> => this.#ready;
  getAppPath = (): string => noted.appPath;
  getVersion = (): string => '1.2.3';
  getName = (): string => 'Channelwright';
  setName = (): void => undefined;
  setAppUserModelId = (): void => undefined;
  enableSandbox = (): void => {
    noted.sandboxed = true;
  };
  commandLine = {
    appendSwitch: (name: string, value = ''): void => {
      // Chromium reads its switches when it starts
      if (!this.#started) noted.switches.push(`--${name}=${value}`);
    },
  };
  requestSingleInstanceLock = (): boolean => noted.first;
  addRecentDocument = (path: string): void => {
    noted.recent.push(path);
  };
  quit = (): void => {
    noted.quits += 1;
    let prevented = false;
    this.emit('before-quit', { preventDefault: () => (prevented = true) });
    if (!prevented) for (const window of [...noted.windows]) window.close();
  };
}
export const app = new DoubleApp();

export class WebContents extends EventEmitter {
  readonly id: number;
  readonly mainFrame = { url: 'about:blank' };
  readonly sent: unknown[][] = [];
  opening: (() => { action: string }) | null = null;
  reloads = 0;
  constructor(id: number) {
    super();
    this.id = id;
  }
  send(...message: unknown[]): void {
    this.sent.push(message);
  }
  setWindowOpenHandler(handler: () => { action: string }): void {
    this.opening = handler;
  }
  reload(): void {
    this.reloads += 1;
  }
}

let ids = 0;

export class BrowserWindow extends EventEmitter {
  readonly options: Record<string, unknown>;
  readonly webContents: WebContents;
  title = '';
  represented = '';
  edited = false;
  shown = 0;
  focused = false;
  maximised = false;
  destroyed = false;
  bounds: Rect = { x: 10, y: 20, width: 1000, height: 700 };

  static getFocusedWindow(): BrowserWindow | null {
    return noted.windows.find((window) => window.focused) ?? null;
  }

  constructor(options: Record<string, unknown>) {
    super();
    this.options = options;
    ids += 1;
    this.webContents = new WebContents(ids);
    noted.windows.push(this);
    app.emit('web-contents-created', {}, this.webContents);
  }
  async loadURL(url: string): Promise<void> {
    this.webContents.mainFrame.url = url;
    this.emit('ready-to-show');
    this.webContents.emit('did-finish-load');
  }
  close(): void {
    this.emit('close');
    this.destroyed = true;
    noted.windows.splice(noted.windows.indexOf(this), 1);
    this.emit('closed');
    if (noted.windows.length === 0) app.emit('window-all-closed');
  }
  setTitle(title: string): void {
    this.title = title;
  }
  setRepresentedFilename(path: string): void {
    this.represented = path;
  }
  setDocumentEdited(edited: boolean): void {
    this.edited = edited;
  }
  setBackgroundColor(color: string): void {
    this.options.backgroundColor = color;
  }
  show(): void {
    this.shown += 1;
  }
  focus(): void {
    for (const window of noted.windows) window.focused = false;
    this.focused = true;
  }
  maximize(): void {
    this.maximised = true;
  }
  restore(): void {}
  isMinimized = (): boolean => false;
  isMaximized = (): boolean => this.maximised;
  isFullScreen = (): boolean => false;
  isDestroyed = (): boolean => this.destroyed;
  getNormalBounds = (): Rect => this.bounds;
}

export const protocol = {
  registerSchemesAsPrivileged: (schemes: Noted['schemes']): void => {
    noted.schemes.push(...schemes);
  },
};

export const ipcMain = {
  handle: (channel: string, handler: (event: unknown, ...args: unknown[]) => Promise<unknown>): void => {
    noted.handlers.set(channel, handler);
  },
};

export const session = { defaultSession: noted.session };

export const Menu = {
  buildFromTemplate: (template: MenuItem[]): MenuItem[] => template,
  setApplicationMenu: (menu: MenuItem[]): void => {
    noted.menu = menu;
  },
};

export const dialog = {
  showOpenDialog: async (_window: unknown, options: Record<string, unknown>): Promise<unknown> => {
    noted.dialogs.push({ kind: 'open', options });
    return noted.answer;
  },
  showSaveDialog: async (_window: unknown, options: Record<string, unknown>): Promise<unknown> => {
    noted.dialogs.push({ kind: 'save', options });
    return noted.answer;
  },
};

export const screen = {
  getDisplayMatching: (): { workArea: Rect } => noted.displays[0]!,
  getAllDisplays: (): { workArea: Rect }[] => noted.displays,
};

class DoubleTheme extends EventEmitter {
  get shouldUseDarkColors(): boolean {
    return noted.dark;
  }
}
export const nativeTheme = new DoubleTheme();
