import { asBuilt } from '../../solver/asbuilt/as-built.ts';
import { emptyMemory } from '../../solver/memory.ts';
import { Problem } from '../../solver/problem/problem.ts';
import type { BuiltNews, BuiltOrder } from './messages.ts';

interface Scope {
  postMessage(news: BuiltNews): void;
  addEventListener(kind: 'message', listener: (event: MessageEvent<BuiltOrder>) => void): void;
}
const scope = globalThis as unknown as Scope;

/** Junctions of the made chip are solved once, however often its drives are asked about. */
const memory = emptyMemory();

scope.addEventListener('message', ({ data: { id, chip, measured, set, drawn } }) => {
  try {
    scope.postMessage({ id, built: asBuilt(chip, measured, { set }, memory, drawn) });
  } catch (error) {
    const { what, where, remedy } =
      error instanceof Problem
        ? error
        : {
            what: 'The solver stopped at something it was not made for.',
            where: '',
            remedy: 'Check the measurements; the chip itself is kept.',
          };
    scope.postMessage({ id, problem: { what, where, remedy } });
  }
});
