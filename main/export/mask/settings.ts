import { rulesOf } from '../../../solver/checks/process.ts';
import type { Chip, Layer, Nm } from '../../../solver/chip/chip.ts';
import { Problem } from '../../../solver/problem/problem.ts';
import type { MaskOptions, WaferOptions } from '../../contract/mask.ts';

/** What a mask is drawn with: every option with its value, per layer where layers differ. */
export interface MaskSettings {
  readonly layers: readonly LayerSettings[];
  readonly chordError: Nm;
  readonly mirror: boolean;
  readonly polarity: 'dark-field' | 'clear-field';
  readonly pads: boolean;
  readonly marks: boolean;
  readonly labels: boolean;
  readonly outline: boolean;
  readonly lane: Nm;
  readonly wafer: WaferOptions | null;
  readonly separate: boolean;
  /** Line width of the marks: what the process resolves with a margin. */
  readonly markUnit: Nm;
}

export interface LayerSettings {
  readonly layer: Layer;
  /** Taken off the drawing on each side. */
  readonly undercut: Nm;
  readonly shrink: number;
  /** Size on the mask over size on the chip. */
  readonly scale: number;
}

const CHORD_ERROR = 100;
const LANE = 200_000;
/** Marks are drawn this much wider than what the process just resolves, and no finer than MARK_STEP. */
const MARK_MARGIN = 1.2;
const MARK_STEP = 5_000;
/** Where no process is named: what a film mask holds (common practice, no source). */
const FILM_WIDTH = 25_000;

/**
 * Options with their values for a chip. Throws a `Problem` where they name a layer that is not there, or
 * where the etch would close a channel.
 */
export function maskSettings(chip: Chip, options: MaskOptions): MaskSettings {
  const known = new Set(chip.layers.map(({ id }) => id));
  const named = [
    ...(options.layers ?? []),
    ...Object.keys(typeof options.undercut === 'object' ? options.undercut : {}),
    ...Object.keys(typeof options.shrink === 'object' ? options.shrink : {}),
  ];
  for (const id of named) {
    if (known.has(id)) continue;
    const all = [...known].map((name) => `"${name}"`).join(', ');
    throw new Problem('reference', `There is no layer "${id}".`, 'layers', `The chip has ${all}.`);
  }
  const wanted = new Set(options.layers ?? known);
  const layers = chip.layers
    .filter(({ id }) => wanted.has(id))
    .map((layer): LayerSettings => {
      const shrink = chosen(options.shrink, layer.id) ?? 0;
      const undercut = chosen(options.undercut, layer.id) ?? usualUndercut(chip, layer);
      return { layer, undercut, shrink, scale: 1 / (1 - shrink) };
    });
  for (const { layer, undercut } of layers) checkOpen(chip, layer.id, undercut);
  return {
    layers,
    chordError: options.chordError ?? CHORD_ERROR,
    mirror: options.mirror ?? false,
    polarity: options.polarity ?? 'dark-field',
    pads: options.pads ?? false,
    marks: options.marks ?? true,
    labels: options.labels ?? true,
    outline: options.outline ?? true,
    lane: options.lane ?? LANE,
    wafer: options.wafer ?? null,
    separate: options.separate ?? false,
    markUnit: markUnit(chip),
  };
}

function chosen(
  option: number | Readonly<Record<string, number>> | undefined,
  layer: string,
): number | undefined {
  if (typeof option !== 'object') return option;
  return Object.hasOwn(option, layer) ? option[layer] : undefined;
}

/**
 * What the process takes off on each side beyond what the drawn width means already: a rounded profile's
 * width is that of the mask, one depth of sideways etch included, and a measured one's is as it was made.
 */
function usualUndercut(chip: Chip, { depth, profile }: Layer): Nm {
  const ratio = chip.process ? rulesOf(chip.process).undercut?.number : undefined;
  if (ratio === undefined || profile.kind === 'polygon') return 0;
  const sideways = profile.kind === 'rounded' ? ratio - 1 : ratio;
  return Math.round(Math.max(0, sideways) * depth);
}

function checkOpen(chip: Chip, layer: string, undercut: Nm): void {
  for (const channel of chip.channels) {
    if (channel.layer !== layer) continue;
    const width = Math.min(...channel.width);
    if (width > 2 * undercut) continue;
    throw new Problem(
      'range',
      `The channel is ${width / 1000} µm wide and the etch takes ${undercut / 1000} µm off on each side: its mask would be closed.`,
      `channel ${channel.id}`,
      'Widen the channel, make it less deep, or give the undercut of this layer (0 for none).',
    );
  }
}

function markUnit(chip: Chip): Nm {
  const rules = chip.process ? rulesOf(chip.process) : undefined;
  const least = Math.max(rules?.leastWidth?.number ?? FILM_WIDTH, rules?.leastGap?.number ?? 0);
  // teeth that an etch widens must not grow together: the gap between them is three units
  const sideways = (rules?.undercut?.number ?? 0) * Math.max(...chip.layers.map(({ depth }) => depth));
  return Math.ceil(Math.max(MARK_MARGIN * least, sideways) / MARK_STEP) * MARK_STEP;
}
