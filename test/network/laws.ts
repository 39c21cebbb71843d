import type { DuctLaw } from '../../solver/network/law.ts';

/** Power-law fluid: Q ∝ |Δp|^(1/n); `r` is Δp/Q at Δp = `at`. */
export function powerLaw(r: number, n: number, at: number): DuctLaw {
  return {
    flow(drop, _to, out) {
      const x = Math.abs(drop) / at;
      const slope = x ** (1 / n - 1) / r;
      out[0] = slope * drop;
      out[1] = slope / n;
      out[2] = -out[1];
    },
  };
}

/**
 * Casson fluid in a round tube, Q/Q_Newton = 1 − (16/7) √ξ + (4/3) ξ − ξ⁴/21 with ξ = yield drop / drop (textbook,
 * Fung 1993, from memory; checked by quadrature in the tests); `r` of the Newtonian limit.
 */
export function cassonTube(r: number, yieldDrop: number): DuctLaw {
  return {
    flow(drop, _to, out) {
      const size = Math.abs(drop);
      if (size <= yieldDrop) {
        out.fill(0);
        return;
      }
      const xi = yieldDrop / size;
      const root = Math.sqrt(xi);
      const fourth = xi * xi * xi * xi;
      out[0] = (drop / r) * (1 - (16 / 7) * root + (4 / 3) * xi - fourth / 21);
      out[1] = (1 - (8 / 7) * root + fourth / 7) / r;
      out[2] = -out[1];
    },
  };
}

/**
 * Shallow channel under a thick soft roof: Q = [(1 + b p₁)⁴ − (1 + b p₂)⁴]/(4 b R), b = c W/(E h₀) per Pa (Gervais
 * et al. 2006, Lab Chip 6, 500, from memory; derived again); `r` of the rigid channel.
 */
export function softRoof(r: number, b: number): DuctLaw {
  return {
    flow(drop, to, out) {
      const second = 1 + b * to;
      const first = second + b * drop;
      out[0] = (drop * (first + second) * (first * first + second * second)) / (4 * r);
      out[1] = (first * first * first) / r;
      out[2] = (-second * second * second) / r;
    },
  };
}

export const linearLaw = (r: number): DuctLaw => ({
  flow(drop, _to, out) {
    out[0] = drop / r;
    out[1] = 1 / r;
    out[2] = -1 / r;
  },
});

/** x in [low, high] where the rising function f crosses zero, to the last bit. */
export function bisect(f: (x: number) => number, low: number, high: number): number {
  for (;;) {
    const middle = (low + high) / 2;
    if (middle <= low || middle >= high) return middle;
    if (f(middle) < 0) low = middle;
    else high = middle;
  }
}
