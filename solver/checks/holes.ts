import Flatbush from 'flatbush';
import type { Port } from '../chip/chip.ts';
import type { Drawn } from './evidence.ts';
import type { Gathered } from './gather.ts';
import { larger } from './outline.ts';
import { length, METRE, placeOf } from './words.ts';

/** nm: the grid and the margin of the interface guideline named in `kinds.ts`. */
const PITCH = 1.5e6;
const MARGIN = 3e6;
const GRID_TOLERANCE = 0.1e6;
/** Greatest diameter by pitch, nm; the least is the same for all. */
const LEAST_HOLE = 0.4e6;
const HOLES = [
  [4.5e6, 3.5e6],
  [3e6, 2e6],
  [1.5e6, 0.7e6],
] as const;

/** Holes of ports and vias against channels, each other, the sides and the guideline for interfaces. */
export function checkHoles(drawn: Drawn, found: Gathered): void {
  narrowHoles(drawn, found);
  const { chip, rules } = drawn;
  if (!rules) return;
  const { alignment } = rules;
  for (const via of chip.vias) {
    if (!alignment || via.diameter >= 2 * alignment.number) continue;
    const diameter = Math.ceil(2 * alignment.number);
    found.add({
      kind: 'via-land',
      severity: 'warn',
      where: `via:${via.id}`,
      says: `Via ${via.id} is ${length(via.diameter)} wide, but its layers may lie ${length(alignment.number)} off each other (${alignment.source}): it may miss one.`,
      do: `Widen it to ${length(diameter)}.`,
      at: placeOf(...via.at),
      value: via.diameter / METRE,
      threshold: diameter / METRE,
      remedy: {
        label: `widen via ${via.id} to ${length(diameter)}`,
        changes: [{ kind: 'put', list: 'vias', id: via.id, part: { ...via, diameter } }],
      },
      off: diameter / via.diameter,
    });
  }
  interfaces(drawn, found);
}

/** A hole narrower than a channel that ends at it throttles the flow and is missed by the punch. */
function narrowHoles({ chip, graph }: Drawn, found: Gathered): void {
  const ports = new Map(chip.ports.map((port) => [port.id, port]));
  const vias = new Map(chip.vias.map((via) => [via.id, via]));
  for (const site of graph.sites) {
    if (site.chambers.length > 0) continue;
    for (const [list, id] of [
      ...site.ports.map((id) => ['ports', id] as const),
      ...site.vias.map((id) => ['vias', id] as const),
    ]) {
      const part = list === 'ports' ? ports.get(id)! : vias.get(id)!;
      if (part.diameter === 0) continue;
      let widest = 0;
      for (const { piece, end } of site.arms) {
        widest = Math.max(widest, graph.pieces[piece]!.width[end === 'from' ? 0 : 1]);
      }
      widest = Math.ceil(widest);
      if (part.diameter >= widest) continue;
      const noun = list === 'ports' ? 'port' : 'via';
      found.add({
        kind: 'hole-narrow',
        severity: 'warn',
        where: `${noun}:${id}`,
        says: `The hole of ${noun} ${id} is ${length(part.diameter)} wide, narrower than the ${length(widest)} of the channel at it.`,
        do: `Widen the hole to ${length(widest)}.`,
        at: placeOf(...part.at),
        value: part.diameter / METRE,
        threshold: widest / METRE,
        remedy: {
          label: `widen the hole of ${id} to ${length(widest)}`,
          changes: [{ kind: 'put', list, id, part: { ...part, diameter: widest } }],
        },
        off: widest / part.diameter,
      });
    }
  }
}

/** Ports that are meant to be plugged into: distance from the sides, from each other, size and grid. */
function interfaces({ chip }: Drawn, found: Gathered): void {
  const ports = chip.ports.filter(({ diameter }) => diameter > 0);
  if (ports.length === 0) return;
  const index = new Flatbush(ports.length);
  for (const { at } of ports) index.add(at[0], at[1], at[0], at[1]);
  index.finish();
  let off = 0;
  let first: Port | undefined;
  for (const [i, port] of ports.entries()) {
    const [x, y] = port.at;
    const side = Math.min(x, y, chip.outline.width - x, chip.outline.height - y);
    const base = { where: `port:${port.id}`, at: placeOf(x, y) };
    if (side < MARGIN && side >= 0) {
      found.add({
        kind: 'port-edge',
        severity: 'warn',
        ...base,
        says: `Port ${port.id} lies ${length(side)} from the side; connectors want 3 mm (interface design guideline of 2017).`,
        do: `Move it ${length(MARGIN - side)} inward.`,
        value: side / METRE,
        threshold: MARGIN / METRE,
        ...larger(chip, [x, y, chip.outline.width - x, chip.outline.height - y], MARGIN),
        off: MARGIN / Math.max(1, side),
      });
    }
    const [near] = index.neighbors(x, y, 1, Infinity, (j) => j !== i);
    const pitch = near === undefined ? Infinity : Math.hypot(ports[near]!.at[0] - x, ports[near]!.at[1] - y);
    if (pitch < PITCH) {
      found.add({
        kind: 'port-pitch',
        severity: 'warn',
        ...base,
        says: `Port ${port.id} lies ${length(pitch)} from ${ports[near!]!.id}; connectors want 1.5 mm (interface design guideline of 2017).`,
        do: `Move them ${length(PITCH - pitch)} further apart.`,
        value: pitch / METRE,
        threshold: PITCH / METRE,
        off: PITCH / Math.max(1, pitch),
      });
    } else hole(port, pitch, found);
    if (offGrid(x) > GRID_TOLERANCE || offGrid(y) > GRID_TOLERANCE) {
      off += 1;
      first ??= port;
    }
  }
  if (!first) return;
  const worst = Math.max(offGrid(first.at[0]), offGrid(first.at[1]));
  found.add({
    kind: 'port-grid',
    severity: 'note',
    where: '',
    says: `${off === 1 ? `Port ${first.id} is` : `${off} ports, ${first.id} among them, are`} off the grid of 1.5 mm that connectors have, counted from 3 mm off the corner (interface design guideline of 2017).`,
    do: 'Move them onto the grid if the chip must fit a connector that others make.',
    at: placeOf(...first.at),
    value: worst / METRE,
    threshold: GRID_TOLERANCE / METRE,
    off: off,
  });
}

const offGrid = (value: number): number => Math.abs(value - PITCH * Math.round(value / PITCH));

function hole(port: Port, pitch: number, found: Gathered): void {
  const [, most] = HOLES.find(([least]) => pitch >= least)!;
  const { id, diameter } = port;
  if (diameter >= LEAST_HOLE && diameter <= most) return;
  const wanted = diameter > most ? most : LEAST_HOLE;
  found.add({
    kind: 'port-hole',
    severity: 'note',
    where: `port:${id}`,
    says: `The hole of port ${id} is ${length(diameter)} wide; ${length(LEAST_HOLE)} to ${length(most)} are usual where ${pitch === Infinity ? 'it stands alone' : `ports lie ${length(pitch)} apart`} (interface design guideline of 2017).`,
    do: `Make it ${length(wanted)}.`,
    at: placeOf(...port.at),
    value: diameter / METRE,
    threshold: wanted / METRE,
    remedy: {
      label: `make the hole of ${id} ${length(wanted)}`,
      changes: [{ kind: 'put', list: 'ports', id, part: { ...port, diameter: wanted } }],
    },
    off: diameter > most ? diameter / most : LEAST_HOLE / diameter,
  });
}
