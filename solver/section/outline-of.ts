import { ellipsePerimeter } from './ellipse.ts';
import type { Profile } from './profile.ts';

/** Writes area (m²) and wetted perimeter (m) of the etched shape into out[0], out[1]; closed forms, unchecked. */
export function outlineOf(
  profile: Exclude<Profile, { kind: 'polygon' }>,
  width: number,
  depth: number,
  out: Float64Array,
): void {
  switch (profile.kind) {
    case 'rectangle':
      out[0] = width * depth;
      out[1] = 2 * (width + depth);
      break;
    case 'circle':
    case 'ellipse':
      out[0] = (Math.PI * width * depth) / 4;
      out[1] = ellipsePerimeter(width / 2, depth / 2);
      break;
    case 'triangle':
      triangle(width, depth, out);
      break;
    case 'rounded':
      out[0] = width * depth + (Math.PI * depth * depth) / 2;
      out[1] = 2 * width + (2 + Math.PI) * depth;
      break;
    case 'trapezoid': {
      const slope = Math.tan((profile.wallAngle * Math.PI) / 180);
      const floor = width - (2 * depth) / slope;
      if (floor <= 0) {
        triangle(width, (width / 2) * slope, out);
        break;
      }
      out[0] = ((width + floor) / 2) * depth;
      out[1] = width + floor + 2 * Math.hypot(depth, depth / slope);
    }
  }
}

function triangle(width: number, depth: number, out: Float64Array): void {
  out[0] = (width * depth) / 2;
  out[1] = width + 2 * Math.hypot(depth, width / 2);
}
