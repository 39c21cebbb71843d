import { depthModes, depthValues } from '../../solver/cell/depth.ts';
import { verify } from '../verify/row.ts';
import { gridMesh } from './grid-mesh.ts';
import { errors, type Known, PLANE, solveKnown } from './manufactured.ts';

const { PI, sin, cos } = Math;
const even = (n: number): number[] => Array.from({ length: n + 1 }, (_, i) => i / n);
/** Unit square, its inner points shifted smoothly so that no two triangles are alike. */
const square = (n: number, tag = 0) =>
  gridMesh(
    even(n),
    even(n),
    () => tag,
    () => true,
    (x, y) => [x + 0.06 * sin(2 * PI * x) * sin(PI * y), y - 0.05 * sin(PI * x) * sin(2 * PI * y)],
  );

const plane: Known & { pressure(j: number, x: number, y: number): number } = {
  velocity: (_, x, y) => [sin(PI * x) * cos(PI * y), -cos(PI * x) * sin(PI * y)],
  pressure: (_, x, y) => sin(PI * x) * sin(PI * y) - 4 / PI ** 2,
  force: (_, x, y) => [
    2 * PI ** 2 * sin(PI * x) * cos(PI * y) + PI * cos(PI * x) * sin(PI * y),
    -2 * PI ** 2 * cos(PI * x) * sin(PI * y) + PI * sin(PI * x) * cos(PI * y),
  ],
};

/** Mean over the half depth of f times each mode, by a fine sum (the integrands are polynomials). */
function project(
  count: number,
  f: (s: number) => number,
  which: 'inPlane' | 'across' | 'pressure',
): Float64Array {
  const depth = depthModes(count);
  const out = new Float64Array(which === 'across' ? count - 1 : count);
  // Gauss with 3 points on 64 stretches: exact to degree 5 on each.
  for (let i = 0; i < 64; i += 1)
    for (const [node, weight] of [
      [-Math.sqrt(0.6), 5 / 18],
      [0, 8 / 18],
      [Math.sqrt(0.6), 5 / 18],
    ] as const) {
      const s = (i + 0.5 + node / 2) / 64;
      const values = depthValues(depth, s)[which];
      for (let k = 0; k < out.length; k += 1) out[k]! += (weight / 64) * f(s) * values[k]!;
    }
  return out;
}

/**
 * Between plates at z = +-H: u = (psi_y G + X Y Z', -psi_x G, -X' Y Z), psi = sin^2 pi x sin^2 pi y,
 * X = sin^2 pi x, Y = sin pi y, G = 1 - s^2, Z = s (1 - s^2)^2, p = cos pi x cos pi y (1 + s^2).
 */
function threeD(modes: number, H: number): Known & { pressure(j: number, x: number, y: number): number } {
  const depth = depthModes(modes);
  const g = project(modes, (s) => 1 - s * s, 'inPlane');
  const dz = project(modes, (s) => ((1 - s * s) * (1 - 5 * s * s)) / H, 'inPlane');
  const z = project(modes, (s) => s * (1 - s * s) ** 2, 'across');
  const q = project(modes, (s) => 1 + s * s, 'pressure');
  const X = (x: number): readonly [number, number, number, number] => [
    sin(PI * x) ** 2,
    PI * sin(2 * PI * x),
    2 * PI ** 2 * cos(2 * PI * x),
    -4 * PI ** 3 * sin(2 * PI * x),
  ];
  const p = (x: number, y: number): number => cos(PI * x) * cos(PI * y);
  const velocity = (k: number, x: number, y: number): readonly [number, number] => {
    const [a, ax] = X(x);
    const [b, by] = X(y);
    return [g[k]! * a * by + dz[k]! * a * sin(PI * y), -g[k]! * ax * b];
  };
  const across = (m: number, x: number, y: number): number => -z[m]! * X(x)[1] * sin(PI * y);
  return {
    velocity,
    across,
    pressure: (j, x, y) => q[j]! * p(x, y),
    force: (k, x, y) => {
      const [a, ax, axx, axxx] = X(x);
      const [b, by, byy, byyy] = X(y);
      const [u, v] = velocity(k, x, y);
      const shift = depth.inPlaneLambda[k]! / H ** 2;
      let mean = 0;
      for (let j = 0; j < modes; j += 1) mean += depth.coupling[j * modes + k]! * q[j]!;
      const lapU = g[k]! * (axx * by + a * byyy) + dz[k]! * (axx - PI ** 2 * a) * sin(PI * y);
      const lapV = -g[k]! * (axxx * b + ax * byy);
      return [
        shift * u - lapU - mean * PI * sin(PI * x) * cos(PI * y),
        shift * v - lapV - mean * PI * cos(PI * x) * sin(PI * y),
      ];
    },
    acrossForce: (m, x, y) => {
      const [, ax, , axxx] = X(x);
      let mean = 0;
      for (let j = 0; j < modes; j += 1) mean += (depth.acrossCoupling[j * (modes - 1) + m]! / H) * q[j]!;
      const lap = -z[m]! * (axxx - PI ** 2 * ax) * sin(PI * y);
      return (depth.acrossLambda[m]! / H ** 2) * across(m, x, y) - lap - mean * p(x, y);
    },
  };
}

/** Orders between the last two of three meshes, and the errors on the last. */
function orders(run: (n: number) => { velocity: number; gradient: number; pressure: number }, n: number) {
  const coarse = run(n);
  const fine = run(2 * n);
  const order = (key: keyof typeof fine): number => Math.log2(coarse[key] / fine[key]);
  return { velocity: order('velocity'), gradient: order('gradient'), pressure: order('pressure'), fine };
}

