import { locate, locatorOf, type Place } from '../cell/locate.ts';
import { quadratic, quadraticGradient } from '../cell/triangle.ts';
import type { Mesh } from '../mesh/mesh.ts';
import type { Profile } from '../section/profile.ts';
import { type SectionField, sectionField } from '../section/section-field.ts';
import { type Section, sectionOf } from '../section/section-of.ts';
import { SYMMETRY } from '../section/section-shape.ts';
import {
  type HuggingPlace,
  powerOf,
  type Samples,
  type SectionExposure,
  spreadOf,
  WALL_POINTS,
} from './section-exposure.ts';

/** Any profile, from its finite-element field: a few parts in a thousand, near walls a few in a hundred. */
export function elementsExposure(
  profile: Profile,
  width: number,
  depth: number,
  where: string,
): SectionExposure {
  const section = sectionOf(profile, width, depth, where);
  const field = sectionField(profile, width, depth, where);
  const samples = fieldSamples(field, section);
  const parts = field.mirrored ? 2 : 1;
  const wall = wallEdges(field.mesh);
  const clearance = 2 * largestBall(field.mesh, wall);
  const sample = fieldAt(field);
  return {
    area: section.area,
    conductance: section.conductance,
    clearance,
    ...spreadOf(samples),
    shearPower: (exponent) => parts * powerOf(samples, exponent),
    hugging(diameter): HuggingPlace | null {
      if (!(diameter <= clearance)) return null;
      // Where a re-entrant corner leaves the peak unbounded, the middle of the floor stands for the wall.
      const [ax, y] = section.peakShearAt ?? [0, 0];
      const x = field.mirrored ? Math.max(0, Math.abs(ax) - field.leftOut / 2) : ax;
      const [px, py, nx, ny] = inward(field.mesh, wall, x, y);
      const at = (distance: number): { velocity: number; shear: number } | null =>
        sample(px + distance * nx, py + distance * ny);
      const centre = at(diameter / 2);
      if (!centre) return null;
      return {
        ...centre,
        between: Float64Array.from(WALL_POINTS, (share) => (at((share * diameter) / 2) ?? centre).shear),
      };
    },
  };
}

/** Rows of small triangles that each triangle is cut into, so that the slow hundredth at the wall is seen. */
const CUTS = 6;
const ROWS = 96;

/** Of the whole section, or of its right half where that is what is meshed. */
function fieldSamples({ mesh, velocity, mirrored, leftOut }: SectionField, section: Section): Samples {
  const { triangles } = mesh;
  const points = (triangles.length / 6) * CUTS * CUTS;
  const rows = mirrored && leftOut > 0 ? ROWS : 0;
  const area = new Float64Array(points + rows);
  const speed = new Float64Array(points + rows);
  const shear = new Float64Array(points + rows);
  const reach = new Float64Array(points + rows);
  const here = pointOf(mesh, velocity);
  let p = 0;
  for (let t = 0; t < triangles.length / 6; t += 1) {
    for (let i = 0; i < CUTS; i += 1) {
      for (let j = 0; j < 2 * (CUTS - i) - 1; j += 1) {
        // Middles of the small triangles: those that point as the large one does, and those between them.
        const offset = j % 2 === 0 ? 1 / 3 : 2 / 3;
        here.at(t, (i + offset) / CUTS, ((j >> 1) + offset) / CUTS);
        area[p] = here.jacobian / (2 * CUTS * CUTS);
        speed[p] = here.velocity;
        shear[p] = here.shear;
        reach[p] = (here.shear * Math.sqrt(area[p])) / 2;
        p += 1;
      }
    }
  }
  // The flat middle that was left out: as between plates.
  const h = section.depth;
  for (let row = 0; row < rows; row += 1) {
    const y = ((row + 0.5) / rows) * h;
    area[points + row] = (leftOut / 2) * (h / rows);
    speed[points + row] = (y * (h - y)) / 2;
    shear[points + row] = Math.abs(h / 2 - y);
    reach[points + row] = (shear[points + row] * h) / (2 * rows);
  }
  return { area, velocity: speed, shear, reach };
}

interface FieldPoint {
  velocity: number;
  shear: number;
  jacobian: number;
  at(triangle: number, la: number, lb: number): void;
}

