import { solveNetwork } from '../../../solver/network/solve-network.ts';
import { gridNetwork } from './grid-network.ts';

// A grid of a million channels in a process of its own, so that its memory can be read: prints milliseconds of processor
// time (all threads, so at least the time on the clock of an idle machine) and MB.
const spec = gridNetwork(708);
const start = process.cpuUsage();
const { conservationResidual } = solveNetwork(spec);
const { user, system } = process.cpuUsage(start);
if (!(conservationResidual < 1e-10))
  throw new Error(`The network is out of balance by ${conservationResidual}.`);
process.stdout.write(`${(user + system) / 1000} ${process.resourceUsage().maxRSS / 1024}\n`);
