import type { Change } from '../../solver/chip/edit.ts';
import { readEdit } from '../../solver/chip/edit-read.ts';
import type { Finding } from '../../solver/problem/finding.ts';
import type { Alteration, PartValue, Whole } from '../tools/tool.ts';

const KINDS = {
  channels: 'channel',
  chambers: 'chamber',
  vias: 'via',
  ports: 'port',
  keepOuts: 'keep-out',
} as const;

/** What the remedy of a finding changes, as hands would; `layers` are the chip's, of which it may change one. */
export function remedyOf(
  remedy: NonNullable<Finding['remedy']>,
  layers: NonNullable<Whole['layers']>,
): Alteration {
  const { label, changes } = readEdit(remedy);
  const put: PartValue[] = [];
  let set: Whole = {};
  let next = layers;
  for (const change of changes as readonly Extract<Change, { kind: 'put' | 'set' }>[]) {
    if (change.kind === 'set') {
      set = { ...set, [change.key]: change.value };
    } else if (change.list === 'layers') {
      next = next.map((layer) => (layer.id === change.id ? change.part : layer));
    } else put.push({ kind: KINDS[change.list], value: change.part } as PartValue);
  }
  if (next !== layers) set = { ...set, layers: next };
  return { label, put, ...(Object.keys(set).length > 0 && { set }) };
}
