import type { Chip, Limit } from '../chip/chip.ts';
import type { RouteResult, WallHuggingResult } from '../chip/result.ts';
import { orderOf } from '../exposure/flow-net.ts';
import { damageOf, doseExponent } from '../exposure/laws.ts';
import { type Route, RouteFinder } from '../exposure/routes.ts';
import type { Finding } from '../problem/finding.ts';
import { covers, routeOf } from './coverage.ts';
import type { ChipNet } from './flow-net.ts';

export type LawLimit = Extract<Limit, { law: unknown }>;

/** Every route of the chip with what is gathered along it. */
export interface Exposure {
  readonly net: ChipNet;
  readonly routes: readonly Route[];
  readonly results: readonly RouteResult[];
  /** Path of edges that carries most, of the routes that carry most. */
  readonly paths: ReadonlyMap<Route, readonly number[]>;
  /** Damage that a law finds on each route (by index), mean path and along the wall; null where none fits. */
  damage(limit: LawLimit, route: number): { readonly mean: number; readonly wallHugging: number | null };
  readonly findings: readonly Finding[];
}

/** Routes listed, and those of them that are listed with their path; the rest is summed. */
const MOST_ROUTES = 5000;
const MOST_PATHS = 200;
/** Steps along edges, all inlets together, that are worth a wait; inlets beyond are summed too. */
const MOST_STEPS = 2e7;

export function exposureOf(chip: Chip, net: ChipNet): Exposure {
  const diameters = [...new Set(chip.limits.flatMap(({ cellDiameter }) => cellDiameter ?? []))];
  const laws = chip.limits.filter((limit): limit is LawLimit => 'law' in limit);
  const figures = figuresOf(chip, net, diameters, laws);
  const order = orderOf(net);
  const finder = new RouteFinder(net, order, figures);
  let entering = 0;
  for (const inlet of net.inlets) entering += inlet.flow;
  const shareOf = (route: Route): number => (route.share * route.from.flow) / entering;

  const inlets = [...net.inlets].sort((a, b) => b.flow - a.flow);
  const most = Math.max(1, Math.floor(MOST_STEPS / Math.max(1, net.tail.length * figures.count)));
  const all = inlets.slice(0, most).flatMap((inlet) => finder.from(inlet));
  const portIndex = new Map(chip.ports.map(({ id }, index) => [id, index]));
  const place = ({ from, to }: Route): number =>
    portIndex.get(from.id)! * chip.ports.length + portIndex.get(to.id)!;
  const byShare = all.toSorted((a, b) => shareOf(b) - shareOf(a) || place(a) - place(b));
  const routes = byShare.slice(0, MOST_ROUTES).sort((a, b) => place(a) - place(b));
  const paths = mainPaths(finder, byShare.slice(0, MOST_PATHS));

  const damage = (limit: LawLimit, index: number) => {
    const k = laws.indexOf(limit);
    const route = routes[index];
    const wall = limit.cellDiameter === undefined ? null : route.most[1 + figures.lawMost[k]];
    return {
      mean: damageOf(limit.law, route.mean[1 + k], limit.passes),
      wallHugging: wall === null || !Number.isFinite(wall) ? null : damageOf(limit.law, wall, limit.passes),
    };
  };
  const results = routes.map((route, index): RouteResult => {
    const huggings = diameters.map(
      (cellDiameter, k): WallHuggingResult => ({
        cellDiameter,
        residenceTime: finite(route.main[1 + k]),
        peakShear: finite(route.peak[2 + k]),
      }),
    );
    const path = paths.get(route);
    return {
      from: route.from.id,
      to: route.to.id,
      share: shareOf(route),
      residenceTime: finite(route.mean[0]),
      fastest: route.least[0],
      slowest: route.most[0],
      peakWallShear: route.peak[0] >= 0 ? finite(route.peak[0]) : null,
      ...(route.peakEdge[0] >= 0 ? { peakAt: net.element[route.peakEdge[0]].name } : {}),
      ...stretchOf(net, route),
      ...(path ? { pathShare: route.mainShare, path: alongPath(net, path) } : {}),
      ...(huggings.length > 0 ? { wallHugging: huggings[0] } : {}),
      ...(huggings.length > 1 ? { wallHuggings: huggings } : {}),
      damage: laws
        .filter((limit) => onRoute(limit, route))
        .map((limit) => ({ limit: limit.name, ...damage(limit, index) })),
    };
  });
  return {
    net,
    routes,
    results,
    paths,
    damage,
    findings: [
      ...summedFinding(routes, inlets.length > most, shareOf),
      ...sharedFinding(routes),
      ...tooLargeFindings(net, diameters),
    ],
  };
}

const finite = (value: number): number | null => (Number.isFinite(value) ? value : null);

/** Whether a limit is one of this route. */
export function onRoute(limit: Limit, { from, to }: Route): boolean {
  const own = routeOf(limit);
  return own === null || (own[0] === from.id && own[1] === to.id);
}

/**
 * What is gathered: mean: time, then a dose for each law; main: a time for each diameter; most: time of the
 * slowest, then a dose for each law with a diameter; least: time of the fastest; peak: wall shear, rate of
 * stretching, then the stress for each diameter.
 */
