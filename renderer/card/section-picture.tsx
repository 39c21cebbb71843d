import { useEffect, useMemo, useReducer } from 'react';
import type { Layer } from '../../solver/chip/chip.ts';
import { unitInPrint } from '../../solver/chip/units-format.ts';
import type { FluidSpec } from '../../solver/fluid/spec.ts';
import { type PerimeterCurve, perimeterCurve } from '../../solver/section/perimeter-curve.ts';
import { sectionOf } from '../../solver/section/section-of.ts';
import { amount } from '../look/ramp.ts';
import { onTheme, scheme } from '../look/theme.ts';
import { figure, figureIn, unitFor } from '../words/figure.ts';
import { type Band, bandsOf } from './shear-bands.ts';
import { useThinCurve } from './thin-curve.ts';

const WIDE = 312;
const HIGH = 156;
/** px that the largest wall shear reaches outward. */
const REACH = 20;

export interface SectionPictureProps {
  readonly layer: Layer;
  /** nm */
  readonly width: number;
  readonly flow: number | null;
  /** Null of a fluid that thins: then what is drawn is its own flow, solved for the mean of `told`. */
  readonly viscosity: number | null;
  readonly fluid: FluidSpec;
  /** As the answer has them, Pa and m/s; along a taper or under a soft roof the mean is none of one section. */
  readonly told?: {
    readonly mean: number | null;
    readonly peak: number | null;
    readonly speed: number | null;
    readonly uniform: boolean;
  };
  /** Wall shear at the end of the ramp, Pa. */
  readonly most: number;
}

/** The curve's value at the place of the wall nearest to another. */
function nearest({ x, y, shear }: PerimeterCurve, px: number, py: number): number {
  let best = 0;
  for (let i = 1; i < x.length; i += 1)
    if (Math.hypot(x[i]! - px, y[i]! - py) < Math.hypot(x[best]! - px, y[best]! - py)) best = i;
  return shear[best]!;
}

/**
 * The cross-section with the wall shear drawn outward from its wall, in the colours of the sheet; figures
 * where it is read: roof and floor, and the side.
 */
export function SectionPicture({ layer, width, flow, viscosity, fluid, told, most }: SectionPictureProps) {
  const [, again] = useReducer((n: number) => n + 1, 0);
  useEffect(() => onTheme(again), []);
  const wide = width / 1e9;
  const depth = layer.depth / 1e9;
  const made = useMemo(() => {
    try {
      return {
        section: sectionOf(layer.profile, wide, depth),
        curve: perimeterCurve(layer.profile, wide, depth),
      };
    } catch (error) {
      return error instanceof Error ? error.message : 'This section cannot be drawn.';
    }
  }, [layer.profile, wide, depth]);
  const thin = useThinCurve(fluid, layer.profile, wide, depth, told?.uniform ? told.mean : null);
  if (typeof made === 'string') return <p className="fault">{made}</p>;
  const { section } = made;
  const curve = thin ?? made.curve;
  const largest = Math.max(...curve.shear);
  // newtonian: the shear per driving gradient is the section's own
  const newtonian =
    flow === null || viscosity === null ? null : (viscosity * Math.abs(flow)) / section.conductance;
  // a thinning fluid's curve is in Pa already
  const gradient = thin ? 1 : newtonian;
  const scale = Math.min((WIDE - 128) / section.width, (HIGH - 2 * REACH - 52) / section.depth);
  const left = WIDE / 2 - 16;
  const middle = (Math.max(...curve.x) + Math.min(...curve.x)) / 2;
  const x = (m: number): number => left + (m - middle) * scale;
  const y = (m: number): number => HIGH / 2 - 8 + (section.depth / 2 - m) * scale;
  const highest = gradient === null ? 0 : gradient * largest;
  const unit = unitFor(highest, 'stress');
  const shear = (value: number): string => figureIn((gradient ?? 0) * value, unit, { digits: 3 });
  const bands: readonly Band[] =
    gradient === null || gradient === 0
      ? []
      : bandsOf(curve, (i) => (REACH * curve.shear[i]!) / (largest * scale));
  const half = section.width / 2;
  const floor = thin ? nearest(thin, middle, 0) : section.floorShear;
  const side = thin ? nearest(thin, middle + half, section.depth / 2) : section.sideShear;
  const speed =
    viscosity === null
      ? (told?.speed ?? null)
      : flow === null
        ? null
        : (Math.abs(flow) / section.area) * section.peakVelocity;
  const now = scheme();
  const point = ([a, b]: readonly [number, number]): string => `${x(a).toFixed(2)} ${y(b).toFixed(2)}`;
  const outline = Array.from(curve.x, (a, i) => point([a, curve.y[i]!])).join('L');
  const top = y(section.depth) - (layer.profile.kind === 'rectangle' ? (REACH * floor) / largest : 0);
  return (
    <figure className="section-picture">
      <figcaption>
        {thin
          ? 'Cross-section, wall shear of this thinning fluid drawn outward'
          : gradient !== null
            ? 'Cross-section, wall shear drawn outward'
            : told?.mean != null && told.mean > 0
              ? `Cross-section; wall shear of this thinning fluid ${figure(told.mean, 'stress', { digits: 3 })} on average${told.peak === null ? '' : `, ${figure(told.peak, 'stress', { digits: 3 })} at most`}`
              : 'Cross-section'}
      </figcaption>
      <svg
        viewBox={`0 0 ${WIDE} ${HIGH}`}
        role="img"
        aria-label={
          gradient === null
            ? 'Cross-section'
            : `Cross-section: wall shear ${shear(floor)} on the floor, ${shear(side)} ${unitInPrint(unit)} on the side`
        }
      >
        {bands.map((band, i) => (
          <path
            // biome-ignore lint/suspicious/noArrayIndexKey: a band has its place on the wall alone
            key={i}
            d={`M${band.corners.map(point).join('L')}Z`}
            className="shear"
            fill={amount(now, most > 0 ? ((gradient ?? 0) * band.shear) / most : 0)}
            stroke={amount(now, most > 0 ? ((gradient ?? 0) * band.shear) / most : 0)}
          />
        ))}
        <path className="body" d={`M${outline}Z`} />
        {gradient !== null && (
          <>
            <text x={left} y={top - 6} textAnchor="middle">
              {shear(floor)} {unitInPrint(unit)}{' '}
              {layer.profile.kind === 'rectangle' ? 'roof and floor' : 'floor'}
            </text>
            <text x={x(middle + half) + REACH + 6} y={y(section.depth / 2) + 4}>
              {shear(side)}
            </text>
          </>
        )}
        {speed !== null && section.depth * scale > 14 && (
          <text className="inside" x={left} y={y(section.depth / 2) + 4} textAnchor="middle">
            {figure(speed, 'velocity', { digits: 2 })}
          </text>
        )}
        <path className="measure" d={`M${x(middle - half)} ${HIGH - 20}v6m0 -3H${x(middle + half)}m0 -3v6`} />
        <text x={left} y={HIGH - 3} textAnchor="middle">
          {figure(section.width, 'length', { digits: 3 })}
        </text>
      </svg>
    </figure>
  );
}
