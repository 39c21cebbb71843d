/** Every kind of finding: what it answers, how its number is made, what it is held against, and whose rule that is. */
export interface KindOfFinding {
  /** The question that it bears on: does it split right, do cells survive, can the pump drive it, can it be made, can it be trusted. */
  readonly of: 'split' | 'cells' | 'pump' | 'made' | 'trust';
  readonly title: string;
  readonly formula: string;
  readonly threshold: string;
  readonly source: string;
}

const COMMON = 'common practice, no source';
const RULE = 'the number of the process, with its own source';
const INTERFACE =
  'interface design guideline, van Heeren et al. 2017, doi 10.13140/RG.2.1.1698.5206, as summarised; no conformity to a standard is claimed';

export const FINDING_KINDS = {
  'least-width': {
    of: 'made',
    title: 'Channel too narrow to make',
    formula: 'mask width at the narrower end',
    threshold: 'least width of the process',
    source: RULE,
  },
  'least-gap': {
    of: 'made',
    title: 'Wall too thin to make',
    formula: 'thickness of the wall as drawn, less what an etch takes from both sides',
    threshold: 'least wall of the process',
    source: RULE,
  },
  'chamber-neck': {
    of: 'made',
    title: 'Chamber too narrow to make',
    formula: 'least distance inside a chamber between sides that face each other to within 60°',
    threshold: 'least width of the process',
    source: RULE,
  },
  'layer-wall': {
    of: 'made',
    title: 'Wall between layers too thin',
    formula: 'thickness of a layer’s roof where a channel of the next layer passes over its own',
    threshold: 'least wall of the process',
    source: RULE,
  },
  'near-miss': {
    of: 'made',
    title: 'Wall thinner than any process makes',
    formula: 'thickness of the wall as drawn',
    threshold: '1 µm, the finest of chrome-on-glass masks',
    source: COMMON,
  },
  'etch-merge': {
    of: 'made',
    title: 'Neighbours merge when etched',
    formula: 'thickness of the wall as drawn less 2 × undercut × depth',
    threshold: 'above 0',
    source: 'geometry of an isotropic etch',
  },
  'wall-leans': {
    of: 'made',
    title: 'Wall too slender',
    formula: 'depth of the layer over thickness of the wall',
    threshold: 'greatest height over thickness of the process',
    source: RULE,
  },
  'roof-sags': {
    of: 'made',
    title: 'Roof may sag',
    formula: 'width over depth; of a chamber, diameter of the largest circle inside over depth',
    threshold: 'greatest width over depth of the process; twice that is a stop',
    source: RULE,
  },
  'too-deep': {
    of: 'made',
    title: 'Channel too deep for its width',
    formula: 'depth over mask width at the narrower end',
    threshold: 'greatest depth over width of the process',
    source: RULE,
  },
  'tool-corner': {
    of: 'made',
    title: 'Corner sharper than the tool',
    formula: 'radius of the corner as drawn',
    threshold: 'radius of the tool',
    source: RULE,
  },
  'process-profile': {
    of: 'made',
    title: 'Cross-section that the process does not make',
    formula: 'profile of the layer',
    threshold: 'profiles of the process; KOH leaves walls at arctan √2 = 54.74°, within 1°',
    source: 'crystallography of silicon (100) for KOH, else common practice',
  },
  'off-axis': {
    of: 'made',
    title: 'Channel off the crystal axes',
    formula: 'angle between centreline and the nearer edge of the chip',
    threshold: '0.5°',
    source: 'KOH etches to the {111} planes whatever the mask; tolerance: common practice, no source',
  },
  outside: {
    of: 'made',
    title: 'Outside of the chip',
    formula: 'how far the drawing reaches over the outline, with its width',
    threshold: '0',
    source: 'geometry',
  },
  'keep-out': {
    of: 'made',
    title: 'In or near a keep-out',
    formula:
      'least distance of the drawing, with its width and what an etch adds, from the outline of the keep-out; 0 inside',
    threshold: 'clearance of the keep-out; inside it none is allowed',
    source: 'the user’s own outline and number',
  },
  edge: {
    of: 'made',
    title: 'Too near the edge of the chip',
    formula: 'least distance of the drawing, with its width, from the outline',
    threshold: 'edge of the process',
    source: RULE,
  },
  'via-land': {
    of: 'made',
    title: 'Via smaller than layers may be off',
    formula: 'diameter of the via',
    threshold: 'twice the alignment of the process',
    source: RULE,
  },
  'hole-narrow': {
    of: 'made',
    title: 'Hole narrower than its channel',
    formula: 'diameter of the hole',
    threshold: 'widest channel that ends at it',
    source: COMMON,
  },
  'port-edge': {
    of: 'made',
    title: 'Port near the edge',
    formula: 'distance of the port’s centre from the nearest side',
    threshold: '3 mm',
    source: INTERFACE,
  },
  'port-pitch': {
    of: 'made',
    title: 'Ports too close',
    formula: 'distance to the nearest other port, centre to centre',
    threshold: '1.5 mm',
    source: INTERFACE,
  },
  'port-hole': {
    of: 'made',
    title: 'Hole unusual at its pitch',
    formula: 'diameter of the port’s hole',
    threshold: '0.4 to 0.7 mm at 1.5 mm pitch, to 2.0 mm at 3.0 mm, to 3.5 mm at 4.5 mm',
    source: INTERFACE,
  },
  'port-grid': {
    of: 'made',
    title: 'Ports off the grid',
    formula: 'distance of port centres from multiples of 1.5 mm, counted from 3 mm off the corner',
    threshold: '0.1 mm',
    source: `${INTERFACE}; tolerance: ${COMMON}`,
  },
  'dead-end': {
    of: 'made',
    title: 'Dead end',
    formula: 'length of a channel that ends without a port',
    threshold: 'its width',
    source: COMMON,
  },
  'tubing-volume': {
    of: 'made',
    title: 'Most of the fluid is in the tubing',
    formula: 'volume of the tubing over that of the chip',
    threshold: '10',
    source: COMMON,
  },
  turbulent: {
    of: 'trust',
    title: 'Not laminar',
    formula: 'Re = density × mean velocity × hydraulic diameter / viscosity',
    threshold: '2000',
    source: 'pipe flow becomes unsteady from about 2000 (textbook value, from memory)',
  },
  'entrance-length': {
    of: 'trust',
    title: 'Flow not developed over the channel',
    formula:
      'Le = D [0.619^1.6 + (0.0567 Re)^1.6]^(1/1.6) over the length, D the hydraulic diameter, where Re > 1; likely error 1.31 × ½ density × velocity² over the pressure drop',
    threshold: '0.1; a half is a warning',
    source:
      'Durst, Ray, Ünsal and Bayoumi 2005, J. Fluids Eng. 127, 1154 (from memory); excess pressure: Shah and London 1978 (from memory); a tenth and a half: common practice, no source',
  },
  'aspect-ratio': {
    of: 'trust',
    title: 'Very flat channel',
    formula: 'larger of width and depth over the smaller',
    threshold: '20',
    source:
      'resistance goes with the cube of the smaller: its error counts three times; limit common practice, no source',
  },
  'cell-accuracy': {
    of: 'trust',
    title: 'Junction less exact than asked',
    formula: 'bound of the relative error of the junction’s port matrix',
    threshold: '1.5 × the accuracy asked',
    source: 'what the solver knows of its own error',
  },
  'upright-walls': {
    of: 'trust',
    title: 'Junction solved with upright walls',
    formula:
      '0.003 + 0.03 × how far a side wall leans over the narrowest width, and what is left between arms of different widths; twice that for profiles that were not measured; of the peak 0.03 + lean / width, at most 0.18, and what its faces differ by',
    threshold: '0.01',
    source:
      'solves in tetrahedra of bends and tees with leaning and etched walls; threshold common practice, no source',
  },
  'mixed-depths': {
    of: 'trust',
    title: 'Channels of different depths meet',
    formula:
      'largest of (h/h′)³ − 1 and (h′/h)³ − 1, h the depth that the junction is solved at, h′ that of a channel in it',
    threshold: '0.01',
    source:
      'resistance of a shallow channel goes with the cube of its depth; threshold common practice, no source',
  },
  temperature: {
    of: 'trust',
    title: 'Temperature out of the usual',
    formula: 'temperature of the fluid',
    threshold: '4 to 50 °C',
    source: 'survey of operating windows quoted in a trade article on test protocols',
  },
  settling: {
    of: 'trust',
    title: 'Soft walls settle slowly',
    formula:
      '3 C p/Q over the assay: C the volume that soft roofs give per pressure, p the largest pressure, Q the flow through',
    threshold: '0.1; a half is a warning',
    source:
      'rise of roofs: Gervais et al. 2006, Lab Chip 6, 500; Christov et al. 2018, J. Fluid Mech. 841, 267 (from memory); threshold common practice, no source',
  },
  'blood-narrow': {
    of: 'trust',
    title: 'Blood in a narrow channel',
    formula: 'smaller of width and depth',
    threshold: '0.3 mm',
    source: 'Fåhræus and Lindqvist 1931, Am. J. Physiol. 96, 562 (from memory)',
  },
  'soft-roof': {
    of: 'trust',
    title: 'Soft roof not reckoned with',
    formula: 'W p / (E h), W width, p pressure, E modulus, h depth; likely error [(1 + x)^4 − 1]/(4 x) − 1',
    threshold: '0.05',
    source:
      'Gervais et al. 2006, Lab Chip 6, 500 (from memory, factor of order 1 taken as 1); threshold common practice, no source',
  },
  inertia: {
    of: 'trust',
    title: 'Inertia in a junction',
    formula: 'share by which inertia shifts the flow, reciprocal theorem to first order in Re',
    threshold: 'the junction’s accuracy; 5 % is a warning',
    source: 'Happel and Brenner 1965, Low Reynolds Number Hydrodynamics',
  },
  'ideal-junctions': {
    of: 'trust',
    title: 'Junctions taken as ideal',
    formula: 'junctions not solved',
    threshold: '0',
    source: 'one pressure at the crossing of centrelines is an approximation',
  },
  'sharp-corner': {
    of: 'trust',
    title: 'Corner without a radius',
    formula: 'fillet radius of the layer at re-entrant corners of junctions',
    threshold: 'above 0',
    source: 'wall shear grows without bound at a sharp re-entrant corner: Moffatt 1964, J. Fluid Mech. 18, 1',
  },
  'thinning-junction': {
    of: 'trust',
    title: 'Thinning fluid in a solved junction',
    formula: 'whether the fluid thins with shear',
    threshold: 'it does not',
    source: 'junctions are solved with one viscosity each',
  },
  'cell-ideal': {
    of: 'trust',
    title: 'Junction that could not be solved',
    formula: 'junctions left ideal, and why',
    threshold: '0',
    source: 'one pressure at the crossing of centrelines is an approximation',
  },
  unconnected: {
    of: 'split',
    title: 'Nothing drives it',
    formula: 'driven ports of the cavity',
    threshold: '1',
    source: 'geometry',
  },
  'at-rest': {
    of: 'split',
    title: 'Nothing moves it',
    formula: 'greatest less least pressure that drives the cavity',
    threshold: 'above 0',
    source: 'one pressure everywhere drives nothing',
  },
  'no-flow': {
    of: 'split',
    title: 'Held still by its yield stress',
    formula: 'wall shear that the drives can make, against the yield stress of the fluid',
    threshold: 'the yield stress',
    source: 'Casson 1959 (from memory)',
  },
  'streams-meet': {
    of: 'cells',
    title: 'Streams meet and part again',
    formula: 'outlets fed by the same two inlets or more',
    threshold: '1',
    source: 'routes are reckoned as if streams mixed fully where they meet',
  },
  'routes-summed': {
    of: 'cells',
    title: 'More routes than are listed',
    formula: 'routes from inlets to outlets',
    threshold: '5000',
    source: 'those that carry most are listed',
  },
  'cell-too-large': {
    of: 'cells',
    title: 'Cell larger than the channel',
    formula: 'diameter of the cell',
    threshold: 'what is open for it',
    source: 'geometry',
  },
  'limit-not-judged': {
    of: 'cells',
    title: 'Limit left open',
    formula: 'whether what the limit holds for is known',
    threshold: 'it is',
    source: 'a limit is never met for want of knowledge',
  },
  'close-call': {
    of: 'trust',
    title: 'Met by less than the error',
    formula:
      'what is left between the number and its limit, over the number; of a target, what is left of its tolerance over the number',
    threshold: 'the band of the number',
    source: 'what the solver knows of its own errors',
  },
  'law-mixed': {
    of: 'cells',
    title: 'Constants of two laws',
    formula: 'constant and exponents against those of the published laws',
    threshold: 'all three of one law',
    source:
      'Giersiepen et al. 1990, Int. J. Artif. Organs 13, 300; Heuser and Opitz 1980, Biorheology 17, 17',
  },
  'law-range': {
    of: 'cells',
    title: 'Law beyond its data',
    formula: 'largest stress and total time on the route',
    threshold: 'the largest stress and time of the law’s own data',
    source: 'the law’s own source',
  },
  'loop-passes': {
    of: 'cells',
    title: 'More passes than counted',
    formula: 'assay over the time of one round of the loop, its tubing included',
    threshold: 'passes of the limit',
    source: 'residence time of the loop itself',
  },
  'pump-pressure': {
    of: 'pump',
    title: 'Pump too weak',
    formula: 'pressure at the pump, tubing included',
    threshold: 'what it can do',
    source: 'the user’s number',
  },
  'pump-flow': {
    of: 'pump',
    title: 'Pump too small',
    formula: 'flow at the port',
    threshold: 'what the pump can do',
    source: 'the user’s number',
  },
  'runs-out': {
    of: 'pump',
    title: 'Runs out before the assay ends',
    formula: 'volume over flow',
    threshold: 'length of the assay',
    source: 'the user’s numbers',
  },
  'runs-dry': {
    of: 'pump',
    title: 'Reservoir runs dry',
    formula: 'what is drawn over the assay as its level falls',
    threshold: 'what is in it',
    source: 'the user’s numbers',
  },
  burst: {
    of: 'pump',
    title: 'Beyond the rated pressure',
    formula: 'largest pressure in chip, ports and pumps',
    threshold: 'rating of chip and fittings',
    source: 'the user’s number',
  },
  'end-extended': {
    of: 'split',
    title: 'End taken on to a centreline',
    formula: 'distance of a channel’s end from the centreline that it lies beside',
    threshold: '0',
    source: 'what overlaps is one cavity',
  },
  'overlap-alongside': {
    of: 'split',
    title: 'Overlap side by side',
    formula: 'length over which two channels overlap without crossing',
    threshold: '0',
    source: 'what overlaps is one cavity',
  },
  'bend-reduced': {
    of: 'split',
    title: 'Bend tighter than asked',
    formula: 'bend radius as asked',
    threshold: 'what fits between neighbouring vertices',
    source: 'geometry',
  },
  'same-line': {
    of: 'split',
    title: 'Drawn twice',
    formula: 'length of channels on one line',
    threshold: '0',
    source: 'what overlaps is one cavity',
  },
  'unresolved-flow': {
    of: 'trust',
    title: 'Flow too small to be resolved',
    formula: 'flow over what flows through the chip',
    threshold: '1e-9',
    source: 'rounding of double precision',
  },
} as const satisfies Readonly<Record<string, KindOfFinding>>;

export type FindingKind = keyof typeof FINDING_KINDS;

export function kindOfFinding(kind: string): KindOfFinding | undefined {
  return Object.hasOwn(FINDING_KINDS, kind) ? FINDING_KINDS[kind as FindingKind] : undefined;
}
