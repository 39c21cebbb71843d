import { readTable } from '../measurements/read-table.ts';
import type { Handlers } from './handlers.ts';

/** What was measured on a made chip: the page sends the text, and reads the cells against its own chip. */
export const measuredRequests: Handlers<'measurements.read'> = {
  'measurements.read': (_session, { text }) => {
    const { rows, lines } = readTable(text);
    return { rows: rows.map((row) => [...row]), lines: [...lines] };
  },
};
