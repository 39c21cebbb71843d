import type { Finding } from '../problem/finding.ts';
import type { Evidence } from './evidence.ts';
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
  const drawn = { chip, graph, rules };
  const found = new Gathered();
  checkOutline(drawn, found);
  checkKeepOuts(drawn, found);
  checkWidths(drawn, found);
  checkNecks(drawn, found);
  checkWalls(drawn, found);
  checkLayers(drawn, found);
  checkHoles(drawn, found);
  checkShapes(drawn, found);
  checkTrust(evidence, rules, found);
  checkSettling(evidence, rules, found);
  return byGravity(found.list());
}
