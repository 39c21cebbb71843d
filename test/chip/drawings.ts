import type { Chamber, Channel, Chip, Layer, Port, Via } from '../../solver/chip/chip.ts';
import type { Graph } from '../../solver/chip/graph.ts';

/** Hand-made drawings in micrometres, for tests of what is read from them. */

const nm = (um: number) => Math.round(um * 1000);

export function layer(id: string, depth = 50, fillet = 0): Layer {
  return { id, depth: nm(depth), profile: { kind: 'rectangle' }, fillet: nm(fillet) };
}

export function channel(
  id: string,
  path: readonly (readonly [number, number])[],
  width: number | readonly [number, number] = 100,
  more: { layer?: string; bendRadius?: number } = {},
): Channel {
  const [w0, w1] = typeof width === 'number' ? [width, width] : width;
  return {
    id,
    layer: more.layer ?? 'flow',
    path: path.map(([x, y]) => [nm(x), nm(y)] as const),
    width: [nm(w0), nm(w1)],
    bendRadius: nm(more.bendRadius ?? 0),
  };
}

export function chamber(id: string, outline: readonly (readonly [number, number])[], on = 'flow'): Chamber {
  return { id, layer: on, outline: outline.map(([x, y]) => [nm(x), nm(y)] as const) };
}

export function port(id: string, at: readonly [number, number], diameter = 0, on = 'flow'): Port {
  return {
    id,
    at: [nm(at[0]), nm(at[1])],
    layer: on,
    diameter: nm(diameter),
    drive: { kind: 'pressure', pressure: 0 },
    tubing: [],
  };
}

export function via(
  id: string,
  at: readonly [number, number],
  diameter: number,
  layers: readonly [string, string] = ['flow', 'upper'],
): Via {
  return { id, at: [nm(at[0]), nm(at[1])], layers, diameter: nm(diameter) };
}

export function chipOf(parts: Partial<Chip>): Chip {
  return {
    name: 'drawing',
    note: '',
    lengthUnit: 'um',
    outline: { width: nm(76000), height: nm(26000) },
    layers: [layer('flow'), layer('upper')],
    channels: [],
    chambers: [],
    vias: [],
    ports: [],
    fluid: { viscosity: 1e-3, density: 1000 },
    targets: [],
    limits: [],
    ...parts,
  };
}

/** One line per piece: name, sites at its ends, length in micrometres. */
export function describeGraph(graph: Graph): string[] {
  return graph.pieces.map(
    (p) =>
      `${p.channel}#${p.number} ${graph.sites[p.from]!.name} ${graph.sites[p.to]!.name} ${Number((p.length / 1000).toFixed(4))}`,
  );
}

export function findingKinds(graph: Graph): string[] {
  return graph.findings.map((f) => `${f.kind} ${f.where}`);
}