const THEORY = 'Ern and Guermond 2004, Theory and Practice of Finite Elements (from memory)';
let planar: ReturnType<typeof orders> | undefined;
let solid: ReturnType<typeof orders> | undefined;
const planarOrders = () => {
  planar ??= orders((n) => errors(solveKnown(square(n), PLANE, 1, plane), plane), 10);
  return planar;
};
const solidOrders = () => {
  solid ??= orders((n) => {
    const known = threeD(3, 0.4);
    return errors(solveKnown(square(n), depthModes(3), 0.4, known), known);
  }, 10);
  return solid;
};
for (const [part, theory] of [
  ['velocity', 3],
  ['gradient', 2],
  ['pressure', 2],
] as const) {
  // Pressure of smooth flows may converge faster than theory promises.
  const miss = (order: number): number =>
    part === 'pressure' ? Math.max(0, theory - order) : Math.abs(order - theory);
  const quantity = `order of the ${part}'s L2 error less ${theory} (absolute)`;
  verify(
    {
      quantity,
      check: 'order',
      at: 'plane Stokes flow, distorted triangles, 20 per side',
      source: THEORY,
      tolerance: 0.2,
    },
    () => miss(planarOrders()[part]),
  );
  verify(
    {
      quantity,
      check: 'order',
      at: 'flow between plates, three depth modes, 20 per side',
      source: THEORY,
      tolerance: 0.2,
    },
    () => miss(solidOrders()[part]),
  );
}
verify(
  {
    quantity: 'velocity error (L2 over L2)',
    check: 'manufactured',
    at: 'plane Stokes flow, 20 per side',
    source: 'sin pi x cos pi y; squared norm 1/2',
    tolerance: 1e-4,
  },
  () => planarOrders().fine.velocity / Math.sqrt(0.5),
);
verify(
  {
    quantity: 'velocity error (L2 over L2)',
    check: 'manufactured',
    at: 'flow between plates, 20 per side',
    source: 'sin^2 pi x sin^2 pi y times quartics of the depth',
    tolerance: 1e-3,
  },
  () => {
    const known = threeD(3, 0.4);
    const size = errors(
      {
        ...solveKnown(square(4), depthModes(3), 0.4, known),
        inPlane: [0, 1, 2].map(() => new Float64Array(1e4)),
        across: [0, 1].map(() => new Float64Array(1e4)),
      },
      known,
    ).velocity;
    return solidOrders().fine.velocity / size;
  },
);

verify(
  {
    quantity: 'largest velocity error of a flow inside the element space',
    check: 'manufactured',
    at: 'quadratic velocity, linear pressure, distorted triangles',
    source: 'u = (y^2, x^2), p = 2 (x + y): -lap u + grad p = 0, div u = 0',
    tolerance: 1e-10,
  },
  () => {
    const known: Known = { velocity: (_, x, y) => [y * y, x * x] };
    const { inPlane, plane: solvedPlane } = solveKnown(straightSquare(6), PLANE, 1, known);
    return largest(inPlane[0]!, solvedPlane.mesh, (x, y) => [y * y, x * x]);
  },
);
verify(
  {
    quantity: 'largest velocity error of a flow inside the element space',
    check: 'manufactured',
    at: 'between plates, quadratic in plan and depth',
    source: 'u = (1 - s^2)(y^2, x^2) with the force that keeps it up',
    tolerance: 1e-10,
  },
  () => {
    const H = 0.3;
    const depth = depthModes(2);
    const g = project(2, (s) => 1 - s * s, 'inPlane');
    const known: Known = {
      velocity: (k, x, y) => [g[k]! * y * y, g[k]! * x * x],
      force: (k, x, y) => {
        const shift = depth.inPlaneLambda[k]! / H ** 2;
        return [g[k]! * (shift * y * y - 2), g[k]! * (shift * x * x - 2)];
      },
    };
    const { inPlane, plane: solvedPlane } = solveKnown(straightSquare(6), depth, H, known);
    return Math.max(
      ...inPlane.map((part, k) => largest(part, solvedPlane.mesh, (x, y) => known.velocity(k, x, y))),
    );
  },
);

/** Distorted, but with straight sides whose mids are the middles. */
function straightSquare(n: number) {
  const mesh = square(n);
  for (let t = 0; t < mesh.triangles.length; t += 6)
    for (let i = 0; i < 3; i += 1) {
      const [a, b, m] = [
        mesh.triangles[t + i]!,
        mesh.triangles[t + ((i + 1) % 3)]!,
        mesh.triangles[t + 3 + i]!,
      ];
      mesh.x[m] = (mesh.x[a]! + mesh.x[b]!) / 2;
      mesh.y[m] = (mesh.y[a]! + mesh.y[b]!) / 2;
    }
  return mesh;
}

function largest(
  field: Float64Array,
  mesh: { readonly nodeCount: number; readonly x: Float64Array; readonly y: Float64Array },
  exact: (x: number, y: number) => readonly [number, number],
): number {
  let most = 0;
  for (let i = 0; i < mesh.nodeCount; i += 1) {
    const [u, v] = exact(mesh.x[i]!, mesh.y[i]!);
    most = Math.max(most, Math.abs(field[i]! - u), Math.abs(field[mesh.nodeCount + i]! - v));
  }
  return most;
}
