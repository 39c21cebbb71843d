import type { Layer } from '../../solver/chip/chip.ts';
import { sectionOf } from '../../solver/section/section-of.ts';
import { figure } from '../words/figure.ts';
import { outlineOf } from './section-outline.ts';

const WIDE = 300;
const HIGH = 150;
/** px that the largest wall shear reaches outward. */
const REACH = 20;

/**
 * The cross-section with the wall shear drawn outward from its wall, to one scale; figures where it is
 * read: roof and floor, and the side.
 */
export function SectionPicture({
  layer,
  width,
  flow,
  viscosity,
}: {
  readonly layer: Layer;
  /** nm */
  readonly width: number;
  readonly flow: number | null;
  readonly viscosity: number | null;
}) {
  const wide = width / 1e9;
  const depth = layer.depth / 1e9;
  let section: ReturnType<typeof sectionOf>;
  try {
    section = sectionOf(layer.profile, wide, depth);
  } catch (error) {
    return <p className="soft">{error instanceof Error ? error.message : 'This section cannot be drawn.'}</p>;
  }
  const gradient =
    flow === null || viscosity === null ? null : (viscosity * Math.abs(flow)) / section.conductance;
  const scale = Math.min((WIDE - 96) / section.width, (HIGH - 2 * REACH - 34) / section.depth);
  const outline = outlineOf(layer.profile, wide, depth);
  const x = (m: number): number => WIDE / 2 + m * scale;
  const y = (m: number): number => HIGH / 2 - 8 + (section.depth / 2 - m) * scale;
  const shear = (value: number): string =>
    figure(gradient === null ? null : gradient * value, 'stress', { digits: 3 });
  const half = section.width / 2;
  const most = Math.max(section.peakShear ?? 0, section.floorShear, section.sideShear);
  const floorReach = (REACH * section.floorShear) / most;
  const sideReach = (REACH * section.sideShear) / most;
  const speed = flow === null ? null : (Math.abs(flow) / section.area) * section.peakVelocity;
  return (
    <figure className="section-picture">
      <figcaption>Cross-section, wall shear drawn outward</figcaption>
      <svg
        viewBox={`0 0 ${WIDE} ${HIGH}`}
        role="img"
        aria-label={`Wall shear ${shear(section.floorShear)} on the floor, ${shear(section.sideShear)} on the side`}
      >
        {gradient !== null && (
          <>
            <path
              className="shear"
              d={bulge(x(-half), y(section.depth), x(half), y(section.depth), 0, -floorReach)}
            />
            <path className="shear" d={bulge(x(-half), y(0), x(half), y(0), 0, floorReach)} />
            <path className="shear" d={bulge(x(-half), y(section.depth), x(-half), y(0), -sideReach, 0)} />
            <path className="shear" d={bulge(x(half), y(section.depth), x(half), y(0), sideReach, 0)} />
            <text x={WIDE / 2} y={y(section.depth) - floorReach - 6} textAnchor="middle">
              {shear(section.floorShear)} {layer.profile.kind === 'rectangle' ? 'roof and floor' : 'floor'}
            </text>
            <text x={x(half) + sideReach + 6} y={y(section.depth / 2) + 4}>
              {shear(section.sideShear)}
            </text>
          </>
        )}
        <path
          className="body"
          d={`M${outline.map(([a, b]) => `${x(a).toFixed(2)} ${y(b).toFixed(2)}`).join('L')}Z`}
        />
        {speed !== null && section.depth * scale > 16 && (
          <text className="inside" x={WIDE / 2} y={y(section.depth / 2) + 4} textAnchor="middle">
            {figure(speed, 'velocity', { digits: 2 })}
          </text>
        )}
        <path className="measure" d={`M${x(-half)} ${HIGH - 16}v6m0 -3H${x(half)}m0 -3v6`} />
        <text x={WIDE / 2} y={HIGH - 1} textAnchor="middle">
          {figure(section.width, 'length', { digits: 3 })}
        </text>
      </svg>
    </figure>
  );
}

/** From a to b with its middle pushed out by (dx, dy): nought at the corners, where the shear is. */
function bulge(ax: number, ay: number, bx: number, by: number, dx: number, dy: number): string {
  const k = 4 / 3;
  const c1x = ax + (bx - ax) * 0.12 + dx * k;
  const c1y = ay + (by - ay) * 0.12 + dy * k;
  const c2x = bx - (bx - ax) * 0.12 + dx * k;
  const c2y = by - (by - ay) * 0.12 + dy * k;
  return `M${ax} ${ay}C${c1x} ${c1y} ${c2x} ${c2y} ${bx} ${by}Z`;
}
