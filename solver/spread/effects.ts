import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import { ductOf } from '../lump/duct.ts';
import type { Lumped } from '../lump/lump.ts';
import { channelDepth, type Stretch } from '../lump/stretches.ts';
import type { Gradient } from '../network/sensitivity.ts';
import type { NetworkSolution } from '../network/spec.ts';
import { roofLaw } from '../section/roof/roof.ts';
import { innerFlows, insideOf } from './inside.ts';
import { knownSlopes, type Slope, type Slopes } from './slopes.ts';
import type { Reach, Sources } from './sources.ts';

/** A relative change for each source with its tolerance used up. */
type Change = readonly { readonly source: number; readonly by: number }[];

/** What the tolerances do to each part of the network, before any flow is asked for. */
export interface Effects {
  /** Fall of each duct's flow at its own pressure drop, relative (of its resistance, where that is constant). */
  readonly ducts: Changes;
  /** Peak wall shear of each reported stretch at a given flow. */
  readonly shear: Changes;
  /** Relative change of that shear per relative change of the flow: 1 where the resistance is constant. */
  readonly shearByFlow: Float64Array;
  readonly cells: readonly CellEffects[];
}

/** A solved cell: its depth scales all of it, its channels' widths act along their centrelines. */
interface CellEffects {
  readonly block: number;
  readonly depth: Change;
  /** Of each stretch inside: its resistance times its flow, Pa, and the change of its resistance. */
  readonly inner: readonly { readonly weight: number; readonly change: Change }[];
  flows(into: ArrayLike<number>): Float64Array;
}

export interface Net {
  readonly chip: Chip;
  readonly graph: Graph;
  readonly lumped: Lumped;
  readonly flow: NetworkSolution;
}

const changeOf = (slope: Slope, depth: readonly Reach[], width: readonly Reach[], h: number): Change => [
  ...depth.map((reach) => ({
    source: reach.source,
    by: slope.depth * ('share' in reach ? reach.share : reach.length / h),
  })),
  ...width.map((reach) => ({
    source: reach.source,
    by: 'share' in reach ? slope.width * reach.share : slope.shift * reach.length,
  })),
];

/** The changes of many parts, packed: every adjoint flow goes over all of them. */
interface Changes {
  readonly count: number;
  /** Adds `factor` times the changes of part `e` to what each source does. */
  add(e: number, by: Float64Array, factor: number): void;
}

function changesOf(list: readonly Change[]): Changes {
  const start = new Int32Array(list.length + 1);
  list.forEach((change, e) => {
    start[e + 1] = start[e] + change.length;
  });
  const flat = list.flat();
  const source = Int32Array.from(flat, (one) => one.source);
  const amount = Float64Array.from(flat, (one) => one.by);
  return {
    count: list.length,
    add(e, by, factor) {
      if (factor === 0) return;
      for (let k = start[e]; k < start[e + 1]; k += 1) by[source[k]] += factor * amount[k];
    },
  };
}

/** Sums of powers: a ln x + b ln y. */
const plus = (a: Slope, b: Slope, factor: number): Slope => ({
  depth: a.depth + factor * b.depth,
  width: a.width + factor * b.width,
  shift: a.shift + factor * b.shift,
});

export function effectsOf(net: Net, sources: Sources): Effects {
  const { graph, lumped } = net;
  const all = lumped.inner.length === 0 ? lumped.stretches : [...lumped.stretches, ...lumped.inner];
  const shearByFlow = new Float64Array(lumped.stretches.length).fill(1);
  const shear: Change[] = [];
  const ducts = all.map((stretch, e): Change => {
    const piece = graph.pieces[stretch.piece];
    const { depth, width } = sources.channels[piece.channelIndex];
    if (depth.length === 0 && width.length === 0 && e >= lumped.stretches.length) return [];
    const { slopes, h } = stretchSlopes(net, stretch);
    const { resistance, power } = answering(net, stretch, e, slopes, h);
    if (e < lumped.stretches.length) {
      shearByFlow[e] = 1 / power;
      // Shear = gradient times length, and the gradient follows the resistance at a given flow.
      shear.push(changeOf(plus(slopes.shear, resistance, 1 / power), depth, width, h));
    }
    return changeOf(resistance, depth, width, h);
  });
  const cells = lumped.cells.flatMap((_, index) => cellEffects(net, sources, index));
  return { ducts: changesOf(ducts), shear: changesOf(shear), shearByFlow, cells };
}

function stretchSlopes({ chip, graph }: Net, { piece: index, width }: Pick<Stretch, 'piece' | 'width'>) {
  const piece = graph.pieces[index];
  const h = channelDepth(chip, piece);
  return { slopes: knownSlopes(chip.layers[piece.layerIndex].profile, width, h, piece.channel), h };
}

/**
 * The slope of a duct's answer where it follows a law: Q ~ K s^(m − 1) with m the power of the pressure drop and s
 * the section's shear per gradient (exact for slits and bores of a power-law fluid, which have Q ~ w h^(2+m), d^(3+m));
 * under a soft roof Q ~ K (1 + x)³ with the rise x = slope(w, h) p.
 */
