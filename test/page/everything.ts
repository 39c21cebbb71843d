/** A chip that has every part of the description, for tests of the page: invented, made of small numbers. */
export const EVERYTHING = {
  format: 'channelwright-chip',
  version: 1,
  name: 'everything',
  note: 'Every field there is.',
  lengthUnit: 'um',
  outline: { width: 40000, height: 20000 },
  layers: [
    {
      id: 'flow',
      depth: 50,
      profile: { kind: 'trapezoid', wallAngle: 85 },
      fillet: 20,
      tolerance: { depth: '5 %', width: '2 um' },
      roof: { modulus: '2 MPa', thickness: '4 mm', poisson: 0.5, law: 'thick', constant: 0.5 },
    },
    { id: 'upper', depth: 60, profile: { kind: 'rectangle' }, fillet: 20 },
  ],
  channels: [
    {
      id: 'feed',
      layer: 'flow',
      path: [
        [4000, 10000],
        [12000, 10000],
      ],
      width: [300, 200],
    },
    {
      id: 'lane',
      layer: 'flow',
      path: [
        [18000, 10000],
        [26000, 10000],
      ],
      width: 200,
    },
    {
      id: 'over',
      layer: 'upper',
      path: [
        [26000, 10000],
        [36000, 10000],
      ],
      width: 200,
    },
  ],
  chambers: [
    {
      id: 'well',
      layer: 'flow',
      outline: [
        [12000, 8000],
        [18000, 8000],
        [18000, 12000],
        [12000, 12000],
      ],
    },
  ],
  vias: [{ id: 'shaft', at: [26000, 10000], layers: ['flow', 'upper'], diameter: 400 }],
  ports: [
    {
      id: 'in',
      at: [4000, 10000],
      layer: 'flow',
      diameter: 750,
      drive: { head: '100 mm' },
      tubing: [{ bore: '0.5 mm', length: '300 mm' }],
      reservoir: { bore: '20 mm', volume: '5 mL' },
    },
    {
      id: 'out',
      at: [36000, 10000],
      layer: 'upper',
      diameter: 750,
      drive: { pressure: 0 },
      pump: { pressure: '100 kPa', flow: '1 mL/min', bore: '10 mm', volume: '5 mL' },
    },
  ],
  fluid: {
    density: 1050,
    shear: {
      kind: 'carreau',
      zeroShear: '56 mPa.s',
      infiniteShear: '3.45 mPa.s',
      time: '3.313 s',
      index: 0.3568,
    },
  },
  targets: [
    { channel: 'feed', flow: '5 uL/min', within: '2 %' },
    { port: 'out', share: 1, within: '2 %' },
  ],
  limits: [
    { name: 'stress', shear: '1.5 Pa', cellDiameter: '15 um' },
    { name: 'floor', floor: ['0.05 Pa', '0.5 Pa'], area: 0.9 },
    { name: 'curve', curve: [['60 s', '1.5 Pa']] },
    {
      name: 'law',
      law: { constant: 3.62e-5, stress: 2.416, time: 0.785 },
      damage: '0.1 %',
      passes: 1,
      where: ['in', 'out'],
    },
  ],
  process: { kind: 'film-mask' },
  rating: { pressure: '2 bar' },
  assay: { time: '10 min' },
};