/** Reads the field at local coordinates of a triangle. */
function pointOf(mesh: Mesh, velocity: Float64Array): FieldPoint {
  const n = new Float64Array(6);
  const da = new Float64Array(6);
  const db = new Float64Array(6);
  return {
    velocity: 0,
    shear: 0,
    jacobian: 0,
    at(triangle, la, lb) {
      quadratic(la, lb, n);
      quadraticGradient(la, lb, da, db);
      let [u, ua, ub, xa, xb, ya, yb] = [0, 0, 0, 0, 0, 0, 0];
      for (let i = 0; i < 6; i += 1) {
        const node = mesh.triangles[6 * triangle + i];
        u += n[i] * velocity[node];
        ua += da[i] * velocity[node];
        ub += db[i] * velocity[node];
        xa += da[i] * mesh.x[node];
        xb += db[i] * mesh.x[node];
        ya += da[i] * mesh.y[node];
        yb += db[i] * mesh.y[node];
      }
      this.velocity = u;
      this.jacobian = Math.abs(xa * yb - xb * ya);
      this.shear = Math.hypot(ua * yb - ub * ya, ub * xa - ua * xb) / this.jacobian;
    },
  };
}

function fieldAt({
  mesh,
  velocity,
  mirrored,
}: SectionField): (x: number, y: number) => { velocity: number; shear: number } | null {
  const locator = locatorOf(mesh);
  const place: Place = { triangle: -1, la: 0, lb: 0 };
  const here = pointOf(mesh, velocity);
  return (x, y) => {
    if (!locate(locator, mirrored ? Math.abs(x) : x, y, place)) return null;
    here.at(place.triangle, place.la, place.lb);
    return { velocity: here.velocity, shear: here.shear };
  };
}

/** Boundary edges that are wall, by index. */
function wallEdges(mesh: Mesh): number[] {
  const edges: number[] = [];
  mesh.boundaryTag.forEach((tag, e) => {
    if (tag !== SYMMETRY) edges.push(e);
  });
  return edges;
}

/** The nearest point of the wall (its edges taken as chords of two) and the direction into the fluid there. */
function inward(
  mesh: Mesh,
  wall: readonly number[],
  x: number,
  y: number,
): [x: number, y: number, nx: number, ny: number, distance: number] {
  let best: [number, number, number, number, number] = [x, y, 0, 1, Number.POSITIVE_INFINITY];
  for (const e of wall) {
    const [start, end, middle] = mesh.boundary.subarray(3 * e, 3 * e + 3);
    for (const [a, b] of [
      [start, middle],
      [middle, end],
    ]) {
      const dx = mesh.x[b] - mesh.x[a];
      const dy = mesh.y[b] - mesh.y[a];
      const length = Math.hypot(dx, dy);
      const share = ((x - mesh.x[a]) * dx + (y - mesh.y[a]) * dy) / (length * length);
      const at = Math.min(1, Math.max(0, share));
      const px = mesh.x[a] + at * dx;
      const py = mesh.y[a] + at * dy;
      const distance = Math.hypot(x - px, y - py);
      // The fluid lies on the left of its boundary.
      if (distance < best[4]) best = [px, py, -dy / length, dx / length, distance];
    }
  }
  return best;
}

/** Radius of the largest circle that touches no wall: the best node, then a search with halving steps. */
function largestBall(mesh: Mesh, wall: readonly number[]): number {
  let best = 0;
  let [x, y] = [0, 0];
  for (let i = 0; i < mesh.nodeCount; i += 1) {
    const distance = inward(mesh, wall, mesh.x[i], mesh.y[i])[4];
    if (distance > best) {
      best = distance;
      x = mesh.x[i];
      y = mesh.y[i];
    }
  }
  const inside = locatorOf(mesh);
  const place: Place = { triangle: -1, la: 0, lb: 0 };
  for (let step = best / 2; step > 1e-4 * best; ) {
    let moved = false;
    for (const [dx, dy] of [
      [step, 0],
      [-step, 0],
      [0, step],
      [0, -step],
    ]) {
      if (!locate(inside, x + dx, y + dy, place)) continue;
      const distance = inward(mesh, wall, x + dx, y + dy)[4];
      if (distance <= best) continue;
      best = distance;
      x += dx;
      y += dy;
      moved = true;
    }
    if (!moved) step /= 2;
  }
  return best;
}
