import type { Answer, Evidence } from './answer.ts';
import { cellsAnswer } from './cells.ts';
import { madeAnswer } from './made.ts';
import { pumpAnswer } from './pump.ts';
import { splitAnswer } from './split.ts';
import { trustAnswer } from './trust.ts';

/** The five answers, in the order they are asked. */
export const verdicts = (evidence: Evidence): readonly Answer[] => [
  splitAnswer(evidence),
  cellsAnswer(evidence),
  pumpAnswer(evidence),
  madeAnswer(evidence),
  trustAnswer(evidence),
];
