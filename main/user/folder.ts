import { homedir } from 'node:os';
import { join } from 'node:path';

/** Where the program keeps what is the person's own: drafts, private copies, backups, preferences. */
export function userDataFolder(environment: NodeJS.ProcessEnv = process.env): string {
  const chosen = environment.CHANNELWRIGHT_DATA;
  if (chosen) return chosen;
  const home = homedir();
  if (process.platform === 'win32')
    return join(environment.APPDATA ?? join(home, 'AppData', 'Roaming'), 'Channelwright');
  if (process.platform === 'darwin') return join(home, 'Library', 'Application Support', 'Channelwright');
  return join(environment.XDG_DATA_HOME ?? join(home, '.local', 'share'), 'channelwright');
}
