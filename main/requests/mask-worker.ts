import { parentPort, workerData } from 'node:worker_threads';
import type { Chip } from '../../solver/chip/chip.ts';
import type { MaskFormat, MaskOptions, MaskReport } from '../contract/mask.ts';
import { makeMasks } from '../export/mask/make.ts';
import { refusal } from '../session/refusal.ts';

/** The thread of one mask job: it makes the files and ends. */
export interface MaskJob {
  readonly chip: Chip;
  readonly formats: readonly MaskFormat[];
  readonly options: MaskOptions;
  readonly version: string;
}

export type FromMaskJob =
  | { readonly kind: 'step'; readonly part: number; readonly says: string }
  | {
      readonly kind: 'made';
      readonly report: MaskReport;
      readonly files: readonly { readonly name: string; readonly content: Uint8Array }[];
    }
  | { readonly kind: 'failed'; readonly problem: ReturnType<typeof refusal> };

const port = parentPort!;
const send = (message: FromMaskJob): void => port.postMessage(message);
const { chip, formats, options, version } = workerData as MaskJob;

try {
  const made = await makeMasks(chip, {
    formats,
    options,
    version,
    made: new Date(),
    onStep: (part, says) => send({ kind: 'step', part, says }),
  });
  send({ kind: 'made', report: made.report, files: made.files });
} catch (error) {
  send({ kind: 'failed', problem: refusal(error) });
}
