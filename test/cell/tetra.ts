import type { Mesh } from '../../solver/mesh/mesh.ts';
import { factoriseIndefinite, solveIndefinite } from '../../solver/sparse/indefinite.ts';
import { patternOfElements } from '../../solver/sparse/pattern.ts';

/** Stokes flow in tetrahedra, viscosity 1. */
export interface TetraFlow {
  /** faces x faces by rows. */
  readonly portMatrix: Float64Array;
  /** Greatest wall shear over the middles of wall triangles that `counts` takes, for these face pressures. */
  readonly peak: (pressures: readonly number[], counts: (x: number, y: number) => boolean) => number;
}

/** The port matrix alone; see `tetraFlow`. */
export function tetraPortMatrix(...given: Parameters<typeof tetraFlow>): Float64Array {
  return tetraFlow(...given).portMatrix;
}

/**
 * Flow by quadratic velocity and linear pressure on tetrahedra, the whole saddle factored at
 * once: slow, and nothing in common with the solver but the plan mesh.
 *
 * @param layers heights from half depth (0), a plane of symmetry, to the wall (1); or from floor (-1) to lid (1)
 * @param move shifts a plan point at a height, for sloped walls; tags stay those of the plan
 * @param bore layers from this one on stand over the part of the plan that it keeps, and open upwards
 *   into the last face
 */
