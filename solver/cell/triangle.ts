/**
 * Integrals over one triangle with quadratic velocity N_0..5 (corners a b c, mids ab bc ca) and linear
 * pressure L_0..2: closed forms where its sides are straight, quadrature where one follows an arc
 * (isoparametric). Closed forms follow from the integral of L_a^i L_b^j L_c^k = 2 A i! j! k! / (i+j+k+2)!.
 */
export interface TriangleIntegrals {
  /** 36: grad N_i . grad N_j */
  readonly stiffness: Float64Array;
  /** 36: N_i N_j */
  readonly mass: Float64Array;
  /** 18 each: L_i dN_j/dx, L_i dN_j/dy, L_i N_j at [i * 6 + j] */
  readonly gradX: Float64Array;
  readonly gradY: Float64Array;
  readonly mixed: Float64Array;
  /** 9 each: grad L_i . grad L_j, L_i L_j */
  readonly linearStiffness: Float64Array;
  readonly linearMass: Float64Array;
}

export function triangleWorkspace(): TriangleIntegrals {
  return {
    stiffness: new Float64Array(36),
    mass: new Float64Array(36),
    gradX: new Float64Array(18),
    gradY: new Float64Array(18),
    mixed: new Float64Array(18),
    linearStiffness: new Float64Array(9),
    linearMass: new Float64Array(9),
  };
}

/** Twelve points exact to degree six (Dunavant 1985, Int. J. Numer. Methods Eng. 21, 1129): weight, L_a, L_b. */
const POINTS: readonly (readonly [number, number, number])[] = (() => {
  const out: [number, number, number][] = [];
  for (const [weight, a] of [
    [0.116786275726379, 0.24928674517091],
    [0.050844906370207, 0.063089014491502],
  ] as const) {
    const b = 1 - 2 * a;
    out.push([weight, a, a], [weight, a, b], [weight, b, a]);
  }
  const [p, q] = [0.053145049844817, 0.31035245103378] as const;
  const weight = 0.082851075618374;
  const r = 1 - p - q;
  out.push([weight, p, q], [weight, q, p], [weight, p, r], [weight, r, p], [weight, q, r], [weight, r, q]);
  return out;
})();

/** Values of the six quadratic functions at L_a, L_b. */
export function quadratic(la: number, lb: number, out: Float64Array): void {
  const lc = 1 - la - lb;
  out[0] = la * (2 * la - 1);
  out[1] = lb * (2 * lb - 1);
  out[2] = lc * (2 * lc - 1);
  out[3] = 4 * la * lb;
  out[4] = 4 * lb * lc;
  out[5] = 4 * lc * la;
}

/** Their derivatives by L_a and by L_b (with L_c = 1 - L_a - L_b). */
export function quadraticGradient(la: number, lb: number, da: Float64Array, db: Float64Array): void {
  const lc = 1 - la - lb;
  da[0] = 4 * la - 1;
  db[0] = 0;
  da[1] = 0;
  db[1] = 4 * lb - 1;
  da[2] = 1 - 4 * lc;
  db[2] = 1 - 4 * lc;
  da[3] = 4 * lb;
  db[3] = 4 * la;
  da[4] = -4 * lb;
  db[4] = 4 * (lc - lb);
  da[5] = 4 * (lc - la);
  db[5] = -4 * la;
}

/** Reference tables at the quadrature points, made once. */
const TABLE = POINTS.map(([weight, la, lb]) => {
  const value = new Float64Array(6);
  const da = new Float64Array(6);
  const db = new Float64Array(6);
  quadratic(la, lb, value);
  quadraticGradient(la, lb, da, db);
  return { weight, linear: Float64Array.of(la, lb, 1 - la - lb), value, da, db };
});

const A = [0, 1, 2] as const;
const MASS = [6, -1, -1, 0, -4, 0, 6, -1, 0, 0, -4, 6, -4, 0, 0, 32, 16, 16, 32, 16, 32];

