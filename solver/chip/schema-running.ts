import type { z } from 'zod';
import type { LengthUnit } from './chip.ts';
import { defined } from './description-parts.ts';
import type { Assay, Pump, Rating, Reservoir } from './running.ts';
import { si } from './schema-data.ts';
import { inMetres, keyed, quantity } from './schema-fields.ts';

/** Pumps, reservoirs, ratings and the assay: as a description has them and as data has them. */

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
