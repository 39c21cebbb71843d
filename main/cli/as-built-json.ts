import type { AsBuilt } from '../../solver/asbuilt/as-built.ts';
import type { Restored } from '../../solver/asbuilt/restore.ts';

/** What a script reads: both results in the exchange form, and the drives. SI throughout. */
export function asBuiltJson({ drawn, result, restored, wider, says }: AsBuilt): object {
  return {
    format: 'channelwright-as-built',
    version: 1,
    drawn,
    made: result,
    restored: restored && drives(restored),
    wider: wider && drives(wider),
    says,
  };
}

const drives = ({ met, strain, settings, result }: Restored): object => ({ met, strain, settings, result });
