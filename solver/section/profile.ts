/**
 * The cross-section that a process gives a layer. A channel's width is the mask width: what is
 * solved is the shape that the process makes of it. Lengths in metres.
 */
export type Profile =
  | { readonly kind: 'rectangle' }
  /** Side walls at `wallAngle` degrees from the floor; the width is at the top (mask side). */
  | { readonly kind: 'trapezoid'; readonly wallAngle: number }
  /** Isotropic etch: flat of the mask width, quarter circles of radius depth at both sides. */
  | { readonly kind: 'rounded' }
  /** Bore = width = depth. */
  | { readonly kind: 'circle' }
  /** Full axes width by depth. */
  | { readonly kind: 'ellipse' }
  /** Isosceles: lid = width, tip at the depth. */
  | { readonly kind: 'triangle' }
  /** A measured cross-section, closed, any direction, not scaled by width; points [x, y] in metres. */
  | { readonly kind: 'polygon'; readonly points: readonly (readonly [number, number])[] };

export type ProfileKind = Profile['kind'];