function answering(
  { chip, graph, lumped, flow }: Net,
  stretch: Stretch,
  e: number,
  slopes: Slopes,
  h: number,
): { readonly resistance: Slope; readonly power: number } {
  const law = lumped.laws?.[e];
  const q = flow.ductFlow[e];
  if (!law || !(Math.abs(q) > 0)) return { resistance: slopes.resistance, power: 1 };
  const [from, to] = [flow.pressure[stretch.from], flow.pressure[stretch.to]];
  const out = new Float64Array(3);
  law.flow(from - to, to, out);
  const power = Math.min(20, Math.max(0.05, (((out[1] - out[2]) / 2) * (from - to)) / q));
  let resistance = lumped.thins ? plus(slopes.resistance, slopes.shear, 1 - power) : slopes.resistance;
  const piece = graph.pieces[stretch.piece];
  const { roof } = chip.layers[piece.layerIndex];
  if (roof) {
    const [w, step] = [(stretch.width[0] + stretch.width[1]) / 2, 1.01];
    const slope = roofLaw(roof, w, h, piece.channel).slope;
    const x = (slope * (from + to)) / 2;
    const give = (3 * x) / Math.max(0.1, 1 + x);
    const width = Math.log(roofLaw(roof, w * step, h, piece.channel).slope / slope) / Math.log(step);
    resistance = plus(resistance, { depth: -1, width, shift: width / w }, -give);
  }
  return { resistance, power: lumped.thins ? power : 1 };
}

function cellEffects({ chip, graph, lumped, flow }: Net, sources: Sources, index: number): CellEffects[] {
  const { spec } = lumped.cells[index];
  const block = lumped.cellBlock[index];
  if (block < 0) return [];
  const { profile } = chip.layers[spec.layerIndex];
  const h = spec.shape.depth;
  const { places, stretches } = insideOf(graph, spec);
  const slopes = stretches.map(({ piece, width }) =>
    piece < 0 ? null : knownSlopes(profile, width, h, graph.pieces[piece].channel),
  );
  const resistance = stretches.map(({ piece, width, length }) =>
    piece < 0
      ? 0
      : lumped.viscosity * length * ductOf(profile, width, h, graph.pieces[piece].channel).resistance,
  );
  const inside = innerFlows(places, stretches, resistance);
  const into = flow.blockFlow[block];
  const q = inside.of(into);
  // What the solved cell loses over what its centrelines would: their widths act by that much.
  let [real, drawn, power] = [0, 0, 0];
  lumped.spec.blocks[block].nodes.forEach((node, face) => {
    real += (flow.pressure[node] || 0) * into[face];
  });
  stretches.forEach((_, i) => {
    const lost = resistance[i] * q[i] ** 2;
    drawn += lost;
    power += lost * (slopes[i]?.resistance.depth ?? 0);
  });
  const truer = drawn > 0 && real > 0 ? Math.min(3, real / drawn) : 1;
  // A chamber without a centreline is a slit.
  const exponent = drawn > 0 ? power / drawn : -3;
  const depth = sources.layers[spec.layerIndex].map((reach) => ({
    source: reach.source,
    by: exponent * ('share' in reach ? reach.share : reach.length / h),
  }));
  const inner = stretches.map(({ piece }, i) => ({
    weight: truer * resistance[i] * q[i],
    change: slopes[i]
      ? changeOf(slopes[i].resistance, [], sources.channels[graph.pieces[piece].channelIndex].width, h)
      : [],
  }));
  return [{ block, depth, inner, flows: (theirs) => inside.of(theirs) }];
}

/** By how much a target changes with each source's tolerance used up, in the target's own unit. */
export function moved(net: Net, effects: Effects, gradient: Gradient, count: number): Float64Array {
  const by = new Float64Array(count);
  const { ducts, cells } = effects;
  for (let e = 0; e < ducts.count; e += 1) ducts.add(e, by, gradient.byResistance[e]);
  for (const { block, depth, inner, flows } of cells) {
    const { nodes, matrix } = net.lumped.spec.blocks[block];
    const n = nodes.length;
    const into = net.flow.blockFlow[block];
    if (depth.length > 0) {
      // Of the whole block's resistance: what a duct's is, λ from − λ to times its flow.
      let slope = 0;
      for (let i = 0; i < n; i += 1) slope += gradient.weight[nodes[i]] * into[i];
      for (const { source, by: change } of depth) by[source] += slope * change;
    }
    if (inner.every(({ change }) => change.length === 0)) continue;
    const adjoint = new Float64Array(n);
    for (let i = 0; i < n; i += 1) {
      // Only differences count: rows of the matrix sum to nought.
      for (let j = 0; j < n; j += 1) {
        adjoint[i] += matrix[i * n + j] * (gradient.weight[nodes[j]] - gradient.weight[nodes[i]]);
      }
    }
    const theirs = flows(adjoint);
    inner.forEach(({ weight, change }, i) => {
      for (const { source, by: amount } of change) by[source] += weight * theirs[i] * amount;
    });
  }
  return by;
}
