import type { Graph, Site } from '../../chip/graph.ts';
import type { Drawing } from '../../chip/read-graph-drawing.ts';
import type { Finding } from '../../problem/finding.ts';
import type { Ground, Part } from './assemble.ts';
import { BEND_TURN, STEP } from './bounds.ts';
import type { CellKind } from './spec.ts';

/** A cell before nodes are numbered. */
export interface Draft {
  /** Cluster. */
  readonly number: number;
  readonly ground: Ground;
  readonly origin: readonly [number, number];
  readonly kind: CellKind;
  /** "junction:1" after its first site, else "bend:4" or "step:1". */
  readonly name: string;
  /** Name of the first site inside; '' where there is none. */
  readonly site: string;
}

/** A part with the name and kind it bears. */
export interface NamedPart extends Part {
  readonly name: string;
  readonly kind: CellKind;
}

/** Gives cells their names, in the order in which they are asked. */
export class Names {
  readonly #used = new Map<string, number>();
  readonly #counts = { bend: 0, step: 0 };

  /** The next bend or step that has no site. */
  plain(kind: 'bend' | 'step'): string {
    this.#counts[kind]++;
    return `${kind}:${this.#counts[kind]}`;
  }

  /**
   * Parts of a cell: the first bears its name, the others it with a number. What is only the way from a cut
   * to a hole is named after the hole.
   */
  parts(draft: Draft, parts: readonly Part[], graph: Graph): NamedPart[] {
    return parts.map((part): NamedPart => {
      const { mouths } = part;
      const rim = mouths.find((m) => m.kind === 'rim');
      const site = rim && mouths.length === 2 ? graph.sites[rim.site]! : undefined;
      const hole = site && (site.kind === 'port' || site.kind === 'via');
      const base = hole ? site.name : draft.name;
      const copies = (this.#used.get(base) ?? 0) + 1;
      this.#used.set(base, copies);
      const name = copies === 1 ? base : `${base}.${copies}`;
      return { ...part, name, kind: hole ? (site.kind as 'port' | 'via') : draft.kind };
    });
  }
}

export function draftOf(
  drawing: Drawing,
  graph: Graph,
  number: number,
  ground: Ground,
  steep: boolean,
  names: Names,
): Draft {
  const sites = ground.sites.map((i) => graph.sites[i]!).filter((s) => s.kind !== 'end');
  const first = ground.spans[0]!;
  const at = sites[0]?.at ?? drawing.placeAt(first.channel, (first.core[0] + first.core[1]) / 2);
  const plain = steep ? 'step' : 'bend';
  return {
    number,
    ground,
    origin: [Math.round(at[0]), Math.round(at[1])],
    kind: sites.length > 0 ? siteKind(graph, sites) : plain,
    name: sites[0]?.name ?? names.plain(plain),
    site: sites[0]?.name ?? '',
  };
}

function siteKind(graph: Graph, sites: readonly Site[]): CellKind {
  for (const kind of ['chamber', 'via'] as const) if (sites.some((s) => s.kind === kind)) return kind;
  if (sites.some((s) => s.kind === 'junction' && s.arms.length !== 2)) return 'junction';
  if (sites.some((s) => s.kind === 'port')) return 'port';
  const [a, b] = sites[0]!.arms.map(({ piece, end }) => {
    const p = graph.pieces[piece]!;
    const k = end === 'from' ? 0 : p.path.length - 1;
    const n = end === 'from' ? 1 : k - 1;
    const dx = p.path[n]!.x - p.path[k]!.x;
    const dy = p.path[n]!.y - p.path[k]!.y;
    return { width: p.width[end === 'from' ? 0 : 1], dx, dy };
  });
  if (!a || !b) return 'junction';
  if (Math.abs(a.width - b.width) > STEP * Math.max(a.width, b.width)) return 'step';
  const turn = Math.abs(Math.atan2(a.dx * b.dy - a.dy * b.dx, -(a.dx * b.dx + a.dy * b.dy)));
  return turn > BEND_TURN ? 'bend' : 'junction';
}

/** Why a cell is not solved; `reason` may go on after a semicolon with what to do. */
export function leftIdeal(draft: Draft, reason: string): Finding {
  const [why, remedy] = reason.split('; ');
  const { name } = draft;
  return {
    kind: 'cell-ideal',
    severity: 'warn',
    where: name,
    says: `The flow in ${name} was not solved in three dimensions, because ${why}; it counts as an ideal junction.`,
    do: remedy
      ? `${remedy[0]!.toUpperCase()}${remedy.slice(1)}.`
      : 'Leave more room between the channels there.',
    at: [draft.origin[0] * 1e-9, draft.origin[1] * 1e-9],
  };
}
