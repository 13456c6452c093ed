import type { Interval } from '../../charts/types.ts';
import type { Since } from '../types.ts';
import type { GapContext, GapJudgement } from './types.ts';

/** What every sentence about gaps is made from. */
export interface GapFacts {
  readonly judgement: GapJudgement;
  readonly context: GapContext;
  readonly since: Since | null;
  readonly difference: Interval | null;
}