export function tetraFlow(
  plan: Mesh,
  faces: number,
  halfDepth: number,
  layers: readonly number[],
  move: (x: number, y: number, s: number) => readonly [number, number] = (x, y) => [x, y],
  bore?: { readonly from: number; readonly keeps: (x: number, y: number) => boolean },
): TetraFlow {
  const { vertexCount: base } = plan;
  const levels = layers.length;
  const vertices = base * levels;
  const whole = layers[0] === -1;
  const moved = Array.from({ length: vertices }, (_, v) => {
    const s = layers[Math.floor(v / base)]!;
    return move(plan.x[v % base]!, plan.y[v % base]!, s);
  });
  const vx = (v: number): number => moved[v]![0];
  const vy = (v: number): number => moved[v]![1];
  const vz = (v: number): number => layers[Math.floor(v / base)]! * halfDepth;

  // A prism over a triangle with corners in ascending order falls into three tetrahedra, alike on shared sides.
  const tets: [number, number, number, number][] = [];
  for (let t = 0; t < plan.triangles.length; t += 6) {
    const [a, b, c] = [plan.triangles[t]!, plan.triangles[t + 1]!, plan.triangles[t + 2]!].sort(
      (p, q) => p - q,
    ) as [number, number, number];
    const inBore = bore?.keeps(
      (plan.x[a]! + plan.x[b]! + plan.x[c]!) / 3,
      (plan.y[a]! + plan.y[b]! + plan.y[c]!) / 3,
    );
    for (let l = 0; l + 1 < levels; l += 1) {
      if (bore && l >= bore.from && !inBore) continue;
      const up = base * (l + 1);
      const low = base * l;
      tets.push(
        [a + low, b + low, c + low, c + up],
        [a + low, b + low, b + up, c + up],
        [a + low, a + up, b + up, c + up],
      );
    }
  }
  const faceEdges = new Map<number, number>();
  const pair = (a: number, b: number): number => Math.min(a, b) * base + Math.max(a, b);
  for (let e = 0; e < plan.boundaryTag.length; e += 1) {
    const [a, b] = [plan.boundary[3 * e]!, plan.boundary[3 * e + 1]!];
    if (plan.boundaryTag[e] !== 0) faceEdges.set(pair(a, b), plan.boundaryTag[e]!);
  }

  // Nodes: vertices, then the middles of edges.
  const middle = new Map<number, number>();
  const ends: [number, number][] = [];
  const mid = (a: number, b: number): number => {
    const key = Math.min(a, b) * vertices + Math.max(a, b);
    let node = middle.get(key);
    if (node === undefined) {
      node = vertices + ends.length;
      middle.set(key, node);
      ends.push([a, b]);
    }
    return node;
  };
  const nodes = tets.map((v) => [...v, ...EDGES.map(([i, j]) => mid(v[i], v[j]))]);
  const nodeCount = vertices + ends.length;
  /** Sides that one tetrahedron alone has: face (its number), plane of symmetry (-1) or wall (0). */
  const outside = new Map<string, readonly [number, number, number]>();
  for (const v of tets)
    for (const [i, j, k] of SIDES) {
      const side = [v[i], v[j], v[k]] as const;
      const name = [...side].sort((p, q) => p - q).join(' ');
      if (!outside.delete(name)) outside.set(name, side);
    }
  const kindOf = (side: readonly [number, number, number]): number => {
    const plans = [...new Set(side.map((v) => v % base))];
    if (plans.length === 2) return faceEdges.get(pair(plans[0]!, plans[1]!)) ?? 0;
    const level = Math.floor(side[0] / base);
    if (bore && level === levels - 1) return faces;
    return level === 0 && !whole ? -1 : 0;
  };
  const held = new Uint8Array(nodeCount);
  const level = new Uint8Array(nodeCount);
  for (const side of outside.values()) {
    const kind = kindOf(side);
    if (kind > 0) continue;
    const [a, b, c] = side;
    for (const node of [a, b, c, mid(a, b), mid(b, c), mid(a, c)]) {
      if (kind === 0) held[node] = 1;
      else level[node] = 1;
    }
  }
  const used = new Uint8Array(nodeCount);
  for (const n of nodes) for (const node of n) used[node] = 1;
  const unknown = [0, 1, 2].map(() => new Int32Array(nodeCount));
  let count = 0;
  for (let i = 0; i < nodeCount; i += 1) {
    unknown.forEach((part, d) => {
      part[i] = !used[i] || held[i] || (level[i] && d === 2) ? -1 : count++;
    });
  }
  const pressureStart = count;
  const pressure = new Int32Array(vertices).fill(-1);
  for (const v of tets) for (const i of v) if (pressure[i]! < 0) pressure[i] = count++;
  const total = count;

  const start = new Int32Array(tets.length + 1);
  const list = new Int32Array(34 * tets.length);
  nodes.forEach((n, t) => {
    start[t + 1] = 34 * (t + 1);
    for (let d = 0; d < 3; d += 1)
      n.forEach((node, i) => {
        list[34 * t + 10 * d + i] = unknown[d]![node]!;
      });
    for (let i = 0; i < 4; i += 1) list[34 * t + 30 + i] = pressure[n[i]!]!;
  });
  const { matrix, scatter, scatterStart } = patternOfElements(total, start, list);
  const loads = Array.from({ length: faces }, () => new Float64Array(total));
  const at = (t: number, r: number, c: number): number => {
    const [high, low] = r > c ? [r, c] : [c, r];
    return scatter[scatterStart[t]! + (high * (high + 1)) / 2 + low]!;
  };
  tets.forEach((v, t) => {
    const { volume, g } = barycentric(v.map((i) => [vx(i), vy(i), vz(i)]));
    for (const [la, lb, lc, ld] of POINTS) {
      const grad = quadraticGradients([la, lb, lc, ld], g);
      const w = volume / 4;
      for (let i = 0; i < 10; i += 1)
        for (let j = 0; j <= i; j += 1) {
          const a = w * (grad[i]![0] * grad[j]![0] + grad[i]![1] * grad[j]![1] + grad[i]![2] * grad[j]![2]);
          for (let d = 0; d < 3; d += 1) {
            const to = at(t, 10 * d + i, 10 * d + j);
            if (to >= 0) matrix.value[to]! += a;
          }
        }
      [la, lb, lc, ld].forEach((l, q) => {
        for (let d = 0; d < 3; d += 1)
          for (let i = 0; i < 10; i += 1) {
            const to = at(t, 10 * d + i, 30 + q);
            if (to >= 0) matrix.value[to]! -= w * l * grad[i]![d]!;
          }
      });
    }
    // A hair of compressibility makes the saddle quasi-definite; one step of refinement takes it out again.
    for (let q = 0; q < 4; q += 1)
      for (let r = 0; r <= q; r += 1)
        matrix.value[at(t, 30 + q, 30 + r)]! -= (EPSILON * volume * (q === r ? 2 : 1)) / 20;
  });
  const inner = new Map<string, number>();
  tets.forEach((v, t) => {
    for (const [i, j, k] of SIDES) inner.set([v[i], v[j], v[k]].sort((p, q) => p - q).join(' '), t);
  });
  for (const [name, side] of outside) {
    const tag = kindOf(side);
    if (tag <= 0) continue;
    const [a, b, c] = side;
    const e1 = [vx(b) - vx(a), vy(b) - vy(a), vz(b) - vz(a)] as const;
    const e2 = [vx(c) - vx(a), vy(c) - vy(a), vz(c) - vz(a)] as const;
    let normal = [
      (e1[1] * e2[2] - e1[2] * e2[1]) / 2,
      (e1[2] * e2[0] - e1[0] * e2[2]) / 2,
      (e1[0] * e2[1] - e1[1] * e2[0]) / 2,
    ];
    const inside = tets[inner.get(name)!]!.find((x) => x !== a && x !== b && x !== c)!;
    const inwards = [vx(inside) - vx(a), vy(inside) - vy(a), vz(inside) - vz(a)];
    if (normal.reduce((sum, n, d) => sum + n * inwards[d]!, 0) < 0) normal = normal.map((x) => -x);
    for (const m of [mid(a, b), mid(b, c), mid(a, c)])
      for (let d = 0; d < 3; d += 1) {
        const to = unknown[d]![m]!;
        if (to >= 0) loads[tag - 1]![to]! += normal[d]! / 3;
      }
  }

  const solutions: Float64Array[] = [];
  const factor = factoriseIndefinite(matrix);
  const out = new Float64Array(faces * faces);
  for (let j = 0; j < faces; j += 1) {
    const x = loads[j]!.slice();
    solveIndefinite(factor, x);
    // The true saddle has no block on the pressures: what the hair did is the residual of one step.
    const rest = new Float64Array(total);
    for (const v of tets) {
      const { volume } = barycentric(v.map((i) => [vx(i), vy(i), vz(i)]));
      for (let q = 0; q < 4; q += 1)
        for (let r = 0; r < 4; r += 1)
          rest[pressure[v[q]!]!]! -= ((EPSILON * volume * (q === r ? 2 : 1)) / 20) * x[pressure[v[r]!]!]!;
    }
    solveIndefinite(factor, rest);
    for (let i = 0; i < total; i += 1) x[i]! += rest[i]!;
    solutions.push(x);
    for (let i = 0; i < faces; i += 1) {
      let sum = 0;
      for (let k = 0; k < pressureStart; k += 1) sum += loads[i]![k]! * x[k]!;
      out[i * faces + j] = (whole ? 1 : 2) * sum;
    }
  }
  const wallShear = (side: readonly number[], tet: number, velocity: Float64Array): number => {
    const v = tets[tet]!;
    const { g } = barycentric(v.map((i) => [vx(i), vy(i), vz(i)]));
    const inwards = g[v.findIndex((i) => !side.includes(i))]!;
    const normal = inwards.map((part) => part / Math.hypot(...inwards));
    const gradients = quadraticGradients(
      v.map((i) => (side.includes(i) ? 1 / 3 : 0)),
      g,
    );
    // The velocity's slope along the normal, less what of it is along the normal itself.
    const slope = unknown.map((of) =>
      nodes[tet]!.reduce((sum, node, i) => {
        const k = of[node]!;
        return k < 0 ? sum : sum + velocity[k]! * gradients[i]!.reduce((s, gd, d) => s + gd * normal[d]!, 0);
      }, 0),
    );
    const through = slope.reduce((sum, part, d) => sum + part * normal[d]!, 0);
    return Math.hypot(...slope.map((part, d) => part - through * normal[d]!));
  };
  return {
    portMatrix: out,
    peak: (pressures, counts) => {
      const velocity = new Float64Array(pressureStart);
      solutions.forEach((x, j) => {
        for (let i = 0; i < pressureStart; i += 1) velocity[i]! += pressures[j]! * x[i]!;
      });
      let most = 0;
      for (const [name, side] of outside) {
        if (kindOf(side) !== 0) continue;
        const middle = [vx, vy].map((of) => side.reduce((sum, i) => sum + of(i), 0) / 3);
        if (counts(middle[0]!, middle[1]!))
          most = Math.max(most, wallShear(side, inner.get(name)!, velocity));
      }
      return most;
    },
  };
}

