import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import { type DuctFlowLaw, type DuctLaws, ductLaws } from '../section/rheology/duct-law.ts';
import type { Rheology } from '../section/rheology/local.ts';
import { channelDepth, type Stretch } from './stretches.ts';

/** Keeps what was solved for one fluid while the chip is edited. */
export interface LawMemory {
  of(rheology: Rheology): DuctLaws;
}

export function lawMemory(): LawMemory {
  let key = '';
  let laws: DuctLaws | null = null;
  return {
    of(rheology) {
      const now = JSON.stringify(rheology);
      if (!laws || now !== key) {
        key = now;
        laws = ductLaws(rheology);
      }
      return laws;
    },
  };
}

/**
 * The law of every stretch where the fluid thins or a layer's roof gives; null where all are linear.
 * The caller appends those of tubing.
 */
export function chipLaws(
  chip: Chip,
  graph: Graph,
  rheology: Rheology,
  stretches: readonly Stretch[],
  memory: LawMemory,
): DuctFlowLaw[] | null {
  if (!('shear' in rheology) && chip.layers.every((layer) => layer.roof === undefined)) return null;
  const laws = memory.of(rheology);
  return stretches.map((stretch) => {
    const piece = graph.pieces[stretch.piece];
    const layer = chip.layers[piece.layerIndex];
    return laws.law(
      {
        profile: layer.profile,
        width: stretch.width,
        depth: channelDepth(chip, piece),
        length: stretch.length,
        ...(layer.roof ? { roof: layer.roof } : {}),
      },
      piece.channel,
    );
  });
}
