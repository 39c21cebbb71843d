/** What passes between a host and the thread that holds a window's project. */
export interface SessionSettings {
  readonly host: 'desktop' | 'browser';
  /** Whether the host answers `files.choose` itself. */
  readonly dialogs: boolean;
  /** Folder for drafts, private copies, backups and preferences. */
  readonly userData: string;
  /** Folder with the demos and reference data. */
  readonly assets: string;
  readonly version: string;
}

export type ToWorker =
  | { readonly kind: 'request'; readonly id: number; readonly name: string; readonly body: Uint8Array }
  /** Open a file that the system or the command line names. */
  | { readonly kind: 'open'; readonly path: string }
  /** Close the project and end. */
  | { readonly kind: 'end' };

export type FromWorker =
  | { readonly kind: 'reply'; readonly id: number; readonly body: Uint8Array }
  | { readonly kind: 'event'; readonly name: string; readonly data: string };
