import { Clipper, type Path64 } from 'clipper2-ts';

/** Most vertices of which every two edges are looked at. */
const MANY = 160;

/**
 * An outline that neither crosses nor touches itself, counter-clockwise and without vertices on a straight
 * side: what a union would make of it. Null where only the union can tell.
 */
export function plainLoop(path: Path64): Path64 | null {
  const out = withoutStraight(path);
  if (!out || out.length < 3 || out.length > MANY || touchesItself(out)) return null;
  return Clipper.area(out) < 0 ? out.reverse() : out;
}

/** Without doubled vertices and those on a straight side; null where an edge turns straight back. */
function withoutStraight(path: Path64): Path64 | null {
  const distinct = path.filter(({ x, y }, i) => {
    const { x: px, y: py } = path[i === 0 ? path.length - 1 : i - 1];
    return x !== px || y !== py;
  });
  const n = distinct.length;
  const out: Path64 = [];
  for (let i = 0; i < n; i += 1) {
    const [a, b, c] = [distinct[i === 0 ? n - 1 : i - 1], distinct[i], distinct[i + 1 === n ? 0 : i + 1]];
    const [ux, uy, vx, vy] = [b.x - a.x, b.y - a.y, c.x - b.x, c.y - b.y];
    if (ux * vy - uy * vx !== 0) out.push(b);
    else if (ux * vx + uy * vy < 0) return null;
  }
  return out;
}

function touchesItself(path: Path64): boolean {
  const n = path.length;
  for (let i = 0; i < n; i += 1) {
    const [a, b] = [path[i], path[i + 1 === n ? 0 : i + 1]];
    const left = Math.min(a.x, b.x);
    const right = Math.max(a.x, b.x);
    const top = Math.min(a.y, b.y);
    const bottom = Math.max(a.y, b.y);
    for (let j = i + 2; j < n; j += 1) {
      if (i === 0 && j === n - 1) continue;
      const [c, d] = [path[j], path[j + 1 === n ? 0 : j + 1]];
      if (c.x < left && d.x < left) continue;
      if (c.x > right && d.x > right) continue;
      if (c.y < top && d.y < top) continue;
      if (c.y > bottom && d.y > bottom) continue;
      const [ux, uy, vx, vy] = [b.x - a.x, b.y - a.y, d.x - c.x, d.y - c.y];
      const [sc, sd] = [ux * (c.y - a.y) - uy * (c.x - a.x), ux * (d.y - a.y) - uy * (d.x - a.x)];
      if ((sc > 0 && sd > 0) || (sc < 0 && sd < 0)) continue;
      const [sa, sb] = [vx * (a.y - c.y) - vy * (a.x - c.x), vx * (b.y - c.y) - vy * (b.x - c.x)];
      if ((sa > 0 && sb > 0) || (sa < 0 && sb < 0)) continue;
      return true;
    }
  }
  return false;
}
