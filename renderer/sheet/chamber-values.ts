import type { Chamber, Chip } from '../../solver/chip/chip.ts';
import type { Result } from '../../solver/chip/result.ts';
import { metres } from '../../solver/chip/units.ts';
import { area } from '../geometry/path.ts';
import type { ShownGraph } from '../solving/shown-graph.ts';
import type { Overlay } from './overlay.ts';
import { sitePressures } from './site-pressures.ts';

/**
 * What a chamber as a whole has of what is shown, by its id: the share of the flow that goes through it, its
 * pressure (Pa), the time that its volume takes to be filled anew at this flow (s), its depth (m), or how
 * much a finding says of it.
 */
export function chamberValues(
  overlay: Overlay,
  chip: Chip,
  result: Result | null,
  graph: ShownGraph | null,
): ReadonlyMap<string, number> {
  const out = new Map<string, number>();
  if (chip.chambers.length === 0) return out;
  if (overlay === 'depth') {
    for (const chamber of chip.chambers) out.set(chamber.id, depthOf(chip, chamber));
  } else if (result && overlay === 'findings') {
    const told = new Map(chip.chambers.map(({ id }) => [`chamber:${id}`, id]));
    for (const { where, severity } of result.findings) {
      const id = told.get(where);
      if (id !== undefined) out.set(id, Math.max(out.get(id) ?? 0, severity === 'note' ? 0.3 : 1));
    }
  } else if (result && (overlay === 'share' || overlay === 'time' || overlay === 'pressure')) {
    const sites = sitesOf(chip, graph);
    const pressures = overlay === 'pressure' ? sitePressures(result) : null;
    const through = pressures ? null : flowsThrough(result, sites);
    const total = result.ports.reduce((sum, port) => sum + Math.max(0, port.flow ?? 0), 0);
    for (const chamber of chip.chambers) {
      const site = sites.get(chamber.id)!;
      const flow = through?.get(site) ?? 0;
      const value =
        overlay === 'pressure'
          ? pressures!.get(site)
          : flow === 0
            ? undefined
            : overlay === 'share'
              ? flow / total
              : volumeOf(chip, chamber) / flow;
      if (value !== undefined && Number.isFinite(value)) out.set(chamber.id, value);
    }
  }
  return out;
}

const depthOf = (chip: Chip, { layer }: Chamber): number =>
  metres(chip.layers.find(({ id }) => id === layer)?.depth ?? 0);

/** m³ */
const volumeOf = (chip: Chip, chamber: Chamber): number =>
  metres(metres(Math.abs(area(chamber.outline)))) * depthOf(chip, chamber);

/** The place in the drawing that each chamber is, by the chamber's id. */
function sitesOf(chip: Chip, graph: ShownGraph | null): ReadonlyMap<string, string> {
  const out = new Map(chip.chambers.map(({ id }) => [id, `chamber:${id}`]));
  for (const site of graph?.sites ?? [])
    for (const id of site.chambers) if (out.has(id)) out.set(id, site.name);
  return out;
}

/** m³/s that go through each of some places: what comes into it by channels and holes, or what leaves it. */
function flowsThrough(result: Result, sites: ReadonlyMap<string, string>): ReadonlyMap<string, number> {
  const into = new Map<string, number>();
  const outOf = new Map<string, number>();
  const wanted = new Set(sites.values());
  const enter = (site: string, flow: number): void => {
    if (!wanted.has(site)) return;
    const way = flow > 0 ? into : outOf;
    way.set(site, (way.get(site) ?? 0) + Math.abs(flow));
  };
  for (const { pieces } of result.channels)
    for (const { from, to, flow } of pieces) {
      if (flow === null) continue;
      enter(to, flow);
      enter(from, -flow);
    }
  for (const { id, flow } of result.ports) if (flow !== null) enter(`port:${id}`, flow);
  return new Map([...wanted].map((site) => [site, Math.max(into.get(site) ?? 0, outOf.get(site) ?? 0)]));
}
