import type { Block, Drive, NetworkSpec } from '../../solver/network/spec.ts';
import { randomFrom } from '../sparse/matrices.ts';

/** Pa s/m³ to which the random resistances are relative. */
export const UNIT = 1e12;

/** Port matrix of a star of resistances seen from its tips, which is what a small junction looks like. */
function starBlock(nodes: readonly number[], random: () => number): Block {
  const g = nodes.map(() => 10 ** (2 * random() - 1) / UNIT);
  const sum = g.reduce((a, b) => a + b, 0);
  const matrix = new Float64Array(nodes.length ** 2);
  for (let i = 0; i < nodes.length; i += 1) {
    for (let j = 0; j < nodes.length; j += 1) {
      matrix[i * nodes.length + j] = (i === j ? g[i] : 0) - (g[i] * g[j]) / sum;
    }
  }
  return { nodes: Int32Array.from(nodes), matrix };
}

/**
 * A network by seed: by turns a tree, a series, one with loops and one with parallel ducts; up to 40 nodes,
 * resistances over four decades, pressure and flow drives with and without tubing, closed ends, and in
 * every other one a few blocks. Always with a pressure, so that it has an answer.
 */
export function randomNetwork(seed: number): NetworkSpec {
  const random = randomFrom(seed * 7919 + 1);
  const nodeCount = 2 + Math.floor(random() * 39);
  const kind = ['tree', 'series', 'loops', 'parallel'][seed % 4];
  const resistance = () => UNIT * 10 ** (4 * random() - 2);
  const pick = () => Math.floor(random() * nodeCount);
  const ducts: [number, number, number][] = [];
  for (let i = 1; i < nodeCount; i += 1) {
    const other = kind === 'series' ? i - 1 : Math.floor(random() * i);
    ducts.push(random() < 0.5 ? [i, other, resistance()] : [other, i, resistance()]);
  }
  if (kind === 'loops') {
    for (let k = 0; k < nodeCount; k += 1) {
      const a = pick();
      const b = pick();
      if (a !== b) ducts.push([a, b, resistance()]);
    }
  }
  if (kind === 'parallel') {
    for (const [a, b] of ducts.slice(0, 5)) ducts.push([a, b, resistance()]);
  }
  const blocks: Block[] = [];
  if (seed % 2 === 1 && nodeCount > 4) {
    for (let k = 0; k < 3; k += 1) {
      const faces = [...new Set([pick(), pick(), pick(), pick()])];
      if (faces.length > 1) blocks.push(starBlock(faces, random));
    }
  }
  const drives: Drive[] = [];
  const free = Array.from({ length: nodeCount }, (_, i) => i).sort(() => random() - 0.5);
  const driven = Math.min(nodeCount, 2 + Math.floor(random() * 5));
  for (let k = 0; k < driven; k += 1) {
    const series = random() < 0.4 ? resistance() : 0;
    const pressure = k === 0 || random() < 0.5;
    const value = pressure ? 5000 * (random() - 0.3) : (1e-9 * (random() - 0.5) * 4000 * UNIT) / 1e12;
    drives.push({ node: free[k], kind: pressure ? 'pressure' : 'flow', value, series });
  }
  return {
    nodeCount,
    ductFrom: Int32Array.from(ducts, ([from]) => from),
    ductTo: Int32Array.from(ducts, ([, to]) => to),
    resistance: Float64Array.from(ducts, ([, , r]) => r),
    blocks,
    drives,
  };
}

/** Largest difference of two lists over the largest magnitude in the second. */
export function apart(got: Iterable<number>, wanted: readonly number[]): number {
  const size = wanted.reduce((m, v) => Math.max(m, Math.abs(v)), 0);
  let worst = 0;
  let k = 0;
  for (const value of got) {
    const off = Math.abs(value - wanted[k]);
    if (!(off <= worst)) worst = off;
    k += 1;
  }
  if (k !== wanted.length) return Number.NaN;
  return size === 0 ? worst : worst / size;
}
