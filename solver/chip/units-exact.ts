/** Exact arithmetic of quantities: ratios of whole numbers, rounded once at the end. */

export interface Ratio {
  readonly num: bigint;
  /** Positive. */
  readonly den: bigint;
}

const bits = (value: bigint): number => value.toString(16).length * 4;

/** The double nearest to num/den (half to even), for magnitudes within 1e±290. */
export function ratioToNumber({ num, den }: Ratio): number {
  if (num === 0n) return 0;
  const size = num < 0n ? -num : num;
  // A quotient of 64 bits and more, its last one sticky: the conversion to double rounds it rightly.
  const shift = 70 - (bits(size) - bits(den));
  const top = shift > 0 ? size << BigInt(shift) : size;
  const bottom = shift > 0 ? den : den << BigInt(-shift);
  const quotient = top / bottom;
  const sticky = quotient * bottom === top ? quotient : quotient | 1n;
  const value = Number(sticky) * 2 ** -shift;
  return num < 0n ? -value : value;
}

/** A double as the ratio that it is. */
export function numberToRatio(value: number): Ratio {
  if (value === 0) return { num: 0n, den: 1n };
  const shift = 53 - Math.floor(Math.log2(Math.abs(value)));
  const whole = BigInt(value * 2 ** shift);
  return shift > 0 ? { num: whole, den: 1n << BigInt(shift) } : { num: whole << BigInt(-shift), den: 1n };
}

/** The whole number nearest to num/den, halves away from zero. */
export function ratioToInteger({ num, den }: Ratio): bigint {
  const size = num < 0n ? -num : num;
  const whole = (2n * size + den) / (2n * den);
  return num < 0n ? -whole : whole;
}

/** The decimal that digits and a power of ten spell: sign, whole part, fraction, exponent. */
export function decimalRatio(sign: string, whole: string, fraction: string, exponent: number): Ratio {
  const digits = BigInt(`${whole}${fraction}` || '0');
  const power = exponent - fraction.length;
  const num = sign === '-' ? -digits : digits;
  return power >= 0 ? { num: num * 10n ** BigInt(power), den: 1n } : { num, den: 10n ** BigInt(-power) };
}
