import type { Layer } from '../chip/chip.ts';
import type { Piece } from '../chip/graph.ts';
import type { Evidence, StretchEvidence } from './evidence.ts';
import type { Found, Gathered } from './gather.ts';
import { CREEPING, entranceError, entranceLength, softRoofError } from './leave-out.ts';
import type { ProcessRules } from './process.ts';
import { digits, length, METRE, percent, placeOf } from './words.ts';

/** Above these the finding stands; they are told in `kinds.ts`. */
const TURBULENT = 2000;
const DEVELOPING = 0.1;
const FLAT = 20;
const LOOSE = 1.5;
const UPRIGHT = 0.01;
/** Usual operating window, K. */
const WINDOW = [277.15, 323.15] as const;
const BLOOD = 0.3e-3;
const SOFT = 0.05;
/** What the solved numbers leave out, for every stretch, junction and the chip. */
export function checkTrust(evidence: Evidence, rules: ProcessRules | null, found: Gathered): void {
  const { chip, graph, fluid } = evidence;
  const bloody = isBlood(evidence);
  for (const stretch of evidence.stretches) {
    const piece = graph.pieces[stretch.piece]!;
    const layer = chip.layers[piece.layerIndex]!;
    const add = (finding: Omit<Found, 'where' | 'at'>): void =>
      found.add({ ...finding, where: stretch.name, at: midst(piece) });
    const reynolds = stretch.result.reynolds ?? 0;
    if (reynolds > TURBULENT) {
      add({
        kind: 'turbulent',
        severity: 'stop',
        says: `The Reynolds number in ${stretch.name} is ${digits(reynolds)}, above 2000: the flow is not laminar there, and no figure of it holds.`,
        do: `Slow the flow by a factor of ${digits(reynolds / TURBULENT)} or more.`,
        value: reynolds,
        threshold: TURBULENT,
        off: reynolds / TURBULENT,
      });
    } else if (reynolds > CREEPING) entrance(stretch, reynolds, fluid.density, add);
    const depth = chip.channels[piece.channelIndex]!.depth ?? layer.depth;
    const narrow = Math.min(stretch.width[0], stretch.width[1], depth / METRE);
    if (bloody && narrow < BLOOD) {
      add({
        kind: 'blood-narrow',
        severity: 'warn',
        says: `${stretch.name} is ${length(narrow * METRE)} across; below 300 µm blood is no continuum: cells leave the walls and it seems thinner (Fåhræus and Lindqvist 1931).`,
        do: 'Take the flow there for a lower bound, or measure it.',
        value: narrow,
        threshold: BLOOD,
        off: BLOOD / narrow,
      });
    }
    if (rules?.modulus && !layer.roof) softRoof(stretch, layer, depth, rules, add);
  }
  flatChannels(evidence, found);
  junctions(evidence, found);
  temperature(evidence, found);
}

/** Middle of a piece's path, m. */
function midst({ path }: Piece): readonly [number, number] {
  const half = path.length >> 1;
  const p = path[half - 1]!;
  const q = path[half]!;
  return placeOf((p.x + q.x) / 2, (p.y + q.y) / 2);
}

/** Junctions solved less exactly than was asked, or with upright walls in place of their own. */
function junctions({ cells, asked }: Evidence, found: Gathered): void {
  for (const { id, at, accuracy, upright, uprightPeak, depths } of cells) {
    if (depths > UPRIGHT) {
      found.add({
        kind: 'mixed-depths',
        severity: depths > 5 * UPRIGHT ? 'warn' : 'note',
        where: id,
        at,
        says: `Channels of different depths meet in ${id}, which is solved at one depth between them: resistance inside may be ${percent(depths)} off.`,
        do: 'Take that for the error of the split there, or give what meets there one depth.',
        value: depths,
        threshold: UPRIGHT,
        error: depths,
        off: depths / UPRIGHT,
      });
    }
    if (accuracy > LOOSE * asked) {
      found.add({
        kind: 'cell-accuracy',
        severity: accuracy > 5 * LOOSE * asked ? 'warn' : 'note',
        where: id,
        at,
        says: `${id} is solved to ${percent(accuracy)}; ${percent(asked)} was asked.`,
        do: 'Take that for the error of the split there, or simplify the shape: memory or rounds ran out.',
        value: accuracy,
        threshold: LOOSE * asked,
        error: accuracy,
        off: accuracy / (LOOSE * asked),
      });
    }
    if (upright > UPRIGHT || uprightPeak === null) {
      const peak = uprightPeak === null ? 'is not given' : `may be ${percent(uprightPeak)} off`;
      found.add({
        kind: 'upright-walls',
        severity: upright > 5 * UPRIGHT ? 'warn' : 'note',
        where: id,
        at,
        says: `${id} is solved with upright walls of the same area in place of its layer's own: its flows may be ${percent(upright)} off, and its peak shear ${peak}.`,
        do: 'Take that for the error of the split there, or make the layer shallower for its width.',
        value: upright,
        threshold: UPRIGHT,
        error: upright,
        off: upright / UPRIGHT,
      });
    }
  }
}

