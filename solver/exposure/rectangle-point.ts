/**
 * Flow at a point of a rectangle, exactly. With h the short side, W the long one, x along the long side and
 * y along the short one from the middle, n over the odd numbers and ± = (−1)^((n − 1)/2), per unit G/µ:
 *
 *   u = (h²/4 − y²)/2 − (4h²/π³) Σ ± cosh(nπx/h)/cosh(nπW/2h) cos(nπy/h)/n³
 *
 * (F.M. White, Viscous Fluid Flow, 3rd ed. 2006, eq. 3-48). Near the short walls the terms fall only like
 * powers of n; there they are summed until they no longer count, at most `MOST` of them.
 */
const MOST = 4000;
const NEGLIGIBLE = 1e-17;

/**
 * @param across,up from the middle of the section, m
 * @param out receives the velocity per unit G/µ (m²) and its slopes across and up (m)
 */
export function rectangleAt(
  width: number,
  depth: number,
  across: number,
  up: number,
  out: Float64Array,
): void {
  const flat = width >= depth;
  const h = flat ? depth : width;
  const half = (flat ? width : depth) / 2;
  const x = flat ? across : up;
  const y = flat ? up : across;
  const k = Math.PI / h;
  const away = Math.abs(x);
  // cosh(nkx)/cosh(nkW/2) = (e^(−nk(W/2 − x)) + e^(−nk(W/2 + x)))/(1 + e^(−nkW)), and sinh alike.
  const near = Math.exp(-k * Math.max(0, half - away));
  const far = Math.exp(-k * (half + away));
  const both = Math.exp(-2 * k * half);
  let nearPower = near;
  let farPower = far;
  let bothPower = both;
  const near2 = near * near;
  const far2 = far * far;
  const both2 = both * both;
  // cos and sin of nky by turning through 2ky.
  let c = Math.cos(k * y);
  let s = Math.sin(k * y);
  const c2 = Math.cos(2 * k * y);
  const s2 = Math.sin(2 * k * y);
  let u = 0;
  let ux = 0;
  let uy = 0;
  let sign = 1;
  for (let n = 1; n < MOST && nearPower > NEGLIGIBLE * n * n; n += 2) {
    const over = sign / (1 + bothPower);
    const even = (nearPower + farPower) * over;
    const odd = (nearPower - farPower) * over;
    const n2 = n * n;
    u += (even * c) / (n2 * n);
    ux += (odd * c) / n2;
    uy += (even * s) / n2;
    sign = -sign;
    nearPower *= near2;
    farPower *= far2;
    bothPower *= both2;
    const turned = c * c2 - s * s2;
    s = s * c2 + c * s2;
    c = turned;
  }
  const slopeX = ((-4 * h) / Math.PI ** 2) * ux * Math.sign(x);
  const slopeY = -y + ((4 * h) / Math.PI ** 2) * uy;
  out[0] = Math.max(0, (h * h) / 8 - (y * y) / 2 - ((4 * h * h) / Math.PI ** 3) * u);
  out[1] = flat ? slopeX : slopeY;
  out[2] = flat ? slopeY : slopeX;
}
