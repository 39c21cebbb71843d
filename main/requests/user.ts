import { listDemos } from '../user/demos.ts';
import { preferences, setPreferences } from '../user/preferences.ts';
import { forgetRecent, listRecent } from '../user/recent.ts';
import type { Handlers } from './handlers.ts';

export const userRequests: Handlers<
  'preferences.get' | 'preferences.set' | 'recent.list' | 'recent.forget' | 'demos.list'
> = {
  'preferences.get': async ({ settings }) => ({ preferences: await preferences(settings.userData) }),
  'preferences.set': async ({ settings }, { patch }) => ({
    preferences: await setPreferences(settings.userData, patch),
  }),
  'recent.list': async ({ settings }) => ({ recent: await listRecent(settings.userData) }),
  'recent.forget': async ({ settings }, { path }) => {
    await forgetRecent(settings.userData, path);
    return {};
  },
  'demos.list': async ({ settings }) => ({ demos: await listDemos(settings.assets) }),
};
