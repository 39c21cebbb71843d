import { basename, extname } from 'node:path';
import { Workplace, type WorkplaceSettings } from '../../db/workplace.ts';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { EventData, EventName, ProjectState } from '../contract/contract.ts';
import { readText } from '../files/read.ts';
import { forgetRecent, noteRecent } from '../user/recent.ts';
import type { SessionSettings } from './messages.ts';
import { refusal } from './refusal.ts';

/** What one window has open, in its own thread. */
export class Session {
  readonly settings: SessionSettings;
  readonly #send: (name: string, data: unknown) => void;
  #open: Workplace | null = null;
  /** What the host and the page were last told of whether anything was done. */
  #toldEdited = false;
  #opening = 0;

  constructor(settings: SessionSettings, send: (name: string, data: unknown) => void) {
    this.settings = settings;
    this.#send = send;
  }

  emit<N extends EventName>(name: N, data: EventData<N>): void {
    this.#send(name, data);
  }

  get workplaceSettings(): WorkplaceSettings {
    return {
      userData: this.settings.userData,
      program: this.settings.version,
      onChange: () => this.#tell(),
      onTrouble: ({ kind, what, where, remedy }) => this.emit('problem', { kind, what, where, remedy }),
    };
  }

  /** The open project; refuses where there is none. */
  get workplace(): Workplace {
    if (!this.#open)
      throw new Problem('project', 'No project is open in this window.', '', 'Open one, or begin a new one.');
    return this.#open;
  }

  get state(): ProjectState | null {
    if (!this.#open) return null;
    const { project, standing, notes } = this.#open;
    return {
      ...standing,
      ...project.position,
      chip: project.chip,
      view: { ...project.view } as ProjectState['view'],
      notes: [...notes],
      opening: this.#opening,
    };
  }

  /** Call after every step: the file is made whole when no further one follows, and the first one is told. */
  touched(): void {
    this.workplace.touched();
    const { edited } = this.workplace.standing;
    if (edited !== this.#toldEdited) this.#tell();
  }

  #tell(): void {
    if (!this.#open) return;
    const { standing } = this.#open;
    this.#toldEdited = standing.edited;
    this.emit('project', standing);
  }

  /** Opens a file in this window; what was open is closed once the new one is there. */
  async open(path: string): Promise<ProjectState> {
    const before = this.#open;
    // The same file again: closed first, or it would find itself in use.
    if (before && before.path === path) await this.close();
    return await this.#take(await Workplace.open(this.workplaceSettings, path));
  }

  /** Opens what the system or the command line names, unasked by the page: a project or a description. */
  async openUnasked(path: string): Promise<void> {
    try {
      const state = /\.json$/i.test(path)
        ? await this.draft(readDescription(await readText(path), basename(path, extname(path))))
        : await this.open(path);
      this.emit('opened', { opening: state.opening });
    } catch (error) {
      this.emit('problem', refusal(error));
    }
  }

  async draft(chip: Chip): Promise<ProjectState> {
    return await this.#take(await Workplace.draft(this.workplaceSettings, chip));
  }

  async saveAs(path: string, replace: boolean): Promise<void> {
    const before = this.workplace;
    this.#open = await before.saveAs(path, replace);
    if (before.standing.mode === 'draft') await forgetRecent(this.settings.userData, before.path);
    await this.#noteRecent();
    this.#tell();
  }

  /** Closes what is open; everything acknowledged is kept. */
  async close(): Promise<void> {
    const open = this.#open;
    this.#open = null;
    await open?.close();
  }

  async #take(next: Workplace): Promise<ProjectState> {
    const before = this.#open;
    this.#open = next;
    this.#opening += 1;
    await before?.close();
    await this.#noteRecent();
    this.#tell();
    return this.state!;
  }

  async #noteRecent(): Promise<void> {
    if (!this.#open) return;
    const { path, standing } = this.#open;
    const name = standing.mode === 'draft' ? standing.name : undefined;
    // A list that cannot be written is no reason to fail what was asked for.
    await noteRecent(this.settings.userData, path, name).catch(() => undefined);
  }
}
