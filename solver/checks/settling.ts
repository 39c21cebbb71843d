import { roofLaw, type SoftRoof } from '../section/roof/roof.ts';
import type { Evidence } from './evidence.ts';
import type { Gathered } from './gather.ts';
import type { ProcessRules } from './process.ts';
import { digits, METRE, percent } from './words.ts';

/** Share of the assay that settling may take. */
const SETTLING = 0.1;
/** Of time constants: after three of them 95 % of a change is there. */
const SETTLED = 3;
/** A lid whose thickness is not said counts as thick, m. */
const THICK = 5e-3;

/**
 * How long soft walls take to fill: the volume that they give per pressure, times the pressure per flow. The
 * largest pressure over all the flow stands for the resistance between any wall and the outlet, which is
 * more than each has; tubing and bubbles are not in it.
 */
export function checkSettling(evidence: Evidence, rules: ProcessRules | null, found: Gathered): void {
  const { chip, ports } = evidence;
  const assay = chip.assay?.time;
  if (assay === undefined) return;
  let flow = 0;
  let pressure = 0;
  for (const port of ports) {
    flow += Math.max(0, port.flow ?? 0);
    pressure = Math.max(pressure, port.pressure);
  }
  const compliance = complianceOf(evidence, rules);
  if (!(flow > 0) || !(compliance > 0)) return;
  const time = (SETTLED * compliance * pressure) / flow;
  const share = time / assay;
  if (share <= SETTLING) return;
  found.add({
    kind: 'settling',
    severity: share > 5 * SETTLING ? 'warn' : 'note',
    where: '',
    says: `Soft walls take up to ${digits(time)} s to settle after a change, ${percent(share)} of the assay's ${digits(assay, 3)} s; until then flows are not those given here.`,
    do: `Let it run ${digits(time)} s before the assay begins, or choose a stiffer lid or narrower channels.`,
    value: share,
    threshold: SETTLING,
    off: share / SETTLING,
  });
}

/** Volume that the roofs of all channels give per pressure, m³/Pa. */
function complianceOf({ chip, graph, stretches }: Evidence, rules: ProcessRules | null): number {
  let sum = 0;
  for (const { piece, width, result } of stretches) {
    const layer = chip.layers[graph.pieces[piece]!.layerIndex]!;
    const roof: SoftRoof | null =
      layer.roof ??
      (rules?.modulus
        ? { modulus: rules.modulus.number, thickness: THICK, poisson: 0.5, constant: 1 }
        : null);
    if (!roof) continue;
    const wide = (width[0] + width[1]) / 2;
    const { law, middleRise, slope } = roofLaw(roof, wide, layer.depth / METRE, layer.id);
    const meanRise = law === 'plate' ? (8 / 15) * middleRise : slope * (layer.depth / METRE);
    sum += meanRise * wide * result.length;
  }
  return sum;
}
