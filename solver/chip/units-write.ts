import type { LengthUnit } from './chip.ts';
import { inUnit, KINDS, type Kind, NM_PER_M, quantityOrNull } from './units.ts';
import { numberToRatio, ratioToInteger } from './units-exact.ts';

/** Nanometres in one of the units that a description may give plan lengths in. */
export const NM_PER_UNIT: Readonly<Record<LengthUnit, number>> = {
  nm: 1,
  um: 1e3,
  mm: 1e6,
  cm: 1e7,
  m: NM_PER_M,
};

/** Whole nanometres of a plan length given as a number in `unit`, halves away from zero. */
export const planNm = (value: number, unit: LengthUnit): number => {
  const scaled = value * NM_PER_UNIT[unit];
  return (scaled < 0 ? -Math.round(-scaled) : Math.round(scaled)) + 0;
};

/**
 * A plan length in `unit` as the shortest exact decimal. Fifteen digits hold any length of the plan, so
 * the shortest decimal that reads back is the exact one.
 */
export const planText = (nm: number, unit: LengthUnit): string => String(nm / NM_PER_UNIT[unit]);

/** A decimal of at most 17 digits that, in `unit`, reads back to the very same double. */
function exactDecimal(value: number, unit: string, kind: Kind): number | null {
  const scaled = inUnit(value, unit);
  for (const digits of [15, 16, 17]) {
    const decimal = Number(scaled.toPrecision(digits)) + 0;
    if (quantityOrNull(`${decimal} ${unit}`, kind) === value) return decimal;
  }
  return null;
}

/** A share in per cent to eighteen digits, one more than any double needs in any unit. */
function percentText(share: number): string {
  const { num, den } = numberToRatio(share);
  const power = 17 - Math.floor(Math.log10(Math.abs(share)) + 2);
  const scaled = {
    num: num * 100n * 10n ** BigInt(Math.max(power, 0)),
    den: den * 10n ** BigInt(Math.max(-power, 0)),
  };
  return `${ratioToInteger(scaled)}e${-power} %`;
}

/** Digits first, then whether the figure lies in the range that is easy to read. */
function clumsiness(decimal: number): number {
  const digits = decimal.toExponential().replace(/e.*|[-.]/g, '').length;
  const size = Math.abs(decimal);
  return digits + (size === 0 || (size >= 1 && size < 1000) ? 0 : 0.5);
}

/**
 * A quantity as text that reads back to the very same double, in the unit of its kind that makes it
 * simplest: "10 uL/min", "25 degC", "2.5 kPa".
 */
export function writeQuantity(value: number, kind: Exclude<Kind, 'number'>): string {
  let best: string | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (const unit of KINDS[kind].units) {
    const decimal = unit === '' ? null : exactDecimal(value, unit, kind);
    if (decimal === null || clumsiness(decimal) >= least) continue;
    least = clumsiness(decimal);
    best = `${decimal} ${unit}`;
  }
  // Only a share has no unit of factor one, where seventeen digits would do.
  return best ?? percentText(value);
}
