import { solveNetwork } from '../../../solver/network/solve-network.ts';
import { gridNetwork } from './grid-network.ts';

// A grid of a million channels in a process of its own, so that its memory can be read: prints ms and MB.
const spec = gridNetwork(708);
const start = performance.now();
const { conservationResidual } = solveNetwork(spec);
const ms = performance.now() - start;
if (!(conservationResidual < 1e-10))
  throw new Error(`The network is out of balance by ${conservationResidual}.`);
process.stdout.write(`${ms} ${process.resourceUsage().maxRSS / 1024}\n`);
