/** What the program reports and no check of the table covers, kept by hand: an honest list, not an excuse. */
export interface NotChecked {
  readonly what: string;
  readonly why: string;
}

export const NOT_CHECKED: readonly NotChecked[] = [
  {
    what: 'Agreement with a made and measured chip',
    why: 'No measurement of a real device is part of the checks; made depths and widths alone differ from the drawing by up to a quarter.',
  },
  {
    what: 'Viscosity and density of saline, culture medium, plasma and whole blood',
    why: 'Nominal reference values; the published ones spread as widely as the uncertainty stated with each.',
  },
  {
    what: 'Constants of the shear-thinning models for blood',
    why: 'Quoted from memory of their sources; the models themselves are checked, the numbers for one donor cannot be.',
  },
  {
    what: "Accuracy of Cheng's glycerol viscosity against measurement",
    why: 'The formula is evaluated to all its digits; its own fit is good to a few per cent.',
  },
  {
    what: 'Fitted constant of the bulging thick roof',
    why: "It depends on the device; the formula is checked, the constant is the user's.",
  },
  {
    what: 'Shear-thinning flow inside junctions, bends and chambers',
    why: 'Cells are solved for a Newtonian fluid.',
  },
  {
    what: 'Whole blood in channels below about 0.3 mm',
    why: 'Blood is no continuum of one viscosity there; no model of the cell-free layer is part of the program.',
  },
  {
    what: 'Laws of cell damage and reference limits of wall shear',
    why: 'They are evaluated as published and shown with their source; published laws differ a hundredfold on the same exposure, and no limit holds for cells that were not tried.',
  },
  {
    what: 'Constants of the entrance length',
    why: 'From memory of their source; they raise a finding, no flow depends on them.',
  },
  {
    what: 'Default design rules and fabrication tolerances',
    why: 'Common practice without one source; the rules of the maker of the chip replace them.',
  },
  {
    what: 'Bulging roofs between thin plates and thick ones, and under suction near the floor',
    why: 'The two laws are checked each in its own range; what lies between has no published formula here.',
  },
];
