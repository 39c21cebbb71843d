import type { z } from 'zod';
import type { LengthUnit } from './chip.ts';
import { defined } from './description-parts.ts';
import type { Assay, Pump, Rating, Reservoir } from './running.ts';
import { si } from './schema-data.ts';
import { Fault } from './schema-fault.ts';
import { inMetres, keyed, quantity } from './schema-fields.ts';
import { positive } from './schema-range.ts';

/** Pumps, reservoirs, ratings and the assay: as a description has them, as data has them, and what must hold. */

export const pump = (unit: LengthUnit) =>
  keyed(
    {
      pressure: quantity('pressure').optional(),
      flow: quantity('flow').optional(),
      bore: inMetres(unit).optional(),
      volume: quantity('volume').optional(),
    },
    {},
  ).transform((value): Pump => defined(value));

export const pumpData: z.ZodType<Pump> = keyed(
  {
    pressure: si.exactOptional(),
    flow: si.exactOptional(),
    bore: si.exactOptional(),
    volume: si.exactOptional(),
  },
  {},
);

export const reservoir = (unit: LengthUnit) =>
  keyed(
    {
      bore: inMetres(unit).optional(),
      area: quantity('area').optional(),
      volume: quantity('volume').optional(),
    },
    {},
  ).transform((value): Reservoir => defined(value));

export const reservoirData: z.ZodType<Reservoir> = keyed(
  { bore: si.exactOptional(), area: si.exactOptional(), volume: si.exactOptional() },
  {},
);

export const rating = keyed({ pressure: quantity('pressure') }, { pressure: '"2 bar"' });
export const ratingData: z.ZodType<Rating> = keyed({ pressure: si }, { pressure: '200000' });
export const assay = keyed({ time: quantity('time') }, { time: '"24 h"' });
export const assayData: z.ZodType<Assay> = keyed({ time: si }, { time: '86400' });

export function checkPump(pump: Pump): void {
  const given = Object.keys(pump);
  if (given.length === 0) {
    throw new Fault('missing', 'states nothing.', 'Give "pressure", "flow", "bore" or "volume".');
  }
  if (pump.pressure !== undefined) positive(pump.pressure, 'pressure', 'pressure');
  if (pump.flow !== undefined) positive(pump.flow, 'flow', 'flow');
  if (pump.bore !== undefined) positive(pump.bore, 'bore', 'length');
  if (pump.volume !== undefined) positive(pump.volume, 'volume', 'volume');
}

export function checkReservoir({ bore, area, volume }: Reservoir): void {
  if ((bore === undefined) === (area === undefined)) {
    throw new Fault(
      bore === undefined ? 'missing' : 'quantity',
      bore === undefined ? 'has neither "bore" nor "area".' : 'has both "bore" and "area".',
      'Give the bore of a round vessel, or the area of its free surface.',
    );
  }
  if (bore !== undefined) positive(bore, 'bore', 'length');
  if (area !== undefined) positive(area, 'area', 'area');
  if (volume !== undefined) positive(volume, 'volume', 'volume');
}

export const checkRating = ({ pressure }: Rating): void => positive(pressure, 'pressure', 'pressure');
export const checkAssay = ({ time }: Assay): void => positive(time, 'time', 'time');