const EPSILON = 1e-9;
const EDGES = [
  [0, 1],
  [0, 2],
  [0, 3],
  [1, 2],
  [1, 3],
  [2, 3],
] as const;
const SIDES = [
  [0, 1, 2],
  [0, 1, 3],
  [0, 2, 3],
  [1, 2, 3],
] as const;
/** Four points exact to degree two. */
const NEAR = 0.5854101966249685;
const FAR = 0.1381966011250105;
const POINTS = [0, 1, 2, 3].map(
  (k) => [0, 1, 2, 3].map((i) => (i === k ? NEAR : FAR)) as [number, number, number, number],
);

type Vector = readonly [number, number, number];

/** Volume and gradients of the barycentric coordinates. */
function barycentric(p: readonly (readonly number[])[]): { volume: number; g: Vector[] } {
  const [a, b, c] = [1, 2, 3].map((i) => p[i]!.map((x, d) => x - p[0]![d]!)) as [
    number[],
    number[],
    number[],
  ];
  const cross = (u: number[], v: number[]): number[] => [
    u[1]! * v[2]! - u[2]! * v[1]!,
    u[2]! * v[0]! - u[0]! * v[2]!,
    u[0]! * v[1]! - u[1]! * v[0]!,
  ];
  const det = a[0]! * cross(b, c)[0]! + a[1]! * cross(b, c)[1]! + a[2]! * cross(b, c)[2]!;
  const g = [cross(b, c), cross(c, a), cross(a, b)].map((x) => x.map((y) => y / det)) as unknown as Vector[];
  const first = [0, 1, 2].map((d) => -g[0]![d]! - g[1]![d]! - g[2]![d]!) as unknown as Vector;
  return { volume: Math.abs(det) / 6, g: [first, ...g] };
}

function quadraticGradients(l: readonly number[], g: readonly Vector[]): Vector[] {
  const out: Vector[] = [];
  for (let i = 0; i < 4; i += 1) out.push(g[i]!.map((x) => (4 * l[i]! - 1) * x) as unknown as Vector);
  for (const [i, j] of EDGES)
    out.push([0, 1, 2].map((d) => 4 * (l[i]! * g[j]![d]! + l[j]! * g[i]![d]!)) as unknown as Vector);
  return out;
}
