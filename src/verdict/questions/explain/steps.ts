import { chartSteps } from './chartSteps.ts';
import { judgeSteps } from './judgeSteps.ts';
import { readSteps } from './readSteps.ts';
import type { Explained, Step } from './types.ts';

/** How a verdict was reached, from the rows read to the words, with the numbers in the formulas. */
export function explainSteps(from: Explained): Step[] {
  return [...readSteps(from), ...chartSteps(from), ...judgeSteps(from)].filter(({ sentences }) => sentences.length > 0);
}
