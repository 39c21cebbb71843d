import type { z } from 'zod';
import type { REQUESTS, RequestName } from '../contract/contract.ts';
import type { Session } from '../session/session.ts';
import { aboutRequests } from './about.ts';
import { bringInRequests } from './bring-in.ts';
import { fileRequests } from './files.ts';
import { keptRequests } from './kept.ts';
import { maskRequests } from './masks.ts';
import { measuredRequests } from './measured.ts';
import { noteRequests } from './notes.ts';
import { projectRequests } from './project.ts';
import { userRequests } from './user.ts';

/** What answers a request: its input as checked, its output as listed. */
export type Handler<N extends RequestName> = (
  session: Session,
  input: z.output<(typeof REQUESTS)[N]['input']>,
) => z.output<(typeof REQUESTS)[N]['output']> | Promise<z.output<(typeof REQUESTS)[N]['output']>>;

export type Handlers<N extends RequestName> = { readonly [K in N]: Handler<K> };

/** Every request of the contract that a window's thread answers; `files.choose` is the host's own. */
export const HANDLERS: Handlers<Exclude<RequestName, 'files.choose'>> = {
  ...aboutRequests,
  ...bringInRequests,
  ...fileRequests,
  ...keptRequests,
  ...maskRequests,
  ...measuredRequests,
  ...noteRequests,
  ...projectRequests,
  ...userRequests,
};