function figuresOf(chip: Chip, net: ChipNet, diameters: readonly number[], laws: readonly LawLimit[]) {
  const { crossing, element } = net;
  const edges = crossing.length;
  const of = (value: (e: number) => number): Float64Array => {
    const out = new Float64Array(edges);
    for (let e = 0; e < edges; e += 1) out[e] = value(e);
    return out;
  };
  const huggings = diameters.map((diameter) => crossing.map((how) => how.hugging(diameter)));
  const masks = laws.map((limit) => covers(limit, chip));
  const lawMost: number[] = [];
  const most: Float64Array[] = [of((e) => crossing[e].slow)];
  laws.forEach((limit, k) => {
    lawMost.push(limit.cellDiameter === undefined ? -1 : most.length - 1);
    if (limit.cellDiameter === undefined) return;
    const along = huggings[diameters.indexOf(limit.cellDiameter)];
    const exponent = doseExponent(limit.law);
    most.push(of((e) => (masks[k](element[e]) ? (along[e]?.dose(exponent) ?? Number.POSITIVE_INFINITY) : 0)));
  });
  const mean = [
    of((e) => crossing[e].time),
    ...laws.map(({ law }, k) => of((e) => (masks[k](element[e]) ? crossing[e].dose(doseExponent(law)) : 0))),
  ];
  const main = [
    of(() => 0),
    ...huggings.map((along) => of((e) => along[e]?.time ?? Number.POSITIVE_INFINITY)),
  ];
  const withStretch = chip.limits.length > 0;
  const peak = [
    of((e) => crossing[e].peakWallShear ?? Number.POSITIVE_INFINITY),
    of((e) => (withStretch ? (crossing[e].stretch?.rate ?? 0) : 0)),
    ...huggings.map((along) => of((e) => along[e]?.peak ?? Number.POSITIVE_INFINITY)),
  ];
  const least = [of((e) => crossing[e].fast)];
  const count = mean.length + main.length + most.length + peak.length + least.length;
  return { mean, main, most, least, peak, lawMost, count };
}

function stretchOf(net: ChipNet, route: Route): Pick<RouteResult, 'stretch'> {
  const edge = route.peakEdge[1];
  const stretch = edge >= 0 && route.peak[1] > 0 ? net.crossing[edge].stretch : null;
  return stretch ? { stretch: { ...stretch, where: net.element[edge].name } } : {};
}

function mainPaths(finder: RouteFinder, routes: readonly Route[]): Map<Route, number[]> {
  const byInlet = new Map<Route['from'], Route[]>();
  for (const route of routes) {
    const own = byInlet.get(route.from);
    if (own) own.push(route);
    else byInlet.set(route.from, [route]);
  }
  const paths = new Map<Route, number[]>();
  for (const [inlet, own] of byInlet) {
    finder.from(inlet);
    for (const route of own) paths.set(route, finder.mainPath(route.to));
  }
  return paths;
}

function alongPath(net: ChipNet, path: readonly number[]): NonNullable<RouteResult['path']> {
  let time = 0;
  return path.map((e) => {
    time += net.crossing[e].time;
    return { name: net.element[e].name, time, pressure: net.pressure[net.head[e]] };
  });
}

function summedFinding(
  routes: readonly Route[],
  inletsLeft: boolean,
  shareOf: (route: Route) => number,
): Finding[] {
  if (routes.length < MOST_ROUTES && !inletsLeft) return [];
  let listed = 0;
  for (const route of routes) listed += shareOf(route);
  const rest = 1 - listed;
  if (!(rest > 1e-9)) return [];
  return [
    {
      kind: 'routes-summed',
      severity: 'note',
      where: '',
      says: `The ${routes.length.toLocaleString('en')} routes listed carry ${(100 * listed).toPrecision(4)} % of the flow; the rest, ${(100 * rest).toPrecision(2)} %, goes by routes that carry less each and are not listed.`,
      do: 'Look at the channels themselves for what goes there, or limit a route by its two ports.',
    },
  ];
}

/** Shares of routes need an assumption where two inlets both feed two outlets. */
function sharedFinding(routes: readonly Route[]): Finding[] {
  const inletsOf = new Map<string, string[]>();
  for (const { from, to } of routes) {
    const own = inletsOf.get(to.id);
    if (own) own.push(from.id);
    else inletsOf.set(to.id, [from.id]);
  }
  const seen = new Set<string>();
  let shared = false;
  for (const inlets of inletsOf.values()) {
    if (inlets.length < 2) continue;
    const key = JSON.stringify(inlets);
    shared ||= seen.has(key);
    seen.add(key);
  }
  if (!shared) return [];
  return [
    {
      kind: 'streams-meet',
      severity: 'note',
      where: '',
      says: 'Streams from several inlets meet and part again: routes are reckoned as if they mixed fully where they meet, though laminar streams run on side by side.',
      do: 'Take shares of single routes as those of a mixture; flows at ports and in channels do not depend on this.',
    },
  ];
}

function tooLargeFindings(net: ChipNet, diameters: readonly number[]): Finding[] {
  return diameters.flatMap((diameter): Finding[] => {
    const stuck = new Set<string>();
    net.crossing.forEach((how, e) => {
      if (!how.hugging(diameter)) stuck.add(net.element[e].name || [...net.element[e].ids][0]);
    });
    if (stuck.size === 0) return [];
    const [first] = stuck;
    const more = stuck.size > 1 ? ` and ${stuck.size - 1} more` : '';
    return [
      {
        kind: 'cell-too-large',
        severity: 'stop',
        where: first,
        says: `Cells of ${Number((diameter * 1e6).toPrecision(3))} µm do not fit through ${first}${more}: they are larger than what is open there.`,
        do: 'Widen or deepen it beyond the cell, or correct the cell diameter of the limit.',
      },
    ];
  });
}
