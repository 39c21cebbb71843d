import { rulesOf } from '../../../solver/checks/process.ts';
import type { Chip } from '../../../solver/chip/chip.ts';
import type { MaskReport } from '../../contract/mask.ts';
import type { MaskSettings } from './settings.ts';

const um = (nm: number): string => `${Number((nm / 1000).toFixed(3))} µm`;

/** Openings that are narrower on the mask than the process holds, those accepted on the chip aside. */
export function openingFindings(chip: Chip, settings: MaskSettings): MaskReport['findings'] {
  const rules = chip.process ? rulesOf(chip.process) : undefined;
  const least = rules?.leastWidth;
  if (!rules || !least) return [];
  const accepted = new Set(
    (chip.accepted ?? []).filter(({ kind }) => kind === 'least-width').map(({ where }) => where),
  );
  const undercuts = new Map(settings.layers.map(({ layer, undercut }) => [layer.id, undercut]));
  return chip.channels.flatMap(({ id, layer, width }) => {
    const undercut = undercuts.get(layer);
    if (undercut === undefined || accepted.has(id)) return [];
    const opening = Math.min(...width) - 2 * undercut;
    if (opening >= least.number) return [];
    const says = `The opening of ${id} is ${um(opening)} wide on the mask; ${rules.name} holds ${um(least.number)} (${least.source}).`;
    return [{ where: id, says }];
  });
}
