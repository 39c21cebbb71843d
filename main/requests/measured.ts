import type { Handlers } from './handlers.ts';

/** What was measured on a made chip: the page sends the text, and reads the cells against its own chip. */
export const measuredRequests: Handlers<'measurements.read'> = {
  'measurements.read': async (_session, { text }) => {
    const { readTable } = await import('../measurements/read-table.ts');
    const { rows, lines } = readTable(text);
    return { rows: rows.map((row) => [...row]), lines: [...lines] };
  },
};
