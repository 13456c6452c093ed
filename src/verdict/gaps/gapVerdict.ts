import { newcombeInterval } from '../../charts/intervals/newcombe.ts';
import type { Interval } from '../../charts/types.ts';
import type { Outcome, PooledRate, Since, Verdict } from '../types.ts';
import { gapCautions } from './cautions.ts';
import { gapEvidence } from './evidence.ts';
import { gapHeadline } from './headline.ts';
import { gapNext } from './next.ts';
import type { GapContext, GapFinding, GapJudgement } from './types.ts';

const OUTCOME: Readonly<Record<GapFinding, Outcome>> = {
  risen: 'risen',
  fallen: 'fallen',
  steady: 'steady',
  'unsteady-baseline': 'cannot-say',
  'no-level': 'cannot-say',
  'too-few': 'too-early',
};

/** Puts what the gaps say into a verdict with its words. Directions are those of churn: longer gaps are a fall. */
export function writeGapVerdict(judgement: GapJudgement, context: GapContext): Verdict {
  const { finding, series, before, after } = judgement;
  const start = series?.kind === 'judged' ? series.start : null;
  const moved = finding === 'risen' || finding === 'fallen';
  const since: Since | null =
    start && moved
      ? {
          point: start.first,
          start: context.dates[start.first - 1]?.firstStart ?? null,
          candidates: start.candidates,
        }
      : null;
  const difference = before && after ? differenceOf(after, before) : null;
  const facts = { judgement, context, since, difference };
  return {
    outcome: OUTCOME[finding],
    headline: gapHeadline(facts),
    evidence: gapEvidence(facts),
    cautions: gapCautions(facts),
    next: gapNext(facts),
    since,
    before,
    after,
    difference,
  };
}

/** Of two shares Newcombe's interval; of two paces the same way of putting two intervals together, on the Poisson ones. */
function differenceOf(after: PooledRate, before: PooledRate): Interval {
  if (after.days === undefined) return newcombeInterval(after, before);
  const estimate = after.rate - before.rate;
  return {
    estimate,
    low: estimate - Math.hypot(after.rate - after.low, before.high - before.rate),
    high: estimate + Math.hypot(after.high - after.rate, before.rate - before.low),
  };
}
