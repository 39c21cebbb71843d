import type { Profile } from '../../solver/section/profile.ts';

/** The shape a process gives a section, metres: x across from the middle, y up from the floor. */
export function outlineOf(profile: Profile, width: number, depth: number): (readonly [number, number])[] {
  const a = width / 2;
  const arc = (cx: number, cy: number, rx: number, ry: number, from: number, to: number) =>
    Array.from({ length: 25 }, (_, i) => {
      const angle = ((from + ((to - from) * i) / 24) * Math.PI) / 180;
      return [cx + rx * Math.cos(angle), cy + ry * Math.sin(angle)] as const;
    });
  switch (profile.kind) {
    case 'trapezoid': {
      // the width is at the top; a wall under 90 degrees leans outward as it rises
      const lean = depth / Math.tan((profile.wallAngle * Math.PI) / 180);
      return [
        [-a + lean, 0],
        [a - lean, 0],
        [a, depth],
        [-a, depth],
      ];
    }
    case 'rounded':
      return [...arc(-a, depth, depth, depth, 180, 270), ...arc(a, depth, depth, depth, 270, 360)];
    case 'circle':
    case 'ellipse':
      return arc(0, depth / 2, a, depth / 2, 0, 360);
    case 'triangle':
      return [
        [0, 0],
        [a, depth],
        [-a, depth],
      ];
    case 'polygon':
      return [...profile.points];
    default:
      return [
        [-a, 0],
        [a, 0],
        [a, depth],
        [-a, depth],
      ];
  }
}
