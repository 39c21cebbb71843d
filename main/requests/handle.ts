import { z } from 'zod';
import { Problem } from '../../solver/problem/problem.ts';
import { REQUESTS, type Reply, type RequestName } from '../contract/contract.ts';
import { decode, encode } from '../contract/wire.ts';
import { refusal } from '../session/refusal.ts';
import type { Session } from '../session/session.ts';
import { HANDLERS } from './handlers.ts';

/** One request of a page, from bytes to bytes: read, checked, done, answered. Never rejects. */
export async function handle(
  session: Session,
  name: string,
  body: Uint8Array,
): Promise<Uint8Array<ArrayBuffer>> {
  const answer = await reply(session, name, body);
  try {
    return encode(answer);
  } catch (error) {
    return encode({ ok: false, problem: refusal(error) });
  }
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
