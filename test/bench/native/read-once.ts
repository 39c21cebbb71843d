import { readDescription } from '../../../solver/chip/description.ts';
import { readGraph } from '../../../solver/chip/read-graph.ts';
import { lattice } from '../lattice.ts';

/** Time, ms, to read one description of as many channels as asked for, in a process that has read none. */
const text = lattice(Number(process.argv[2]));
const start = performance.now();
readGraph(readDescription(text));
console.log(performance.now() - start);