/** Corner coordinates (x, y of a, b, c) of a straight triangle; fills `out`, returns the area. */
export function straightTriangle(
  xa: number,
  ya: number,
  xb: number,
  yb: number,
  xc: number,
  yc: number,
  out: TriangleIntegrals,
): number {
  const twice = (xb - xa) * (yc - ya) - (xc - xa) * (yb - ya);
  const area = twice / 2;
  GX[0] = (yb - yc) / twice;
  GX[1] = (yc - ya) / twice;
  GX[2] = (ya - yb) / twice;
  GY[0] = (xc - xb) / twice;
  GY[1] = (xa - xc) / twice;
  GY[2] = (xb - xa) / twice;
  const { stiffness: k, mass: m, gradX, gradY, mixed, linearStiffness, linearMass } = out;
  k.fill(0);
  for (let a = 0; a < 3; a += 1)
    for (let b = 0; b < 3; b += 1) {
      const g = area * (GX[a] * GX[b] + GY[a] * GY[b]);
      linearStiffness[3 * a + b] = g;
      linearMass[3 * a + b] = a === b ? area / 6 : area / 12;
      k[6 * a + b] = a === b ? g : -g / 3;
    }
  for (let a = 0; a < 3; a += 1) {
    const b = (a + 1) % 3;
    const c = (a + 2) % 3;
    const ab = 3 + a;
    const bc = 3 + b;
    const gab = linearStiffness[3 * a + b];
    const gca = linearStiffness[3 * c + a];
    k[6 * a + ab] = k[6 * ab + a] = k[6 * b + ab] = k[6 * ab + b] = (4 / 3) * gab;
    k[6 * ab + ab] = (8 / 3) * (linearStiffness[4 * a] + gab + linearStiffness[4 * b]);
    k[6 * ab + bc] = k[6 * bc + ab] = (8 / 3) * gca;
  }
  for (let i = 0, e = 0; i < 6; i += 1)
    for (let j = i; j < 6; j += 1, e += 1) m[6 * i + j] = m[6 * j + i] = (MASS[e] * area) / 180;
  for (const i of A) {
    for (const a of A) {
      const on = i === a ? area / 3 : 0;
      gradX[6 * i + a] = on * GX[a];
      gradY[6 * i + a] = on * GY[a];
      mixed[6 * i + a] = i === a ? area / 30 : -area / 60;
      const b = (a + 1) % 3;
      const wa = (i === b ? 2 / 3 : 1 / 3) * area;
      const wb = (i === a ? 2 / 3 : 1 / 3) * area;
      gradX[6 * i + 3 + a] = wa * GX[a] + wb * GX[b];
      gradY[6 * i + 3 + a] = wa * GY[a] + wb * GY[b];
      mixed[6 * i + 3 + a] = (i === a || i === b ? 2 / 15 : 1 / 15) * area;
    }
  }
  return area;
}

const GX = new Float64Array(6);
const GY = new Float64Array(6);

/** Six node coordinates of a curved triangle; fills `out`, returns the least Jacobian over twice the straight area. */
export function curvedTriangle(x: Float64Array, y: Float64Array, out: TriangleIntegrals): number {
  for (const part of Object.values(out) as Float64Array[]) part.fill(0);
  const straight = (x[1] - x[0]) * (y[2] - y[0]) - (x[2] - x[0]) * (y[1] - y[0]);
  let least = Number.POSITIVE_INFINITY;
  for (const { weight, linear, value, da, db } of TABLE) {
    let xa = 0;
    let xb = 0;
    let ya = 0;
    let yb = 0;
    for (let i = 0; i < 6; i += 1) {
      xa += da[i] * x[i];
      xb += db[i] * x[i];
      ya += da[i] * y[i];
      yb += db[i] * y[i];
    }
    const jacobian = xa * yb - xb * ya;
    least = Math.min(least, jacobian / straight);
    const w = (weight * jacobian) / 2;
    for (let i = 0; i < 6; i += 1) {
      GX[i] = (da[i] * yb - db[i] * ya) / jacobian;
      GY[i] = (db[i] * xa - da[i] * xb) / jacobian;
    }
    for (let i = 0; i < 6; i += 1)
      for (let j = 0; j < 6; j += 1) {
        out.stiffness[6 * i + j] += w * (GX[i] * GX[j] + GY[i] * GY[j]);
        out.mass[6 * i + j] += w * value[i] * value[j];
      }
    for (let i = 0; i < 3; i += 1)
      for (let j = 0; j < 6; j += 1) {
        out.gradX[6 * i + j] += w * linear[i] * GX[j];
        out.gradY[6 * i + j] += w * linear[i] * GY[j];
        out.mixed[6 * i + j] += w * linear[i] * value[j];
      }
    // linear functions: d/dLa, d/dLb of (La, Lb, Lc) are (1, 0, -1) and (0, 1, -1)
    const lx = [yb / jacobian, -ya / jacobian, (ya - yb) / jacobian] as const;
    const ly = [-xb / jacobian, xa / jacobian, (xb - xa) / jacobian] as const;
    for (const i of A)
      for (const j of A) {
        out.linearStiffness[3 * i + j] += w * (lx[i] * lx[j] + ly[i] * ly[j]);
        out.linearMass[3 * i + j] += w * linear[i] * linear[j];
      }
  }
  return least;
}
