import type { Camera, Size } from '../sheet/camera.ts';
import type { Overlay } from '../sheet/overlay.ts';
import { FIRST_HABITS, type Habits, type ToolName } from '../tools/tool.ts';
import type { Ref } from './ref.ts';

export const TABS = ['ports', 'channels', 'routes', 'junctions', 'findings'] as const;
export type Tab = (typeof TABS)[number];

/** A panel that takes the place of the card. */
export type Panel =
  | 'card'
  | 'repeat'
  | 'chip'
  | 'plots'
  | 'trials'
  | 'as built'
  | 'hand over'
  | 'bring in'
  | 'history'
  | 'keys'
  | 'about';

/** A place on the disk that is asked for. */
export interface FileWish {
  readonly purpose: 'open' | 'save';
  readonly title: string;
  /** "Project" */
  readonly kind: string;
  readonly extensions: readonly string[];
  readonly suggest?: string;
  done(path: string | null): void;
}

/** What is of the view alone: nothing of it enters the project. */
export interface View {
  readonly selection: readonly Ref[];
  /** Parts that must stay where they are; kept with the project, and no part of the chip. */
  readonly locked: ReadonlySet<Ref>;
  readonly tool: ToolName;
  readonly overlay: Overlay;
  /** Id of the layer drawn on; '' is the first. */
  readonly layer: string;
  /** Null until the sheet has a size: then the chip is fitted. */
  readonly camera: Camera | null;
  readonly size: Size;
  readonly habits: Habits;
  readonly tab: Tab;
  readonly panel: Panel;
  /** "route:in>out", the one the plots show; '' is the first. */
  readonly route: Ref;
  readonly palette: boolean;
  readonly files: FileWish | null;
  /** One sentence about what was not done and why; '' where there is nothing to say. */
  readonly says: string;
  /** Lines of equal flow inside solved junctions. */
  readonly streamlines: boolean;
}

export const FIRST_VIEW: View = {
  selection: [],
  locked: new Set(),
  tool: 'select',
  overlay: 'wall shear',
  layer: '',
  camera: null,
  size: { width: 0, height: 0 },
  habits: FIRST_HABITS,
  tab: 'ports',
  panel: 'card',
  route: '',
  palette: false,
  files: null,
  says: '',
  streamlines: false,
};
