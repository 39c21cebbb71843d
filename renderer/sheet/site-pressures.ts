import type { Result } from '../../solver/chip/result.ts';

/** Mean pressure of a piece needs the pressures at its sites: found by walking out from the ports. */
export function sitePressures(result: Result): ReadonlyMap<string, number> {
  const at = new Map<string, number>();
  for (const port of result.ports) at.set(`port:${port.id}`, port.pressure);
  const edges = new Map<string, { readonly to: string; readonly drop: number }[]>();
  const join = (from: string, to: string, drop: number): void => {
    const list = edges.get(from) ?? [];
    list.push({ to, drop });
    edges.set(from, list);
  };
  for (const channel of result.channels)
    for (const piece of channel.pieces) {
      join(piece.from, piece.to, piece.pressureDrop);
      join(piece.to, piece.from, -piece.pressureDrop);
    }
  const open = [...at.keys()];
  for (let site = open.pop(); site !== undefined; site = open.pop()) {
    for (const { to, drop } of edges.get(site) ?? []) {
      if (at.has(to)) continue;
      at.set(to, at.get(site)! - drop);
      open.push(to);
    }
  }
  return at;
}
