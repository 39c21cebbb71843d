import type { Chip } from '../../solver/chip/chip.ts';
import { writeDescription } from '../../solver/chip/description-write.ts';
import type { Ref } from '../state/ref.ts';
import type { PartValue } from '../tools/tool.ts';
import { findParts } from './parts.ts';

/** The selection as a chip description: what the clipboard carries, between windows and into a text. */
export function clipText(chip: Chip, refs: readonly Ref[]): string | null {
  const parts = findParts(chip, refs);
  if (parts.length === 0) return null;
  const ids = new Set(parts.map((part) => part.value.id));
  const of = <K extends PartValue['kind']>(kind: K) =>
    parts.filter((part) => part.kind === kind).map((part) => part.value) as Extract<
      PartValue,
      { kind: K }
    >['value'][];
  return writeDescription({
    ...chip,
    note: '',
    channels: of('channel'),
    chambers: of('chamber'),
    vias: of('via'),
    ports: of('port'),
    keepOuts: of('keep-out'),
    targets: chip.targets.filter((target) => ids.has('port' in target ? target.port : target.channel)),
    limits: [],
  });
}
