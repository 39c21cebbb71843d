import { once } from 'node:events';
import { chipHash } from '../../db/chip/parts.ts';
import { Workplace } from '../../db/workplace.ts';
import { random, randomEdit, whole } from './random.ts';

/**
 * Works on a project at random and says of every step, once it is acknowledged, what it was and what
 * the chip is then. Begins at a word
 * on its input; never ends by itself: it is killed.
 */
const [path, userData, seed] = process.argv.slice(2) as [string, string, string];
const next = random(Number(seed));
const say = (line: string): void => {
  process.stdout.write(`${line}\n`);
};

await once(process.stdin, 'data');
const workplace = await Workplace.open(
  { userData, program: 'test', onChange: () => undefined, onTrouble: () => undefined },
  path,
);
const { project } = workplace;
say(`open ${project.position.seq}`);

for (;;) {
  const dice = next();
  const { undo, redo } = project.position;
  let did: string | null = null;
  if (dice < 0.12 && undo !== null) {
    project.undo();
    did = 'undo';
  } else if (dice < 0.2 && redo !== null) {
    project.redo();
    did = 'redo';
  } else if (dice < 0.9) {
    project.edit(randomEdit(project.chip, next), project.position.seq);
    did = 'edit';
  } else if (dice < 0.94) project.settle();
  else if (dice < 0.97) {
    const { id } = project.freezeTrial(`t${whole(next, 1e6)}`, project.position.seq, null);
    say(`trial ${id}`);
  } else project.putCells([{ key: `k${whole(next, 50)}`, bytes: new Uint8Array(whole(next, 20_000)) }]);
  if (did) say(`${did} ${project.position.seq} ${Buffer.from(chipHash(project.chip)).toString('hex')}`);
  // Lets what was said go out, and what waits be done.
  if (next() < 0.3) await new Promise((done) => setImmediate(done));
}
