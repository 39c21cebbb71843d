import type { Chip } from '../chip/chip.ts';
import type { Graph } from '../chip/graph.ts';
import type { Finding } from '../problem/finding.ts';
import type { Drawn, Evidence } from './evidence.ts';
import { byGravity, Gathered } from './gather.ts';
import { checkHoles } from './holes.ts';
import { checkKeepOuts } from './keep-outs.ts';
import { checkLayers } from './layers.ts';
import { checkNecks } from './necks.ts';
import { checkOutline } from './outline.ts';
import { rulesOf } from './process.ts';
import { checkSettling } from './settling.ts';
import { checkShapes } from './shapes.ts';
import { checkTrust } from './trust.ts';
import { checkWalls } from './walls.ts';
import { checkWidths } from './widths.ts';

/**
 * Whether the chip can be made and how far its numbers hold: every finding of `FINDING_KINDS` that these
 * checks raise, the gravest first. Where no process is given, only what every process must obey is checked.
 */
export function checkFindings(evidence: Evidence): Finding[] {
  const { chip, graph } = evidence;
  const rules = chip.process ? rulesOf(chip.process) : null;
  const found = new Gathered();
  if (!isClean(chip, graph)) {
    checkDrawn({ chip, graph, rules }, found);
    if (found.list().length === 0) keepClean(chip, graph);
  }
  checkTrust(evidence, rules, found);
  checkSettling(evidence, rules, found);
  return byGravity(found.list());
}

function checkDrawn(drawn: Drawn, found: Gathered): void {
  checkOutline(drawn, found);
  checkKeepOuts(drawn, found);
  checkWidths(drawn, found);
  checkNecks(drawn, found);
  checkWalls(drawn, found);
  checkLayers(drawn, found);
  checkHoles(drawn, found);
  checkShapes(drawn, found);
}

/**
 * Drawings in which nothing was found, by the graph that was read from them, with what else they were checked by:
 * an edit of a drive leaves the graph as it is.
 */
const clean = new WeakMap<Graph, readonly unknown[]>();
const alsoBy = ({ process, keepOuts, ports }: Chip): readonly unknown[] => [
  process,
  keepOuts,
  ...ports.map(({ tubing }) => tubing.map(({ bore, length }) => `${bore} ${length}`).join()),
];

const keepClean = (chip: Chip, graph: Graph): void => {
  clean.set(graph, alsoBy(chip));
};

function isClean(chip: Chip, graph: Graph): boolean {
  const by = clean.get(graph);
  if (!by) return false;
  const now = alsoBy(chip);
  return now.length === by.length && now.every((value, i) => value === by[i]);
}
