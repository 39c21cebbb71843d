import type { Chip, Limit } from '../chip/chip.ts';
import type {
  CellResult,
  LimitResult,
  PieceResult,
  PortResult,
  Result,
  RouteResult,
  TargetResult,
} from '../chip/result.ts';
import { once } from '../network/once.ts';
import type { ErrorBands } from './bands.ts';
import type { ChipNet } from './flow-net.ts';

type Told = Pick<Result, 'ports' | 'channels' | 'cells' | 'routes' | 'targets' | 'limits'>;

/** Bands by the names of pieces and cells. */
export interface PlaceBands {
  readonly bands: ErrorBands;
  readonly piece: (name: string) => NonNullable<PieceResult['band']> | null;
  readonly cell: (name: string) => NonNullable<CellResult['band']> | null;
  readonly isCell: (name: string) => boolean;
  /** Error of a piece's resistance, of which the doubt of its length is a part. */
  readonly duct: (name: string) => number;
}

/** @param names of the pieces, in the order of their bands */
export function placeBands(
  cells: readonly CellResult[],
  names: readonly string[],
  bands: ErrorBands,
): PlaceBands {
  const pieceAt = once(() => new Map(names.map((name, e) => [name, e])));
  const cellAt = once(() => new Map(cells.map(({ id }, i) => [id, i])));
  // where no piece has a band of its own, none need be looked for
  const own = bands.pieces.some((band) => band !== null);
  return {
    bands,
    piece: (name) => (own ? (bands.pieces[pieceAt().get(name) ?? -1] ?? null) : null),
    cell: (name) => bands.cells[cellAt().get(name) ?? -1] ?? null,
    isCell: (name) => cellAt().has(name),
    duct: (name) => bands.ducts[pieceAt().get(name) ?? -1] ?? 0,
  };
}

const shearAt = ({ bands, piece, cell }: PlaceBands, where: string): number =>
  piece(where)?.shear ?? cell(where)?.shear ?? bands.chip.shear;

/**
 * Ports, pieces, cells, routes, targets and limits with how far each may be off, as `Bands`. Where a large chip's
 * pieces have no band of their own, the worst of the chip stands for it.
 *
 * @param routesOf routes as `routesWithBands` gives them, of ports that have theirs
 */
export function withBands(
  chip: Chip,
  told: Told,
  places: PlaceBands,
  routesOf: (ports: readonly PortResult[]) => readonly RouteResult[],
): Told {
  const { bands, piece } = places;
  const ports = told.ports.map((port, i) => banded(port, bands.ports[i]));
  const channels = told.channels.map(({ id, pieces: own }) => ({
    id,
    pieces: own.map((one, i) => banded(one, piece(`${id}#${i + 1}`))),
  }));
  const routes = routesOf(ports);
  return {
    ports,
    channels,
    cells: told.cells.map((cell, i) => banded(cell, bands.cells[i])),
    routes,
    targets: told.targets.map((target, i) =>
      targetBand(target, 'share' in chip.targets[i], { ports, channels }),
    ),
    limits: told.limits.map((limit, i) => limitBand(limit, chip.limits[i], places, routes)),
  };
}

/** With a band, where there is one. */
const banded = <T extends object, B>(one: T, band: B | null | undefined): T =>
  band ? { ...one, band } : one;

/** By how much the pattern of flow that paths were followed in differs from the flow, of each cell by name. */
function roundingOf({ crossing, element }: ChipNet): Map<string, number> {
  const found = new Map<string, number>();
  crossing.forEach(({ rounding = 0 }, e) => {
    if (rounding > (found.get(element[e].name) ?? 0)) found.set(element[e].name, rounding);
  });
  return found;
}

export function routesWithBands(
  chip: Chip,
  routes: readonly RouteResult[],
  ports: readonly PortResult[],
  places: PlaceBands,
  net: ChipNet,
): RouteResult[] {
  const rounding = roundingOf(net);
  const flowIn = (name: string): number =>
    places.piece(name)?.flow ?? (places.isCell(name) ? 0 : places.bands.chip.flow);
  const own = new Map(ports.map(({ id, band }) => [id, band]));
  const [outs, ins] = [new Map<string, number>(), new Map<string, number>()];
  for (const { from, to } of routes) {
    outs.set(from, (outs.get(from) ?? 0) + 1);
    ins.set(to, (ins.get(to) ?? 0) + 1);
  }
  const everywhere = Math.max(0, ...rounding.values());
  const laws = new Map(
    chip.limits.flatMap((limit) => ('law' in limit ? [[limit.name, limit.law] as const] : [])),
  );
  return routes.map((route): RouteResult => {
    const [a, b] = [own.get(route.from), own.get(route.to)];
    if (!a || !b) return route;
    // Where an inlet feeds several outlets that others feed too, both of its ports divide it.
    const mixed = outs.get(route.from)! > 1 && ins.get(route.to)! > 1;
    const along = route.path?.map(({ name }) => name) ?? [];
    const most = (of: (name: string) => number): number => Math.max(0, ...along.map(of));
    const flow = Math.max(a.flow, b.flow, most(flowIn));
    const time = flow + most(places.duct);
    const shear = shearAt(places, route.peakAt ?? '');
    const round = along.length > 0 ? most((name) => rounding.get(name) ?? 0) : everywhere;
    const wall = Math.max(time, shear) + round;
    return {
      ...route,
      band: { share: mixed ? a.share + b.share : Math.max(a.share, b.share), time, shear, wall },
      damage: route.damage.map((entry) => {
        const law = laws.get(entry.limit);
        return law ? { ...entry, band: law.stress * (shear + round) + law.time * time } : entry;
      }),
    };
  });
}

/** Of a flow or share at a port, or in the piece of a channel that is off by most. */
function targetBand(
  target: TargetResult,
  share: boolean,
  { ports, channels }: Pick<Told, 'ports' | 'channels'>,
): TargetResult {
  if (target.got === null) return target;
  const told: readonly Pick<PieceResult | PortResult, 'band'>[] =
    target.port === undefined
      ? (channels.find(({ id }) => id === target.channel)?.pieces ?? [])
      : [ports.find(({ id }) => id === target.port) ?? {}];
  let most: number | null = null;
  for (const { band } of told) if (band) most = Math.max(most ?? 0, share ? band.share : band.flow);
  return most === null ? target : { ...target, band: most };
}

/** Of a wall shear, or of damage by a law; what a curve or a floor counts has none that could be told so simply. */
function limitBand(
  result: LimitResult,
  limit: Limit,
  places: PlaceBands,
  routes: readonly RouteResult[],
): LimitResult {
  if (result.worst === null) return result;
  if ('shear' in limit) return { ...result, band: shearAt(places, result.where) };
  if (!('law' in limit) || !result.route) return result;
  const [from, to] = result.route;
  const route = routes.find((one) => one.from === from && one.to === to);
  const band = route?.damage.find((entry) => entry.limit === limit.name)?.band;
  return band === undefined ? result : { ...result, band };
}
