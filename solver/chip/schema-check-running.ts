import type { Assay, Pump, Rating, Reservoir } from './running.ts';
import { Fault } from './schema-fault.ts';
import { positive } from './schema-range.ts';

/** What must hold of pumps, reservoirs, ratings and the assay. */

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
