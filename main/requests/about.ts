import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import type { Handlers } from './handlers.ts';

const rows = z.array(z.record(z.string(), z.json()));

export const aboutRequests: Handlers<'about' | 'about.verification'> = {
  about: ({ settings }) => ({
    name: 'Channelwright',
    version: settings.version,
    host: settings.host,
    dialogs: settings.dialogs,
    platform: process.platform,
    parts: Object.fromEntries(
      (['electron', 'chrome', 'node', 'v8'] as const).flatMap((part) => {
        const version = process.versions[part];
        return version ? [[part, version]] : [];
      }),
    ),
  }),
  'about.verification': async ({ settings }) => {
    try {
      const text = await readFile(join(settings.assets, 'verification.json'), 'utf8');
      const found: unknown = JSON.parse(text);
      const table = rows.safeParse(Array.isArray(found) ? found : (found as { rows?: unknown }).rows);
      return { rows: table.success ? table.data : null };
    } catch {
      return { rows: null };
    }
  },
};
