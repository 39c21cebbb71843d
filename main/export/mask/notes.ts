import type { Shared } from './array.ts';
import { markLegend, markRange } from './marks.ts';
import type { LayerSettings, MaskSettings } from './settings.ts';
import type { WaferLayout } from './wafer.ts';

/** What a mask says of itself, in sentences that stand in every format. */

const CAUTIONS = [
  'Computed shear limits are no evidence that cells survive: confirm with your own cells. Not for diagnosis or treatment.',
  'Pressurised glass, tubing and fittings can burst: respect their ratings, wear eye protection. Resists, etchants (HF in particular) and solvents: local safety rules, trained supervision.',
];

const um = (nm: number): string => `${Number((nm / 1000).toFixed(3))} µm`;
const mm = (nm: number): string => `${Number((nm / 1e6).toFixed(4))} mm`;

export function commonNotes(
  settings: MaskSettings,
  {
    drawings,
    wafer,
    shared,
  }: {
    readonly drawings: number;
    readonly wafer: WaferLayout | null;
    readonly shared: Shared;
  },
): string[] {
  const { polarity, mirror, chordError, marks, markUnit, lane } = settings;
  const notes = [
    polarity === 'dark-field'
      ? 'Dark field: what is drawn is clear on a dark plate.'
      : 'Clear field: what is drawn is dark on a clear plate.',
    'An outline inside another is a wall. Corners are drawn sharp.',
    mirror
      ? 'Mirrored left to right: the side of the mould.'
      : 'Not mirrored: as the chip is drawn, seen from the side of its channels.',
    `Arcs are true where the format has them; elsewhere chords lie within ${um(chordError)} of them.`,
  ];
  if (lane > 0) {
    notes.push(
      `The dicing lane is ${um(lane)} wide, outside the outline${shared.lane ? '; where two chips meet they share one' : ''}.`,
    );
  }
  if (wafer) {
    const count = wafer.centres.length;
    const chips = count === 1 ? '1 chip' : `${count} chips`;
    notes.push(
      `${chips} on a wafer of ${mm(wafer.diameter)}, edge ${mm(wafer.edge)} kept free, pitch ${mm(wafer.pitch[0])} × ${mm(wafer.pitch[1])}.`,
    );
  }
  if (marks && drawings > 1) {
    notes.push(
      `${markLegend(markUnit)} Range ±${um(markRange(markUnit))}; set the cross in its window first.`,
    );
    if (shared.marks) notes.push('Marks stand to the right of each chip; the next one shares them.');
    if (drawings > 2)
      notes.push('Pairs of marks from the top: the first drawing with the second, the third, and so on.');
  } else if (marks) notes.push('No alignment marks: there is only one drawing.');
  return [...notes, ...CAUTIONS];
}

export function layerNotes({ layer, undercut, shrink, scale }: LayerSettings): string[] {
  const notes = [`Depth ${um(layer.depth)}.`];
  notes.push(
    undercut > 0
      ? `Etch compensation: ${um(undercut)} taken off on each side of the cavities (marks, lane and outline as drawn).`
      : 'No etch compensation.',
  );
  notes.push(
    shrink > 0
      ? `Scaled by ${scale.toFixed(6)} about the centre of the chip for a moulding shrinkage of ${Number((shrink * 100).toFixed(4))} %.`
      : 'Scale 1, no shrinkage.',
  );
  return notes;
}