function temperature({ chip }: Evidence, found: Gathered): void {
  if (!('temperature' in chip.fluid)) return;
  const { temperature: kelvin } = chip.fluid;
  const bound = kelvin < WINDOW[0] ? WINDOW[0] : WINDOW[1];
  if (kelvin >= WINDOW[0] && kelvin <= WINDOW[1]) return;
  const celsius = (value: number): string => `${digits(value - 273.15, 3)} °C`;
  found.add({
    kind: 'temperature',
    severity: 'note',
    where: '',
    says: `The fluid is at ${celsius(kelvin)}; chips, bonds and fittings are usually run at ${celsius(WINDOW[0])} to ${celsius(WINDOW[1])}.`,
    do: 'See that chip, bond and fittings bear it, and that the chip is as warm as the fluid: viscosity goes with the temperature inside.',
    value: kelvin,
    threshold: bound,
    off: 1 + Math.abs(kelvin - bound),
  });
}

function entrance(
  { name, result, hydraulicDiameter, area }: StretchEvidence,
  reynolds: number,
  density: number,
  add: (finding: Omit<Found, 'where' | 'at'>) => void,
): void {
  const share = (hydraulicDiameter * entranceLength(reynolds)) / result.length;
  if (share <= DEVELOPING) return;
  const error = entranceError(result, area, density);
  add({
    kind: 'entrance-length',
    severity: share > 5 * DEVELOPING && error > 0.05 ? 'warn' : 'note',
    says: `In ${name} the flow takes ${percent(Math.min(1, share))} of the length to develop (Re ${digits(reynolds)}; Durst et al. 2005): its pressure drop may be ${percent(error)} too low.`,
    do: 'Take that for its error, make it longer, or slow the flow.',
    value: share,
    threshold: DEVELOPING,
    error,
    off: share / DEVELOPING,
  });
}

/** By how much a soft roof that gives by x of the depth at the inlet lets more through. */
function softRoof(
  { name, pressure, width }: StretchEvidence,
  layer: Layer,
  depth: number,
  rules: ProcessRules,
  add: (finding: Omit<Found, 'where' | 'at'>) => void,
): void {
  const modulus = rules.modulus!;
  const most = Math.max(Math.abs(pressure[0]), Math.abs(pressure[1]));
  const x = (Math.max(...width) * most) / (modulus.number * (depth / METRE));
  if (x <= SOFT) return;
  const error = softRoofError(x);
  const roof = { modulus: modulus.number, thickness: 5e-3, poisson: 0.5 };
  add({
    kind: 'soft-roof',
    severity: 'warn',
    says: `The roof of ${name} gives: W p/(E h) is ${digits(x)} at ${digits(most / 1000, 3)} kPa with ${digits(modulus.number / 1e6)} MPa (${modulus.source}); up to ${percent(error)} more flows than is reckoned.`,
    do: `Give layer ${layer.id} its roof, so that it is reckoned with, or choose a rigid lid.`,
    value: x,
    threshold: SOFT,
    error,
    remedy: {
      label: `give layer ${layer.id} a soft roof 5 mm thick`,
      changes: [{ kind: 'put', list: 'layers', id: layer.id, part: { ...layer, roof } }],
    },
    off: x / SOFT,
  });
}

function flatChannels({ chip }: Evidence, found: Gathered): void {
  const layers = new Map(chip.layers.map((layer) => [layer.id, layer]));
  for (const { id, layer: layerId, width, path, depth: own } of chip.channels) {
    const layer = layers.get(layerId)!;
    const depth = own ?? layer.depth;
    const ratio = Math.max(Math.max(...width) / depth, depth / Math.min(...width));
    if (ratio <= FLAT) continue;
    const share =
      layer.tolerance?.depth && 'share' in layer.tolerance.depth ? layer.tolerance.depth.share : null;
    found.add({
      kind: 'aspect-ratio',
      severity: 'note',
      where: id,
      at: placeOf(...path[0]!),
      says: `${id} is ${digits(ratio)} times as ${Math.max(...width) > depth ? 'wide as deep' : 'deep as wide'}: an error of the smaller counts three times in its resistance${share === null ? '' : `, ${percent(3 * share)} for the layer’s tolerance`}.`,
      do: 'Measure the smaller of the two, and give the layer its tolerance.',
      value: ratio,
      threshold: FLAT,
      ...(share !== null && { error: 3 * share }),
      off: ratio / FLAT,
    });
  }
}

function isBlood({ chip, fluid }: Evidence): boolean {
  if ('name' in chip.fluid) return chip.fluid.name === 'blood';
  return fluid.shear?.kind === 'casson';
}
