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
];
