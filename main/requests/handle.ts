import { z } from 'zod';
import { Problem } from '../../solver/problem/problem.ts';
import { REQUESTS, type Refusal, type Reply, type RequestName } from '../contract/contract.ts';
import { decode, encode } from '../contract/wire.ts';
import type { Session } from '../session/session.ts';
import { HANDLERS } from './handlers.ts';

/** One request of a page, from bytes to bytes: read, checked, done, answered. Never rejects. */
export async function handle(
  session: Session,
  name: string,
  body: Uint8Array,
): Promise<Uint8Array<ArrayBuffer>> {
  return encode(await reply(session, name, body));
}

async function reply(session: Session, name: string, body: Uint8Array): Promise<Reply> {
  try {
    if (!isRequest(name) || !Object.hasOwn(HANDLERS, name))
      throw new Problem('format', `There is no request "${name}".`, '', 'Reload the page.');
    const input = REQUESTS[name].input.safeParse(decode(body));
    if (!input.success) throw new Problem('format', says(input.error), name, 'Correct it and try again.');
    const run = (HANDLERS as Readonly<Record<string, unknown>>)[name] as (
      session: Session,
      input: unknown,
    ) => unknown;
    return { ok: true, output: await run(session, input.data) };
  } catch (error) {
    return { ok: false, problem: refusal(error) };
  }
}

function isRequest(name: string): name is RequestName {
  return Object.hasOwn(REQUESTS, name);
}

function says(error: z.ZodError): string {
  const text = z.prettifyError(error).replaceAll(/\s+/g, ' ');
  return `The request cannot be read: ${text.slice(0, 300)}.`;
}

/** What a page may be told of an error: a problem whole, anything else only that it happened. */
export function refusal(error: unknown): Refusal {
  if (error instanceof Problem)
    return { kind: error.kind, what: error.what, where: error.where, remedy: error.remedy };
  if (error instanceof SyntaxError || error instanceof RangeError)
    return {
      kind: 'format',
      what: 'The request cannot be read.',
      where: '',
      remedy: 'Reload the page and try again.',
    };
  return {
    kind: 'output',
    what: 'The program could not do this; what was acknowledged is kept.',
    where: '',
    remedy: 'Try again; if it fails again, save the project under another name and report what you did.',
  };
}
