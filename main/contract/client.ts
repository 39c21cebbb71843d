import { PROBLEM_KINDS, Problem, type ProblemKind } from '../../solver/problem/problem.ts';
import type { EventData, EventName, Input, Output, Refusal, Reply, RequestName } from './contract.ts';
import { decode, encode } from './wire.ts';

/** Carries requests to a host and events back; `loopbackTransport` and the desktop's preload are the two there are. */
export interface Transport {
  call(name: string, input: unknown): Promise<Reply>;
  /** Calls `listener` for every event until the returned function is called. */
  listen(listener: (name: string, data: unknown) => void): () => void;
}

/** The page's half of the seam. */
export interface Client {
  /** Makes one request. Rejects with a `Problem` where the host refuses or cannot be reached. */
  call<N extends RequestName>(name: N, input: Input<N>): Promise<Output<N>>;
  /** Calls `listener` for each such event; returns how to stop. */
  on<N extends EventName>(name: N, listener: (data: EventData<N>) => void): () => void;
  close(): void;
}

const AWAY: Reply = {
  ok: false,
  problem: {
    kind: 'output',
    what: 'The program does not answer; what was acknowledged is kept.',
    where: '',
    remedy: 'Start the program again and open the project.',
  },
};

/** A transport's `call` over one that carries bytes; a host that cannot be reached is a refusal that says so. */
export function overBytes(
  carry: (name: string, body: Uint8Array<ArrayBuffer>) => Promise<Uint8Array>,
): Transport['call'] {
  return async (name, input) => {
    const body = encode(input);
    try {
      return decode(await carry(name, body)) as Reply;
    } catch {
      return AWAY;
    }
  };
}

function problemOf(refusal: Refusal): Problem {
  const kind = PROBLEM_KINDS.find((known) => known === refusal.kind) ?? ('output' satisfies ProblemKind);
  return new Problem(kind, refusal.what, refusal.where, refusal.remedy);
}

/** A client over a transport. Listening starts with the first `on`. */
export function createClient(transport: Transport): Client {
  const listeners = new Map<string, Set<(data: never) => void>>();
  let stop: (() => void) | null = null;
  const listen = (): void => {
    stop ??= transport.listen((name, data) => {
      for (const listener of [...(listeners.get(name) ?? [])]) listener(data as never);
    });
  };
  return {
    async call<N extends RequestName>(name: N, input: Input<N>): Promise<Output<N>> {
      const reply = await transport.call(name, input);
      if (!reply.ok) throw problemOf(reply.problem);
      return reply.output as Output<N>;
    },
    on(name, listener) {
      let those = listeners.get(name);
      if (!those) {
        those = new Set();
        listeners.set(name, those);
      }
      those.add(listener as (data: never) => void);
      listen();
      return () => {
        those.delete(listener as (data: never) => void);
      };
    },
    close() {
      stop?.();
      stop = null;
      listeners.clear();
    },
  };
}
