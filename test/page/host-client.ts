import { type Client, createClient } from '../../main/contract/client.ts';
import { loopbackTransport } from '../../main/contract/loopback.ts';
import type { Sitting } from './desk.ts';

/** Asks the host as the page of this sitting does, in its window. */
export async function hostClient({ page, context, host: { origin } }: Sitting): Promise<Client> {
  const window = await page.evaluate(() => sessionStorage.getItem('channelwright-window'));
  const cookies = await context.cookies(origin);
  const cookie = cookies.map(({ name, value }) => `${name}=${value}`).join('; ');
  return createClient(loopbackTransport({ origin, window: window!, headers: { cookie, origin } }));
}
